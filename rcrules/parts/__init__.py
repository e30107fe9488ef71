"""Step 3: design in, parts with kind, value, spread and ratings out."""

from rcrules.parts._model import Known, RatedPart, Share, Unknown

__all__ = ["Known", "RatedPart", "Share", "Unknown"]
