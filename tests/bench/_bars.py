"""How a number stands to its bar."""


def held(value: float, bar: float, *, least: bool = False) -> str:
    """``0.81 of the bar 1.5, met``; least: the bar is the least that will do, else the most."""
    met = value >= bar if least else value <= bar
    return f"{value / bar:.2f} of the bar {bar:,.4g}, {'met' if met else 'MISSED'}"
