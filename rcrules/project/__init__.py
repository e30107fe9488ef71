"""The project file: rcrules.toml in, Project out."""

from rcrules.project._facts import NUMBERS, line_for
from rcrules.project._load import FILE_NAME, find, load, read
from rcrules.project._match import is_ground, match, net_facts, part_facts, pin_facts, ranked, supply_for, unmatched
from rcrules.project._model import (
    FileFormat,
    NetFacts,
    Notice,
    NumberField,
    NumberPattern,
    PartFacts,
    PathStep,
    PinFacts,
    Project,
    Records,
    SupplyFacts,
    XmlPath,
)

__all__ = [
    "FILE_NAME",
    "NUMBERS",
    "FileFormat",
    "NetFacts",
    "Notice",
    "NumberField",
    "NumberPattern",
    "PartFacts",
    "PathStep",
    "PinFacts",
    "Project",
    "Records",
    "SupplyFacts",
    "XmlPath",
    "find",
    "is_ground",
    "line_for",
    "load",
    "match",
    "net_facts",
    "part_facts",
    "pin_facts",
    "ranked",
    "read",
    "supply_for",
    "unmatched",
]
