"""Measurements of speed: every contestant in one run, on one thread, by CPU time."""
