"""The site on this machine only, pressed anew whenever a record is saved; an open page follows by itself."""

from __future__ import annotations

from sheetgen.galley.running import run

__all__ = ["run"]
