"""Frozen statements of what the engineer asked: beam, loads, effects, cover."""
