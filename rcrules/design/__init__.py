"""Step 2: exports in, one design out."""

from rcrules.design._build import build
from rcrules.design._disagree import told
from rcrules.design._model import Design, Difference, Fact, Net, Part, Pin
from rcrules.design._order import natural
from rcrules.design._variant import vary

__all__ = ["Design", "Difference", "Fact", "Net", "Part", "Pin", "build", "natural", "told", "vary"]
