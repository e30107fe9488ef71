"""Step 15: failing findings in, changes of parts out that would make every rule at their network hold."""

from rcrules.proposals._propose import propose

__all__ = ["propose"]
