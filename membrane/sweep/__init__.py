"""Sweeps: many variants of a study, their answers kept in a store that survives a kill."""
