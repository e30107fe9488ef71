"""Grounds: by name, by counted ground pins, by a bonded shield, or as the one net that most capacitors share."""

from typing import Final

from rcrules.networks import _held_claims as say
from rcrules.networks._held_verdict import Verdict, Verdicts, keys
from rcrules.networks._scene import Scene

SHUNT_OHMS: Final = 10.0
"""Below, a resistor in a ground lead measures its current."""
_LEAST_CAPACITORS: Final = 4
_SHIELD_KINDS: Final = frozenset(("connector", "mechanical", "resistor", "capacitor", "test-point", "diode", "ferrite"))


def ground(scene: Scene, joint: str, _: Verdicts) -> Verdict | None:
    """A ground by its name, by more ground pins than supply pins on it, or as a bonded shield."""
    grounds, supplies = scene.says(joint, say.GROUND), scene.says(joint, say.SUPPLY, say.SOURCE)
    hints = scene.hints(joint)
    named = next((f"name {net}" for net in scene.members[joint] if hints and hints[0].kind == "ground"), None)
    strong = named is not None and hints[0].strong
    against = bool(hints) and hints[0].kind == "supply" and hints[0].strong
    real = [pin for pin in grounds if scene.kind(pin.ref) != "connector"]
    lifted = named is None and len(real) == 1 and _is_lifted(scene, joint)
    enough = (
        not lifted
        and len(grounds) > len(supplies)
        and not against
        and (bool(real) or named is not None or len(grounds) > 1)
    )
    bonded = (named is not None or bool(grounds)) and not supplies and _bonded(scene, joint)
    if not (strong or enough or bonded):
        return None
    evidence = () if named is None else (named,)
    return Verdict(kind="ground", volts=0.0, evidence=(*evidence, *keys(grounds)), sure=strong or bool(real))


def _is_lifted(scene: Scene, joint: str) -> bool:
    """A single ground pin on resistors that are no shunts: an adjustable regulator's, lifted by a divider."""
    return any(item.ohms is not None and item.ohms >= SHUNT_OHMS for item in scene.resistors(joint))


def _bonded(scene: Scene, joint: str) -> bool:
    """A shield or common: nothing but connectors, holes, resistors and capacitors on it, and a resistor at it."""
    kinds = {scene.kind(pin.ref) for pin in scene.pins[joint]}
    return kinds <= _SHIELD_KINDS and "resistor" in kinds


def only_ground(scene: Scene, verdicts: Verdicts) -> Verdicts:
    """On a board without any ground so far, the net that most capacitors share, if it is far ahead of all others."""
    if any(verdict.kind == "ground" for verdict in verdicts.values()):
        return {}
    counts = sorted(((len(scene.capacitors(joint)), joint) for joint in scene.members), reverse=True)
    ahead = len(counts) > 1 and counts[0][0] >= max(_LEAST_CAPACITORS, 2 * counts[1][0])
    if not ahead or counts[0][1] in verdicts:
        return {}
    most, joint = counts[0]
    return {joint: Verdict(kind="ground", volts=0.0, evidence=(f"{most} capacitors share it",), sure=False)}
