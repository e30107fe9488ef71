"""Texts and places as SARIF wants them; names come from strangers."""

import re
from typing import Final
from urllib.parse import quote

from rcrules.findings import Json
from rcrules.reports._lines import safe

ROOT: Final = "SRCROOT"
"""The folder in which the run was made; where it lies is for the reader to say."""
_LINKING: Final = re.compile(r"[\[\]\\]")
_PLACEHOLDER: Final = re.compile(r"\{(\d+)\}")


def message(text: str) -> Json:
    """A text that holds no link and no placeholder (SARIF 2.1.0, sections 3.11.5 and 3.11.6)."""
    escaped = _LINKING.sub(lambda found: "\\" + found[0], safe(text))
    return {"text": _PLACEHOLDER.sub(r"{{\1}}", escaped)}


def uri(path: str) -> str:
    """A relative path as a relative reference: forward slashes, everything else than plain letters encoded."""
    return quote(path.replace("\\", "/"), safe="/", errors="surrogatepass")


def artifact(path: str) -> Json:
    """Where a file lies, below the folder of the run."""
    return {"uri": uri(path), "uriBaseId": ROOT}


def physical(place: Json) -> Json:
    """File, line and column; without a known line the first one, so that a service can show it."""
    region: Json = {"startLine": max(place.get("line") or 1, 1)}
    if place.get("line") and place.get("column"):
        region["startColumn"] = max(place["column"], 1)
    return {"artifactLocation": artifact(place["file"]), "region": region}
