"""The JSON schema of the findings document, shipped beside this file."""

from importlib.resources import files


def schema_text() -> str:
    """The schema (JSON Schema 2020-12) as text."""
    return (files("rcrules.findings") / "document.schema.json").read_text(encoding="utf-8")
