"""What `proof` found, in the Static Analysis Results Interchange Format, which code hosts show beside the lines.

SARIF 2.1.0, OASIS Standard (27 March 2020).
"""

from __future__ import annotations

import hashlib
import re
from collections.abc import Iterable, Mapping
from pathlib import Path, PurePath
from typing import Any
from urllib.parse import quote

from sheetgen import __version__
from sheetgen.faults import Fault

SCHEMA = "https://docs.oasis-open.org/sarif/sarif/v2.1.0/errata01/os/schemas/sarif-schema-2.1.0.json"
RULES = {
    "fault": ("error", "The record is at fault", "Nothing is published before it is mended."),
    "remark": ("note", "Worth a look", "It stops nothing; a person should know."),
}
_NUMBER = re.compile(r"\d+")


def sarif_log(faults: Iterable[Fault], root: Path) -> dict[str, Any]:
    """One run of `proof` as a SARIF log; files below `root` are named relative to it, as a code host needs them."""
    return {
        "$schema": SCHEMA,
        "version": "2.1.0",
        "runs": [
            {
                "tool": {"driver": {"name": "sheetgen", "version": __version__, "rules": _rules()}},
                "columnKind": "unicodeCodePoints",
                "results": [_result(fault, root.resolve()) for fault in sorted(set(faults))],
            }
        ],
    }


def _rules() -> list[dict[str, Any]]:
    return [
        {
            "id": id,
            "shortDescription": {"text": f"{title}."},
            "fullDescription": {"text": said},
            "defaultConfiguration": {"level": level},
        }
        for id, (level, title, said) in RULES.items()
    ]


def _result(fault: Fault, root: Path) -> dict[str, Any]:
    location: dict[str, Any] = {"artifactLocation": _artifact(fault.place.file, root)}
    if fault.place.line:
        column = {"startColumn": fault.place.column} if fault.place.column else {}
        location["region"] = {"startLine": fault.place.line, **column}
    return {
        "ruleId": fault.severity,
        "ruleIndex": list(RULES).index(fault.severity),
        "level": RULES[fault.severity][0],
        "message": {"text": fault.message},
        "locations": [{"physicalLocation": location}],
        "partialFingerprints": {"sheetgen/v1": _fingerprint(fault, location["artifactLocation"])},
    }


def _artifact(file: str, root: Path) -> dict[str, str]:
    path = Path(file) if PurePath(file).is_absolute() else root / file
    if path.is_relative_to(root):
        return {"uri": quote(path.relative_to(root).as_posix())}
    return {"uri": path.as_uri()}


def _fingerprint(fault: Fault, artifact: Mapping[str, str]) -> str:
    """The same for the same complaint about the same file, although lines moved or a number in it differs."""
    said = _NUMBER.sub("0", f"{artifact['uri']}\n{fault.severity}\n{fault.message}")
    return hashlib.sha256(said.encode()).hexdigest()[:32]
