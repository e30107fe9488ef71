"""TOML files with the place of every key and value."""

from rcrules.tomlfile._file import TomlFile, load, read
from rcrules.tomlfile._scanner import Path

__all__ = ["Path", "TomlFile", "load", "read"]
