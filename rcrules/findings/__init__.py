"""Step 10: the one document that every report is made from."""

from rcrules.findings._document import Document, Finding, Quantity

__all__ = ["Document", "Finding", "Quantity"]
