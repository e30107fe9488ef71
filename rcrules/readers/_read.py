"""Tells sources apart by content and reads them."""

from collections.abc import Mapping
from functools import cache
from types import MappingProxyType

from rcrules import discovery
from rcrules.errors import UserMistake
from rcrules.project import FileFormat
from rcrules.readers._described import described
from rcrules.readers._export import Export, Reader, Source
from rcrules.readers._foreign import FOREIGN, refuse_foreign, unknown

_NO_COLUMNS: Mapping[str, str] = MappingProxyType({})


def read(source: Source, columns: Mapping[str, str] = _NO_COLUMNS, formats: tuple[FileFormat, ...] = ()) -> Export:
    """Read one source as the project describes it, else with the first reader that claims it.

    columns: what the project file's [columns] says: canonical name (``reference``, ``value``) to header text.
    formats: what its [[format]] tables say. Raises UserMistake where the content is foreign, broken or hostile.
    """
    own = described(source, formats) if formats else None
    if own is not None:
        return own
    refuse_foreign(source)
    for reader in readers():
        if reader.claims(source, columns):
            return reader.read(source, columns)
    raise unknown(source)


def known(source: Source) -> bool:
    """Whether any reader can make something of a source; what is damaged is known as well."""
    try:
        read(source)
    except UserMistake as error:
        return error.mistakes[0].problem != FOREIGN
    return True


@cache
def readers() -> tuple[Reader, ...]:
    """Every reader, in the order in which they are asked."""
    from rcrules import readers as room

    return tuple(sorted(discovery.members(room, "READER", Reader), key=lambda reader: reader.order))
