"""Facts that the key ``when`` compares: supplies that feed a subject, the voltage across it, what its parts are."""

from collections.abc import Iterable, Mapping

from rcrules.checks._views import View
from rcrules.networks import Board, Held
from rcrules.parts import Known, RatedPart
from rcrules.quantities import Spread
from rcrules.vocabulary import technology


def facts(view: View, board: Board) -> Mapping[str, float]:
    """``supply_low`` … ``tolerance``, SI; a fact that is not known is left out. Worked out once a view."""
    if not view.told:
        view.told.update(_facts(view, board))
    return view.told


def _facts(view: View, board: Board) -> dict[str, float]:
    supplies = [held for held in _held(view.fed_from, board) if held.kind == "supply"]
    held = {**_ends("supply", _hull(supplies)), **_ends("voltage", _across(view, board))}
    return {**held, **_rating(view), **_of_parts(view)}


def words(view: View) -> dict[str, frozenset[str]]:
    """Facts that are words, each with all that the subject has; '' among them = one that is not known."""
    capacitors = [part.dielectric or "" for part in view.parts if part.kind == "capacitor"]
    return {
        "dielectric": frozenset(capacitors),
        "technology": frozenset(map(technology, capacitors)),
        "size": frozenset(part.size for part in view.parts),
        "sheet": frozenset(part.part.sheet for part in view.parts),
        "kind": frozenset(part.kind for part in view.parts),
        "role": frozenset(view.roles),
        "kind_fed": frozenset(view.kinds_fed),
        "certainty": frozenset((view.certainty,)),
        "polarised": frozenset("yes" if part.polarised else "no" for part in view.parts if part.kind == "capacitor"),
    }


def _of_parts(view: View) -> dict[str, float]:
    """Of the parts that have a value: the largest value of a kind, the widest tolerance, the weakest power rating."""
    valued = [(part, part.value.si) for part in view.parts if isinstance(part.value, Known)]
    found: dict[str, list[float]] = {
        "resistance": [si for part, si in valued if part.kind == "resistor"],
        "capacitance": [si for part, si in valued if part.kind == "capacitor"],
    }
    largest = {name: max(values) for name, values in found.items() if values}
    tolerances = [tolerance(part) for part, _ in valued]
    if tolerances and None not in tolerances:
        largest["tolerance"] = max(item for item in tolerances if item is not None)
    powers = [part.rated_power.si for part, _ in valued if isinstance(part.rated_power, Known)]
    return largest | ({"rated_power": min(powers)} if powers else {})


def tolerance(part: RatedPart) -> float | None:
    """The wider side of a tolerance that an input gives."""
    shares = [share for share in part.shares if share.name == "tolerance" and share.given]
    return max((max(-share.low, share.high) for share in shares), default=None)


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
    names = ("rated_voltage", *(f"rated_voltage_{end}" for end in ("low", "nominal", "high")))
    return dict.fromkeys(names, min(ratings)) if ratings else {}


def _ends(name: str, spread: Spread | None) -> dict[str, float]:
    if spread is None:
        return {}
    return {f"{name}_low": spread.low, f"{name}_nominal": spread.nominal, f"{name}_high": spread.high}
