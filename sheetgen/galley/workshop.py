"""The press of a galley: keeps the last good site, draws only what a saved file touches, and says what is new."""

from __future__ import annotations

import hashlib
import json
import secrets
import threading
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from pathlib import Path
from typing import TYPE_CHECKING, Any

from sheetgen.faults import Fault, FaultsError, MachineError, Place
from sheetgen.press import FolderRefusedError, Report, press
from sheetgen.press.manifest import NAME as MANIFEST
from sheetgen.press.manifest import fingerprints

if TYPE_CHECKING:
    from sheetgen.figures import Figure
    from sheetgen.handbook import Handbook
    from sheetgen.sheet import Sheet

Progress = Callable[[str, int, int], None]


@dataclass(frozen=True)
class News:
    """What a page may want to know: how often something changed, and what is at fault now.

    `changed` maps a path of the site to the number at which it last changed; `published` are all its paths.
    """

    number: int = 0
    faults: tuple[Fault, ...] = ()
    changed: Mapping[str, int] = field(default_factory=dict)
    published: frozenset[str] = frozenset()

    def since(self, number: int) -> list[str]:
        """The paths that changed after some number, sorted."""
        return sorted(path for path, at in self.changed.items() if at > number)


class Workshop:
    """Presses a folder into a site again and again; `news` is the state of the last press.

    `token` tells this run of a galley from the one before it: numbers of another run mean nothing here.
    """

    def __init__(self, folder: Path, site: Path, told: Callable[[str], None] = lambda line: None):
        self.folder, self.site, self.told = folder, site, told
        self.token = secrets.token_hex(4)
        self.news = News()
        self.changing = threading.Condition()
        self._inputs: dict[str, str] | None = None
        self._figures: dict[str, tuple[str, list[Figure]]] = {}

    def press(self, progress: Progress = lambda step, done, total: None) -> None:
        """Press the folder where a file of it changed; faults are kept as news, and the last good site stands."""
        inputs = self._read_inputs()
        if inputs is not None and inputs == self._inputs:
            return
        self._inputs = inputs
        try:
            pressed = press(self.folder, self.site, progress, draw=self._drawn)
        except FaultsError as error:
            self._publish_news(error.faults, None)
        except (MachineError, FolderRefusedError, OSError, MemoryError) as error:
            said = error.strerror.lower() if isinstance(error, OSError) and error.strerror else str(error)
            self._publish_news((Fault(Place(str(self.folder)), said),), None)
        except Exception as error:  # the galley outlives an error of the program, and shows it
            said = f"the program itself is at fault ({type(error).__name__}: {error}); `sheetgen proof` says more"
            self._publish_news((Fault(Place(str(self.folder)), said),), None)
        else:
            self._publish_news((), pressed.report)

    def wait(self, number: int, seconds: float) -> News:
        """The news as soon as there are any after some number, else those that stand after some seconds."""
        with self.changing:
            self.changing.wait_for(lambda: self.news.number > number, timeout=seconds)
            return self.news

    def _read_inputs(self) -> dict[str, str] | None:
        """Fingerprints of all files that a press reads; None where the folder cannot be read just now."""
        try:
            found = fingerprints(self.folder)
            earlier = sorted(self.folder.rglob("*.json"))
            return found | {str(path): f"{path.stat().st_size} {path.stat().st_mtime_ns}" for path in earlier}
        except OSError:
            return None

    def _drawn(self, sheet: Sheet, handbook: Handbook) -> list[Figure]:
        """The figures of a sheet, drawn only where something that they show changed."""
        from sheetgen.figures import draw_all

        slug, key = sheet.record.slug, _key(sheet, self._inputs or {})
        if slug not in self._figures or self._figures[slug][0] != key:
            self._figures[slug] = (key, draw_all(sheet, handbook))
        return self._figures[slug][1]

    def _publish_news(self, faults: tuple[Fault, ...], report: Report | None) -> None:
        before = self.news
        published, touched = before.published, []
        if report is not None:
            published = frozenset((*report.written, *report.unchanged)) - {MANIFEST}
            touched = [path for path in (*report.written, *report.removed) if path != MANIFEST]
        if not touched and faults == before.faults:
            self.told("nothing to see changed")
            return
        number = before.number + 1
        with self.changing:
            self.news = News(number, faults, {**before.changed, **dict.fromkeys(touched, number)}, published)
            self.changing.notify_all()
        for fault in faults:
            self.told(str(fault))
        if report is not None:
            self.told(f"{len(touched)} files of the site changed")


def _key(sheet: Sheet, inputs: Mapping[str, str]) -> str:
    """What the figures of a sheet are drawn from, as one digest: its data, its record, the imprint, own quantities."""
    name = sheet.record.path.name
    read: dict[str, Any] = {file: inputs[file] for file in inputs if file == name or file.endswith((".py", ".cif"))}
    read["imprint"] = inputs.get("handbook.yaml")
    return hashlib.sha256(json.dumps([sheet.data, read], sort_keys=True).encode()).hexdigest()
