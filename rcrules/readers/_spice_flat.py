"""The deck without its subcircuits: every element of every instance under the path of its instances."""

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field
from typing import Final

from rcrules.errors import Place, UserMistake
from rcrules.readers import _bounds
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._remarks import Remarks
from rcrules.readers._spice_cards import Card
from rcrules.readers._spice_elements import CONTROLLED, Element, Model, element, wanted
from rcrules.readers._spice_sums import Scope

MAX_DEPTH: Final = 64
"""Of subcircuits in subcircuits."""
_GROUND: Final = frozenset({"0", "gnd"})
_READ: Final = frozenset({".model", ".param", ".params", ".global", ".subckt", ".ends", ".title"})
_NO_CIRCUIT: Final = re.compile(
    r"\.(?:op|ac|dc|tran?|noise|four|tf|sens|disto|pz|print|plot|probe|save|meas(?:ure)?|opt(?:ions?)?|temp|ic|nodeset"
    r"|width|step|backanno|csparam)"
)


@dataclass(slots=True, kw_only=True)
class Block:
    """The deck itself, or a subcircuit, as written."""

    name: str = ""
    ports: tuple[str, ...] = ()
    defaults: tuple[tuple[str, str], ...] = ()
    cards: list[Card] = field(default_factory=list)
    blocks: dict[str, "Block"] = field(default_factory=dict)
    models: dict[str, Model] = field(default_factory=dict)
    parameters: list[tuple[str, str]] = field(default_factory=list)
    globals: set[str] = field(default_factory=set)

    def is_device(self) -> bool:
        """Whether it is the model of a device: it has controlled sources, which no board holds."""
        return any(card.head[:1].upper() in CONTROLLED for card in self.cards)


@dataclass(frozen=True, slots=True, kw_only=True)
class Placed:
    """An element of the flat deck."""

    ref: str
    place: Place
    element: Element
    nets: tuple[str, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class _Instance:
    path: str
    block: Block
    scope: Scope
    nets: dict[str, str]
    """Ports in lower case -> nets."""
    outer: "_Instance | None" = None

    def find(self, name: str) -> tuple[Block, Scope] | None:
        """A subcircuit that is visible here, with the parameters that are known where it stands."""
        level: _Instance | None = self
        while level is not None:
            if name in level.block.blocks:
                return level.block.blocks[name], level.scope
            level = level.outer
        return None


def gathered(file: str, cards: Iterator[Card], remarks: Remarks) -> Block:
    """The deck as a tree of blocks. Raises UserMistake where definitions do not match their ends."""
    stack = [Block()]
    for card in cards:
        line = card.place.line
        if card.head == ".subckt":
            if len(card.words) < 2 or len(stack) > MAX_DEPTH:
                raise refusal(card.place.file, "a subcircuit without a name, or too deep", line=line, expected=None)
            inner = _definition(card)
            stack[-1].blocks.setdefault(inner.name.lower(), inner)
            stack.append(inner)
        elif card.head == ".ends":
            if len(stack) == 1:
                raise refusal(card.place.file, ".ends without a .subckt before it", line=line, expected=None)
            stack.pop()
        else:
            _take(stack[-1], card, remarks)
    if len(stack) > 1:
        raise refusal(
            file,
            "a subcircuit is not closed",
            found=shorten(stack[-1].name),
            expected="a line .ends",
            do="export the deck again",
        )
    return stack[0]


def _definition(card: Card) -> Block:
    ports = tuple(word.lower() for word in card.words[2:] if word.lower() not in {"params:", "params"})
    return Block(name=card.words[1], ports=ports, defaults=card.named)


def _take(block: Block, card: Card, remarks: Remarks) -> None:
    if not card.head.startswith("."):
        block.cards.append(card)
    elif card.head in {".param", ".params"}:
        block.parameters.extend(card.named)
    elif card.head == ".model" and len(card.words) > 2:
        block.models[card.words[1].lower()] = Model(kind=card.words[2].lower(), numbers=dict(card.named))
    elif card.head == ".global":
        block.globals.update(word.lower() for word in card.words[1:])
    elif card.head not in _READ and _NO_CIRCUIT.fullmatch(card.head) is None:
        remarks.add(card.place, f"{shorten(card.words[0])!r} is not read; what it defines is not known")


class Flattener:
    """Goes through the instances without recursion."""

    def __init__(self, file: str, deck: Block, remarks: Remarks, most: int) -> None:
        self._file, self._deck, self._remarks, self._most = file, deck, remarks, most
        self._globals = {*_GROUND, *deck.globals}
        self._count = 0
        self._told: set[str] = set()

    def placed(self) -> Iterator[Placed]:
        """Every element. Raises UserMistake: subcircuits within themselves, too many parts, wrong numbers of nodes."""
        top = _Instance(path="", block=self._deck, scope=_scope(self._deck, None), nets={})
        stack = [(top, iter(self._deck.cards))]
        while stack:
            instance, waiting = stack[-1]
            card = next(waiting, None)
            if card is None:
                stack.pop()
                continue
            self._count += 1
            _bounds.bound(card.place.file, card.place.line or 1, "parts", self._count, self._most)
            inner = self._inner(instance, card) if card.head.startswith("x") else None
            if isinstance(inner, _Instance):
                self._refuse_within_itself(card, [held for held, _ in stack], inner)
                stack.append((inner, iter(inner.block.cards)))
            elif inner is not None:
                yield inner
            elif wanted(card) != 0:
                yield self._single(instance, card)

    def _single(self, instance: _Instance, card: Card) -> Placed:
        models: dict[str, Model] = {}
        level: _Instance | None = instance
        while level is not None:
            models = {**level.block.models, **models}
            level = level.outer
        found = element(card, models, instance.scope)
        asked = wanted(card)
        if not found.nodes or (asked == 2 and len(found.nodes) < 2):
            raise self._miscounted(card, f"{len(found.nodes)} nodes", f"{asked or 'some'} nodes")
        ref = instance.path + card.words[0].upper()
        for text in found.remarks:
            self._remarks.add(card.place, f"{ref}: {text}")
        nets = tuple(self._net(instance, node) for node in found.nodes)
        return Placed(ref=ref, place=card.place, element=found, nets=nets)

    def _inner(self, instance: _Instance, card: Card) -> "_Instance | Placed":
        """The instance of a subcircuit; one part where it is not known or is the model of a device."""
        *nodes, name = [word for word in card.words[1:] if word.lower() not in {"params:", "params"}] or [""]
        ref = instance.path + card.words[0].upper()
        _bounds.named(card.place.file, card.place.line or 1, "a reference", ref)
        nets = tuple(self._net(instance, node) for node in nodes)
        known = instance.find(name.lower())
        if known is None or known[0].is_device():
            self._tell_once(card, name, device=known is not None)
            ports = known[0].ports if known is not None and len(known[0].ports) == len(nodes) else ()
            kind = Element(nodes=tuple(nodes), value=name, symbol=f"IC {name}", pin_names=ports)
            return Placed(ref=ref, place=card.place, element=kind, nets=nets)
        block, outside = known
        if len(nodes) != len(block.ports):
            raise self._miscounted(card, f"{len(nodes)} nodes", f"{len(block.ports)}, as many as {name} has ports")
        scope = _scope(block, outside)
        for key, text in card.named:
            scope.put(key, text, instance.scope)
        ends = dict(zip(block.ports, nets, strict=True))
        return _Instance(path=f"{ref}/", block=block, scope=scope, nets=ends, outer=instance)

    def _net(self, instance: _Instance, node: str) -> str:
        folded = node.lower()
        if folded in self._globals:
            return "0" if folded in _GROUND else node
        if folded in instance.nets:
            return instance.nets[folded]
        return instance.path + node

    def _tell_once(self, card: Card, name: str, *, device: bool) -> None:
        if name.lower() in self._told:
            return
        self._told.add(name.lower())
        why = "is the model of a device (it has controlled sources)" if device else "is not defined here"
        self._remarks.add(card.place, f"{shorten(name)!r} {why}; each instance is taken as one part")

    def _refuse_within_itself(self, card: Card, held: Sequence[_Instance], inner: _Instance) -> None:
        if len(held) > MAX_DEPTH or any(level.block is inner.block for level in held):
            chain = " -> ".join([*(level.block.name or "the deck" for level in held[-8:]), inner.block.name])
            raise refusal(
                card.place.file,
                "a subcircuit that contains itself",
                line=card.place.line,
                found=shorten(chain, 200),
                expected=f"subcircuits in subcircuits, at most {MAX_DEPTH} deep",
                do="correct the definitions",
            )

    def _miscounted(self, card: Card, found: str, expected: str) -> UserMistake:
        return refusal(
            card.place.file,
            f"{shorten(card.words[0])} has a wrong number of nodes",
            line=card.place.line,
            found=found,
            expected=expected,
            do="correct the line; a '+' continues the one before",
        )


def _scope(block: Block, outer: Scope | None) -> Scope:
    scope = Scope(outer)
    for name, text in (*block.defaults, *block.parameters):
        scope.put(name, text)
    return scope
