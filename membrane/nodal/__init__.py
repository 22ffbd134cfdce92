"""Nodal patterns: where each mode stays at rest, how often, and what the trade calls it."""

from membrane.nodal.patterns import nodal_patterns

__all__ = ["nodal_patterns"]
