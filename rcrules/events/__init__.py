"""Step 5: a board, a subject, a measure with its options in; a problem in numbers out.

Contract: ``pose(board, project, subject, measure, options) -> Problem``; raises ``Unmeasurable(reason, ask)`` when the
passive model is not true there or a fact is missing. ``options`` maps option names to SI floats, texts and Levels.
"""

from rcrules.events._bench import let_go
from rcrules.events._options import OptionValue
from rcrules.events._pose import pose
from rcrules.events._quantities import Measured, quantities
from rcrules.events._table import part_parameter
from rcrules.events._unmeasurable import Unmeasurable

__all__ = ["Measured", "OptionValue", "Unmeasurable", "let_go", "part_parameter", "pose", "quantities"]
