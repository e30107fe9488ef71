"""The rooms in the order of the flow.

readers, design, parts, networks, events, problems, measures, rulebook, checks, inventory, findings, reports,
comparison, waivers, proposals, starter, derivation, statistics, examples;
``pipeline`` is the whole flow on one page, and ``engine`` below them knows numbers only.
"""

__version__ = "0.1.0"
