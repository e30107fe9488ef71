"""What day it is; the only clock of the product."""

import os
from datetime import UTC, date, datetime

from rcrules.errors import Mistake, Place, UserMistake


def today() -> date:
    """The day by which waivers expire: of SOURCE_DATE_EPOCH if set, else of the clock. Raises UserMistake."""
    text = os.environ.get("SOURCE_DATE_EPOCH")
    if not text:
        return datetime.now(UTC).date()
    if not text.isdecimal() or len(text) > 11:
        place = Place(file="SOURCE_DATE_EPOCH")
        raise UserMistake(Mistake(place=place, problem="not a time", found=text, expected="seconds since 1970"))
    return datetime.fromtimestamp(int(text), UTC).date()
