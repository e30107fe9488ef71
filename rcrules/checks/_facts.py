"""Facts that the key ``when`` compares: supplies that feed a subject, the voltage held across it, its rating."""

from collections.abc import Iterable

from rcrules.checks._views import View
from rcrules.networks import Board, Held
from rcrules.parts import Known
from rcrules.quantities import Spread


def facts(view: View, board: Board) -> dict[str, float]:
    """``supply_low`` … ``rated_voltage_high`` in volts; a fact that is not known is left out."""
    supplies = [held for held in _held(view.fed_from, board) if held.kind == "supply"]
    return {**_ends("supply", _hull(supplies)), **_ends("voltage", _across(view, board)), **_rating(view)}


def unknown(view: View, board: Board) -> list[Held]:
    """Held nets around the subject whose voltage is not known."""
    return [held for held in _held((*view.fed_from, *view.around), board) if held.voltage is None]


def _held(nets: Iterable[str], board: Board) -> list[Held]:
    return [board.held[net] for net in dict.fromkeys(nets) if net in board.held]


def _hull(held: list[Held]) -> Spread | None:
    """Lowest and highest voltage of several nets; None where one is not known, or there is none."""
    known = [item.voltage for item in held if item.voltage is not None]
    if not known or len(known) < len(held):
        return None
    highest = max(item.nominal for item in known)
    return Spread(low=min(item.low for item in known), nominal=highest, high=max(item.high for item in known), unit="V")


def _across(view: View, board: Board) -> Spread | None:
    """Voltage between two held nets; at free nodes from nothing to the widest that resistors alone could pass on."""
    if len(view.parts) == 1 and view.parts[0].across is not None:
        return view.parts[0].across
    held = _held(view.around, board)
    if any(net not in board.held for net in view.around):
        return None  # an end that nothing holds may be anywhere
    if len(held) == 2 and set(view.nets) == {item.net for item in held}:
        lower, upper = sorted(held, key=lambda item: item.voltage.nominal if item.voltage else 0.0)
        return _between(lower.voltage, upper.voltage)
    hull = _hull(held)
    if hull is None:
        return None
    return Spread(
        low=0.0,
        nominal=max(hull.nominal, 0.0) - min(hull.low, 0.0),
        high=max(hull.high, 0.0) - min(hull.low, 0.0),
        unit="V",
    )


def _between(lower: Spread | None, upper: Spread | None) -> Spread | None:
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
