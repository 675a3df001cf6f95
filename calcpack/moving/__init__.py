"""Where the loads stand: the effect at one place, and the place that governs."""
