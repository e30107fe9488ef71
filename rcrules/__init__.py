"""Exports in, findings out: readers, design, parts, networks, events, problems, engine, measures, rulebook, checks, findings, reports."""

__version__ = "0.1.0"
