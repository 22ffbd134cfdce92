"""Geometry scripts: each draws one outline and names its edges."""
