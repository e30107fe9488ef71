"""Facts of one table that cannot be true together."""

from typing import Final

from rcrules.levels import Level
from rcrules.project._model import PinFacts, SupplyFacts
from rcrules.tomlfile import Table

_ALWAYS: Final = "a level that the supply passes as it rises"


def check_supply(table: Table, facts: SupplyFacts) -> None:
    """A supply that never reaches the level from which it counts as up."""
    voltage, valid = facts.voltage, facts.valid
    if voltage is None or valid is None:
        return
    if valid.low > voltage.high if voltage.nominal >= 0 else valid.high < voltage.low:
        table.wrong("valid", "'valid' is never reached by 'voltage'", found=table.found("valid"), expected=_ALWAYS)


def check_pin(table: Table, facts: PinFacts) -> None:
    """Thresholds the wrong way round."""
    if facts.low is not None and facts.high is not None and _surely_above(facts.low, facts.high):
        table.wrong(
            "low", "'low' lies above 'high'", found=table.found("low"), expected="V_IL as 'low', V_IH as 'high'"
        )
    if facts.rising is not None and facts.falling is not None and facts.falling.low > facts.rising.high:
        expected = "a falling threshold below the rising one"
        table.wrong("falling", "'falling' lies above 'rising'", found=table.found("falling"), expected=expected)


def _surely_above(one: Level, other: Level) -> bool:
    """Whether a level lies above another one whatever their nets do; only levels of one form are compared."""
    if not one.nets and not other.nets:
        return one.offset is not None and other.offset is not None and one.offset.low > other.offset.high
    if one.offset != other.offset or len(one.nets) != 1 or len(other.nets) != 1:
        return False
    (share, net), (other_share, other_net) = one.nets[0], other.nets[0]
    return net == other_net and share.low > other_share.high
