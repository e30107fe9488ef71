"""The step and the BOM of an IPC-2581 file that belong together, as one export."""

from collections.abc import Sequence
from dataclasses import dataclass, field
from typing import Final

from rcrules.readers._component import Component
from rcrules.readers._export import Export, Source
from rcrules.readers._ipc_2581_bom import Bom, Item, split_value
from rcrules.readers._ipc_2581_step import Step, is_open, prefix
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._netlist import Netlist

_SHOWN: Final = 5


@dataclass(slots=True, kw_only=True)
class Contents:
    """Everything of use that the file holds."""

    wanted: list[str] = field(default_factory=list)
    """Steps that the content names."""
    steps: dict[str, Step] = field(default_factory=dict)
    boms: dict[int, Bom] = field(default_factory=dict)
    """By the line on which each begins."""
    pin_names: dict[str, dict[str, str]] = field(default_factory=dict)
    """Names of pins by package and number."""
    enterprises: dict[str, str] = field(default_factory=dict)
    makers: dict[str, tuple[str, str]] = field(default_factory=dict)
    """Maker's part number and enterprise by design number."""
    nameless: int = 0
    """Pins of logical nets that name no part."""


def join(source: Source, reader: str, contents: Contents) -> Export:
    """One export of the best step and of its BOM. Raises UserMistake where there are neither parts nor nets."""
    steps = sorted(contents.steps.values(), key=lambda step: _rank(step, contents.wanted))
    step = steps[0] if steps else Step(name="", line=1)
    boms = sorted((bom for bom in contents.boms.values() if bom.items), key=lambda bom: step.name not in bom.steps)
    if not step.components and not step.connected and not boms:
        raise _empty(source)
    netlist = Netlist(source, reader)
    _tell_left_out(netlist, steps, boms)
    entries = _entries(netlist, boms[0]) if boms else {}
    refs = {*step.components, *entries, *(ref for _, ref, _ in step.connections())}
    before = prefix(refs, step.name)
    packages = _add_parts(netlist, contents, step, entries, before)
    _add_nets(netlist, contents, step, packages, before)
    return netlist.export("netlist" if step.connected or step.nets else "bom")


def _rank(step: Step, wanted: Sequence[str]) -> tuple[bool, bool, bool]:
    return not step.components, not step.connected, step.name not in wanted


def _tell_left_out(netlist: Netlist, steps: Sequence[Step], boms: Sequence[Bom]) -> None:
    others = [step for step in steps[1:] if step.components or step.connected]
    if others:
        text = f"only step {steps[0].name!r} is read; parts or nets stand in {_listed([o.name for o in others])} too"
        netlist.remark(others[0].line, text)
    if len(boms) > 1:
        text = f"only BOM {boms[0].name!r} is read; the file also holds {_listed([bom.name for bom in boms[1:]])}"
        netlist.remark(boms[1].line, text)


def _entries(netlist: Netlist, bom: Bom) -> dict[str, tuple[Item, str, bool, int]]:
    """Item, package, whether populated, and line of each reference of a BOM; the first entry of one stands."""
    found: dict[str, tuple[Item, str, bool, int]] = {}
    for item in bom.items:
        for ref, package, populated, line in item.places:
            if ref in found:
                netlist.remark(line, f"{ref} is listed again; line {found[ref][3]} stands")
            elif ref:
                found[ref] = item, package, populated, line
        quantity = item.quantity.strip().removesuffix(".0")
        if item.places and quantity.isdecimal() and quantity != str(len(item.places)):
            refs = _listed([place[0] for place in item.places])
            netlist.remark(item.line, f"quantity {quantity}, but {len(item.places)} references: {refs}")
    return found


def _add_parts(
    netlist: Netlist, contents: Contents, step: Step, entries: dict[str, tuple[Item, str, bool, int]], before: str
) -> dict[str, str]:
    """Add every part of step, BOM and nets; the package of each reference."""
    packages: dict[str, str] = {}
    ends: dict[str, int] = {}
    for (_, ref, _), line in step.connections().items():
        ends.setdefault(ref, line)
    for ref in dict.fromkeys((*step.components, *entries, *ends)):
        component = step.components.get(ref)
        if component is None:
            component = Component(ref=ref, line=entries[ref][3] if ref in entries else ends[ref])
        if ref in entries:
            _complete(component, contents, *entries[ref])
        _take_value(component)
        packages[ref] = component.footprint
        component.ref = ref.removeprefix(before)
        netlist.add_component(component)
    unlisted = [ref for ref in ends if ref not in step.components and ref not in entries]
    if unlisted:
        text = f"{len(unlisted)} parts stand in the nets alone: {_listed(unlisted)}"
        netlist.remark(ends[unlisted[0]], text)
    return packages


def _complete(component: Component, contents: Contents, item: Item, package: str, populated: bool, line: int) -> None:
    """Add what the BOM says of a part."""
    component.fields = [*item.entries, *component.fields]
    component.footprint = component.footprint or package
    component.description = item.description
    component.symbol = component.symbol or item.number
    if item.number:
        component.fields.append(("OEMDesignNumberRef", item.number, item.line))
    part, enterprise = contents.makers.get(item.number, ("", ""))
    if part:
        component.fields.append(("MPN", part, item.line))
        component.fields.append(("Manufacturer", contents.enterprises.get(enterprise, enterprise), item.line))
    if not populated:
        component.omitted = f"populate = false in line {line}"


def _take_value(component: Component) -> None:
    value, component.fields = split_value(tuple(component.fields))
    if value is not None:
        component.value, component.value_line = value[1] or "", value[2]


def _add_nets(netlist: Netlist, contents: Contents, step: Step, packages: dict[str, str], before: str) -> None:
    """Add every net with its pins; those of 'no net' are open."""
    connections = step.connections()
    nets: dict[str, list[tuple[str, str, int]]] = {net: [] for net in step.nets}
    for (net, ref, pin), line in connections.items():
        nets.setdefault(net, []).append((ref, pin, line))
    net_before = prefix((net for net in nets if not is_open(net)), step.name)
    for net, ends in nets.items():
        for ref, pin, line in ends:
            name = contents.pin_names.get(packages.get(ref, ""), {}).get(pin, "")
            node = ref.removeprefix(before), pin, name, "", line
            (netlist.add_open if is_open(net) else netlist.add_node)(node)
        if not is_open(net):
            netlist.add_net(net.removeprefix(net_before), "", step.nets.get(net) or ends[0][2])
    _tell_source(netlist, contents, step)


def _tell_source(netlist: Netlist, contents: Contents, step: Step) -> None:
    line = next(iter(step.connections().values()), step.line)
    if step.logical:
        netlist.remark(line, "connectivity is that of the logical nets (LogicalNet)")
    elif step.pads:
        netlist.remark(line, "connectivity is that of the pads (Set, PinRef): the file has no logical nets")
    elif step.components:
        netlist.remark(line, "the file connects nothing: neither logical nets nor pads name pins; give a netlist too")
    if contents.nameless:
        netlist.remark(line, f"{contents.nameless} pins of logical nets that name no part are left out")
    differing = step.contradictions()
    if differing:
        ref, pin, net, other, at = differing[0]
        text = (
            f"{len(differing)} pads are on other nets than in the logical nets, which stand: the first is pin {pin} of"
        )
        netlist.remark(at, f"{text} {ref}, on {other!r} instead of {net!r}")


def _listed(names: Sequence[str]) -> str:
    more = f" and {len(names) - _SHOWN} more" if len(names) > _SHOWN else ""
    return ", ".join(shorten(name) for name in names[:_SHOWN]) + more


def _empty(source: Source) -> Exception:
    return refusal(
        source.name,
        "the IPC-2581 file holds neither parts nor nets",
        line=1,
        found="no BOM item, component, logical net or pad with a pin",
        expected="an export with BOM, components and nets",
        do="export it again in the mode that includes all of these (full, or user-defined)",
    )
