"""Publishing: the whole old site or the whole new one, never a mix."""

from sheetgen.press.manifest import FolderRefusedError, deviations
from sheetgen.press.publishing import Report, publish
from sheetgen.press.road import Pressed, press

__all__ = ["FolderRefusedError", "Pressed", "Report", "deviations", "press", "publish"]
