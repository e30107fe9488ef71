"""Facts that the key ``when`` compares: supplies that feed a subject, the voltage held across it, its rating."""

from collections.abc import Iterable

from rcrules.checks._subjects import View
from rcrules.networks import Board, Held
from rcrules.parts import Known
from rcrules.quantities import Spread


def facts(view: View, board: Board) -> dict[str, float]:
    """``supply_low`` … ``rated_voltage_high`` in volts; a fact that is not known is left out."""
    supplies = [held.voltage for held in _held(view.fed_from, board) if held.kind == "supply"]
    return {**_ends("supply", _hull(supplies)), **_ends("voltage", _across(view, board)), **_rating(view)}


def _held(nets: Iterable[str], board: Board) -> list[Held]:
    return [board.held[net] for net in nets if net in board.held]


def _hull(voltages: list[Spread | None]) -> Spread | None:
    """Lowest and highest of several; None where one is not known, or there is none."""
    known = [voltage for voltage in voltages if voltage is not None]
    if not known or len(known) < len(voltages):
        return None
    highest = max(voltage.nominal for voltage in known)
    return Spread(low=min(item.low for item in known), nominal=highest, high=max(item.high for item in known), unit="V")


def _across(view: View, board: Board) -> Spread | None:
    """Voltage between the two held nets of a part; None at a free node."""
    held = [item.voltage for item in _held(view.nets, board)]
    if len(view.nets) != 2 or len(held) != 2 or held[0] is None or held[1] is None:
        return None
    ends = sorted(held, key=lambda item: item.nominal if item else 0.0)
    lower, upper = ends[0], ends[1]
    if lower is None or upper is None:
        return None
    return Spread(
        low=upper.low - lower.high, nominal=upper.nominal - lower.nominal, high=upper.high - lower.low, unit="V"
    )


def _rating(view: View) -> dict[str, float]:
    """The weakest rating of the subject's capacitors."""
    ratings = [part.rated_voltage.si for part in view.parts if isinstance(part.rated_voltage, Known)]
    return {f"rated_voltage_{end}": min(ratings) for end in ("low", "nominal", "high")} if ratings else {}


def _ends(name: str, spread: Spread | None) -> dict[str, float]:
    if spread is None:
        return {}
    return {f"{name}_low": spread.low, f"{name}_nominal": spread.nominal, f"{name}_high": spread.high}
