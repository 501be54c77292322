"""sheetgen turns a folder of reviewed records of conducting materials into a reference handbook.

As a library: `from sheetgen import Handbook`, then `Handbook.load("materials")`.
"""

TYPE_CHECKING = False  # what type checkers take for true; importing typing would cost more than this whole file
if TYPE_CHECKING:
    from sheetgen.faults import FaultsError as FaultsError
    from sheetgen.handbook import Handbook as Handbook
    from sheetgen.lookup import NotDerivedError as NotDerivedError
    from sheetgen.lookup import NotFoundError as NotFoundError
    from sheetgen.lookup import StatedNumber as StatedNumber

__version__ = "0.1.0"

_MODULES = {
    "FaultsError": "faults",
    "Handbook": "handbook",
    "NotDerivedError": "lookup",
    "NotFoundError": "lookup",
    "StatedNumber": "lookup",
}
__all__ = ["FaultsError", "Handbook", "NotDerivedError", "NotFoundError", "StatedNumber", "__version__"]


def __getattr__(name: str) -> object:
    """A public name, fetched when it is first asked for, so that importing the package alone costs nothing."""
    if name not in _MODULES:
        raise AttributeError(f"module 'sheetgen' has no attribute '{name}'")
    import importlib

    return getattr(importlib.import_module(f"sheetgen.{_MODULES[name]}"), name)


def __dir__() -> list[str]:
    return sorted({*globals(), *__all__})
