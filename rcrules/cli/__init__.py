"""The command: flags to a job, documents to reports and an exit code."""

from rcrules.cli._main import main

__all__ = ["main"]
