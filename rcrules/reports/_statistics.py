"""Statistics of a finding in words."""

from collections.abc import Iterator

from rcrules.findings import Finding
from rcrules.reports._words import in_percent, number


def statistics_texts(finding: Finding) -> Iterator[str]:
    """How many samples fail with the confidence interval, where most lie, and the root-sum-square range."""
    told = finding.statistics
    if told is None or finding.measured is None:
        return
    unit, percent = finding.measured.unit, in_percent(finding)
    share = told["fraction"]
    low, high = (f"{100 * share[end]:.3g} %" for end in ("low", "high"))
    counts = f"{told['failing']} of {told['samples']} samples ({' and '.join(told['distributions'])}) fail"
    yield f"{counts}: {100 * share['nominal']:.3g} %, with 95 % confidence {low} .. {high}"
    most, sums = told["quantiles"], told["root_sum_square"]
    within = " .. ".join(number(most[end], unit, percent=percent) for end in ("low", "high"))
    squared = " .. ".join(number(sums[end], unit, percent=percent) for end in ("low", "high"))
    yield f"99.73 % of the samples lie in {within}; root-sum-square {squared}"
