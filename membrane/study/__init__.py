"""The stage from a study file, or from plain data, to a validated study in SI units."""

from membrane.study.reader import read_study, study_from

__all__ = ["read_study", "study_from"]
