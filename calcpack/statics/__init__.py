"""Statics: the beam cut into bodies, its stability, the plan of solution, influence lines."""
