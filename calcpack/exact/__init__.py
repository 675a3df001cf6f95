"""Exact numbers, piecewise polynomials, linear algebra and formula trees; no beam words."""
