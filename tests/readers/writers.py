"""Writers of every netlist format, for boards that tests make up."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from xml.sax.saxutils import quoteattr


@dataclass(frozen=True, slots=True, kw_only=True)
class Board:
    """Parts with their values, nets with their ends."""

    parts: Mapping[str, str]
    nets: Mapping[str, tuple[tuple[str, str], ...]]
    """Name -> reference and pin number of each end."""

    def pins_of(self, ref: str) -> list[tuple[str, str]]:
        """Pin number and net of each pin of a part, in the order of the numbers."""
        ends = [(number, net) for net, joined in self.nets.items() for part, number in joined if part == ref]
        return sorted(ends, key=lambda end: int(end[0]))


def xml(board: Board) -> str:
    parts = "".join(f"<comp ref={quoteattr(ref)}><value>{value}</value></comp>" for ref, value in board.parts.items())
    nets = "".join(
        f"<net code='{at}' name={quoteattr(net)}>"
        + "".join(f"<node ref={quoteattr(ref)} pin={quoteattr(pin)}/>" for ref, pin in ends)
        + "</net>"
        for at, (net, ends) in enumerate(board.nets.items())
    )
    return f"<export version='E'><components>{parts}</components><nets>{nets}</nets></export>"


def sexpr(board: Board) -> str:
    parts = "".join(f'(comp (ref "{ref}") (value "{value}"))' for ref, value in board.parts.items())
    nets = "".join(
        f'(net (code {at}) (name "{net}")' + "".join(f'(node (ref "{ref}") (pin "{pin}"))' for ref, pin in ends) + ")"
        for at, (net, ends) in enumerate(board.nets.items())
    )
    return f'(export (version "E") (components {parts}) (nets {nets}))'


def edif(board: Board) -> str:
    sizes = {ref: len(board.pins_of(ref)) for ref in board.parts}
    cells = "".join(
        f"(cell S{size} (cellType GENERIC) (view N (viewType NETLIST) (interface "
        + "".join(f"(port &{pin})" for pin in range(1, size + 1))
        + ")))"
        for size in sorted({*sizes.values()})
    )
    instances = "".join(
        f'(instance {ref} (viewRef N (cellRef S{sizes[ref]})) (property VALUE (string "{value}")))'
        for ref, value in board.parts.items()
    )
    nets = "".join(
        f'(net (rename N{at} "{net}") (joined '
        + "".join(f"(portRef &{pin} (instanceRef {ref}))" for ref, pin in ends)
        + "))"
        for at, (net, ends) in enumerate(board.nets.items())
    )
    top = f"(cell TOP (cellType GENERIC) (view N (viewType NETLIST) (interface) (contents {instances}{nets})))"
    return (
        "(edif B (edifVersion 2 0 0) (edifLevel 0) (keywordMap (keywordLevel 0)) "
        f"(library L (edifLevel 0) (technology (numberDefinition)) {cells}{top}) "
        "(design B (cellRef TOP (libraryRef L))))"
    )


def ipc_2581(board: Board) -> str:
    items = "".join(
        f'<BomItem OEMDesignNumberRef="I{ref}"><RefDes name="{ref}"/><Characteristics><Textual '
        f'textualCharacteristicName="VALUE" textualCharacteristicValue="{value}"/></Characteristics></BomItem>'
        for ref, value in board.parts.items()
    )
    parts = "".join(f'<Component refDes="{ref}"/>' for ref in board.parts)
    nets = "".join(
        f'<LogicalNet name="{net}">'
        + "".join(f'<PinRef componentRef="{ref}" pin="{pin}"/>' for ref, pin in ends)
        + "</LogicalNet>"
        for net, ends in board.nets.items()
    )
    return (
        '<IPC-2581 revision="B"><Content><StepRef name="s"/></Content><Bom name="b"><BomHeader><StepRef name="s"/>'
        f"</BomHeader>{items}</Bom><Ecad><CadData><Step name='s'>{parts}{nets}</Step></CadData></Ecad></IPC-2581>"
    )


def stars(board: Board) -> str:
    parts = "".join(f"{ref} {value}@X\n" for ref, value in board.parts.items())
    nets = "".join(
        f"*SIGNAL* {net}\n{' '.join(f'{ref}.{pin}' for ref, pin in ends)}\n" for net, ends in board.nets.items()
    )
    return f"*B*\n*PART*\n{parts}*NET*\n{nets}*END*\n"


def dollars(board: Board) -> str:
    parts = "".join(f"X ! D ! {value} ; {ref}\n" for ref, value in board.parts.items())
    nets = "".join(f"{net} ; {' '.join(f'{ref}.{pin}' for ref, pin in ends)}\n" for net, ends in board.nets.items())
    return f"(NETLIST)\n$PACKAGES\n{parts}$NETS\n{nets}$END\n"


def brackets(board: Board) -> str:
    parts = "".join(f"[\n{ref}\nX\n{value}\n]\n" for ref, value in board.parts.items())
    nets = "".join(
        "(\n" + net + "\n" + "".join(f"{ref}-{pin}\n" for ref, pin in ends) + ")\n" for net, ends in board.nets.items()
    )
    return parts + nets


def pin_list(board: Board) -> str:
    rows = "".join(f"{net},{ref},{pin},{board.parts[ref]}\n" for net, ends in board.nets.items() for ref, pin in ends)
    return f"net,part,pin,value\n{rows}"


def stamped(board: Board) -> str:
    parts = "".join(
        f" ( /4B61{at:04X} X {ref} {value}\n"
        + "".join(f"  ( {pin} {net} )\n" for pin, net in board.pins_of(ref))
        + " )\n"
        for at, (ref, value) in enumerate(board.parts.items())
    )
    return f"# of old\n(\n{parts})\n"


def spice(board: Board) -> str:
    elements = "".join(
        f"{ref} {' '.join(net for _, net in board.pins_of(ref))} {value}\n" for ref, value in board.parts.items()
    )
    return f"a board\n{elements}.end\n"


def tested(board: Board) -> str:
    """The bare-board test netlist, which has no values."""
    points = "".join(f"327{net:14}   {ref:6}-{pin:4}\n" for net, ends in board.nets.items() for ref, pin in ends)
    return f"P  JOB   B\n{points}999\n"


def nodes(board: Board) -> str:
    """The first of three files, which has no values."""
    nets = "".join(
        f"NET_NAME\n'{net}'\n" + "".join(f"NODE_NAME {ref} {pin}\n" for ref, pin in ends)
        for net, ends in board.nets.items()
    )
    return f"FILE_TYPE = EXPANDEDNETLIST;\n{nets}END.\n"


VALUED: Mapping[str, Callable[[Board], str]] = {
    "xml-netlist": xml,
    "sexpr-netlist": sexpr,
    "edif": edif,
    "ipc-2581": ipc_2581,
    "star-list": stars,
    "dollar-list": dollars,
    "bracket-list": brackets,
    "pin-list": pin_list,
    "parenthesised-list": stamped,
    "spice": spice,
}
BARE: Mapping[str, Callable[[Board], str]] = {"ipc-d-356": tested, "three-files": nodes}
WRITERS = {**VALUED, **BARE}
