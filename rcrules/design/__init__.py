"""Step 2: exports in, one design out."""

from rcrules.design._model import Design, Fact, Net, Part, Pin

__all__ = ["Design", "Fact", "Net", "Part", "Pin"]
