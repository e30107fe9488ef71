"""Step 5: a board, a subject, a measure with its options in; a problem in numbers out.

Contract: ``pose(board, project, subject, measure, options) -> Problem``; raises ``Unmeasurable(reason, ask)`` when the
passive model is not true there or a fact is missing. ``options`` maps option names to SI floats, texts and Levels.
"""
