"""Step 17: a problem and the bounds of a measure in, how the numbers come about out, checkable by hand."""

from rcrules.derivation._derive import derive
from rcrules.derivation._response import response
from rcrules.derivation._sensitivity import Influence, sensitivity
from rcrules.derivation._value import Term, Value, derive_value

__all__ = ["Influence", "Term", "Value", "derive", "derive_value", "response", "sensitivity"]
