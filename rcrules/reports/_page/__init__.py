"""The review page: what it shows is worked out here, how it looks stands in the files beside."""

from rcrules.reports._page._page import page

__all__ = ["page"]
