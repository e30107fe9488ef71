"""The work that something takes, counted in calls of functions, so that no clock decides."""

import cProfile
import pstats


class Work:
    """A ``with`` block whose calls are counted; what it raises passes through."""

    calls = 0

    def __enter__(self) -> "Work":
        self._profile = cProfile.Profile()
        self._profile.enable()
        return self

    def __exit__(self, *raised: object) -> None:
        self._profile.disable()
        self.calls = int(pstats.Stats(self._profile).total_calls)  # type: ignore[attr-defined]  # not in the stubs
