"""A circuit while a problem is being posed: terminals by name, branches between them."""

from collections import deque
from collections.abc import Iterable
from dataclasses import dataclass, field

from rcrules.engine import Shape
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.problems import Form, Junction, Names

ZERO = "0 V"
"""The terminal that stands for all grounds."""
LARGEST = 60
"""Free terminals beyond which a network is not solved."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Arm:
    """A resistor or capacitor of the circuit."""

    ref: str
    kind: str
    a: str
    b: str
    value: Form
    leaks: bool = False
    """True: the dielectric of a capacitor, which may conduct, but is no path that anything may rely on."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Valve:
    """A diode of the circuit that may conduct."""

    ref: str
    anode: str
    cathode: str
    drop: Form
    ohms: Form
    breakdown: float | None
    """Reverse voltage beyond which nothing can be said [V]; None = it never gets there."""


@dataclass(slots=True)
class Circuit:
    """Terminals and branches; held terminals are numbered after the free ones."""

    free: list[str] = field(default_factory=list)
    held: list[str] = field(default_factory=list)
    arms: list[Arm] = field(default_factory=list)
    draws: list[tuple[str, Form]] = field(default_factory=list)
    """Free terminal, current drawn out of it [A]."""
    joints: dict[str, str] = field(default_factory=dict)
    """Held terminal -> the joint whose voltage it has; the common 0 V has none."""
    valves: list[Valve] = field(default_factory=list)
    amplifier: tuple[str, str, str] | None = None
    """Terminals of an ideal amplifier's plus and minus input and of its output, which is free."""

    def terminal(self, name: str) -> int:
        """Number of a terminal. Raises ValueError."""
        if name in self.free:
            return self.free.index(name)
        return len(self.free) + self.held.index(name)

    def hold(self, name: str, joint: str | None = None) -> str:
        """Make sure that a held terminal is there, with the voltage of a joint."""
        if name not in self.held:
            self.held.append(name)
        if joint is not None:
            self.joints[name] = joint
        return name

    def copy(self) -> "Circuit":
        """A circuit of its own with the same branches."""
        return Circuit(
            free=list(self.free),
            held=list(self.held),
            arms=list(self.arms),
            draws=list(self.draws),
            joints=dict(self.joints),
            valves=list(self.valves),
            amplifier=self.amplifier,
        )

    def amplifiers(self) -> tuple[tuple[int, int, int], ...]:
        """The amplifier by terminal number, if there is one."""
        if self.amplifier is None:
            return ()
        plus, minus, output = map(self.terminal, self.amplifier)
        return ((plus, minus, output),)

    def followed(self) -> list[Arm]:
        """What an amplifier joins besides branches: its inputs, and the output that follows them."""
        if self.amplifier is None:
            return []
        plus, minus, output = self.amplifier
        ends = ((plus, minus), (plus, output), (minus, output))
        return [Arm(ref="", kind="resistor", a=a, b=b, value=()) for a, b in ends if a != b]

    def amps(self) -> tuple[tuple[int, Form], ...]:
        """Currents drawn, by terminal number."""
        return tuple((self.terminal(name), form) for name, form in self.draws)

    def diodes(self) -> tuple[Junction, ...]:
        """Diodes that may conduct, by terminal number."""
        return tuple(
            Junction(
                anode=self.terminal(item.anode),
                cathode=self.terminal(item.cathode),
                drop=item.drop,
                ohms=item.ohms,
                breakdown=item.breakdown,
                name=item.ref if item.breakdown is not None else "",
            )
            for item in self.valves
        )

    def links(self) -> list[Arm]:
        """All branches and diodes as resistors: what is joined to what."""
        arms = [Arm(ref=arm.ref, kind="resistor", a=arm.a, b=arm.b, value=arm.value) for arm in self.arms]
        return [
            *arms,
            *(Arm(ref=v.ref, kind="resistor", a=v.anode, b=v.cathode, value=v.ohms) for v in self.valves),
        ]

    def of(self, kind: str) -> list[Arm]:
        """Branches of a kind, in the order of the shape."""
        return [arm for arm in self.arms if arm.kind == kind]

    def values(self, kind: str) -> tuple[Form, ...]:
        """Their values."""
        return tuple(arm.value for arm in self.of(kind))

    def leaks(self) -> tuple[int, ...]:
        """Numbers of the resistors that are dielectrics."""
        return tuple(index for index, arm in enumerate(self.of("resistor")) if arm.leaks)

    def shape(self, further: Iterable[Arm] = ()) -> Shape:
        """The topology, with further resistors after the circuit's own. Raises Unmeasurable where it is too large."""
        if len(self.free) > LARGEST:
            raise Unmeasurable(f"the network has {len(self.free)} nodes; more than {LARGEST} are not solved")
        index = {name: number for number, name in enumerate((*self.free, *self.held))}
        resistors = [(index[arm.a], index[arm.b]) for arm in (*self.of("resistor"), *further)]
        capacitors = [(index[arm.a], index[arm.b]) for arm in self.of("capacitor")]
        return Shape(len(self.free), len(self.held), tuple(resistors), tuple(capacitors))

    def names(self, after: Iterable[Arm] = (), before: Iterable[Arm] = ()) -> Names:
        """Names in the order of the shape, with further resistors after and before the event."""
        own = [arm.ref for arm in self.of("resistor")]
        return Names(
            terminals=(*self.free, *self.held),
            resistors=(*own, *(arm.ref for arm in after)),
            capacitors=tuple(arm.ref for arm in self.of("capacitor")),
            earlier=(*own, *(arm.ref for arm in before)),
            diodes=tuple(item.ref for item in self.valves),
        )

    def floating(self, further: Iterable[Arm] = ()) -> list[str]:
        """Free terminals without a resistive path to a held one."""
        outputs = [self.amplifier[2]] if self.amplifier else []
        reached = {*self.driven([*self.held, *outputs], further), *outputs}
        return [name for name in self.free if name not in reached]

    def driven(self, sources: Iterable[str], further: Iterable[Arm] = ()) -> dict[str, int]:
        """Free terminals that resistors join to a source, through free terminals -> number of resistors between."""
        free = set(self.free)
        next_to: dict[str, list[str]] = {}
        for arm in (*(arm for arm in self.of("resistor") if not arm.leaks), *further):
            next_to.setdefault(arm.a, []).append(arm.b)
            next_to.setdefault(arm.b, []).append(arm.a)
        reached: dict[str, int] = {}
        queue = deque((name, 0) for name in sources)
        while queue:
            here, steps = queue.popleft()
            for there in next_to.get(here, ()):
                if there in free and there not in reached:
                    reached[there] = steps + 1
                    queue.append((there, steps + 1))
        return reached
