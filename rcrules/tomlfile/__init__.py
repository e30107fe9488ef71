"""TOML files with the place of every key and value, and tables that collect every mistake."""

from rcrules.tomlfile._file import TomlFile, load, read
from rcrules.tomlfile._scanner import Path
from rcrules.tomlfile._table import Table, root
from rcrules.tomlfile._told import cut, guess, listed, quantity_name

__all__ = ["Path", "Table", "TomlFile", "cut", "guess", "listed", "load", "quantity_name", "read", "root"]
