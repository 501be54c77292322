"""The Jinja environment: every name must exist, everything is escaped, errors say template and line."""

from __future__ import annotations

import traceback
from collections.abc import Iterable
from importlib import resources
from pathlib import Path
from typing import Any

import jinja2

from sheetgen.faults import Fault, FaultsError, Place

from . import formulas, notes, numbers, words

# What a template can do wrong besides naming what does not exist: a wrong type, key, number or formula.
_TEMPLATE_ERRORS = (jinja2.TemplateError, TypeError, ValueError, LookupError, AttributeError, ArithmeticError)


def template_folder() -> Path:
    """Where the templates lie: inside the installed package, or beside it in a checkout."""
    installed = resources.files("sheetgen") / "templates"
    if installed.is_dir():
        return Path(str(installed))
    return Path(__file__).resolve().parents[2] / "templates"


class Press:
    """Renders templates; one for each run, since compiling costs more than rendering."""

    def __init__(self, own_folders: Iterable[Path] = ()):
        """Templates in `own_folders` come before those of the program, which they reach as 'original/…'."""
        folders = [str(folder) for folder in (*own_folders, template_folder())]
        self.folders = tuple(folders)
        originals = jinja2.PrefixLoader({"original": jinja2.FileSystemLoader(str(template_folder()))})
        self.environment = jinja2.Environment(
            loader=jinja2.ChoiceLoader([jinja2.FileSystemLoader(folders), originals]),
            autoescape=True,
            undefined=jinja2.StrictUndefined,
            trim_blocks=True,
            lstrip_blocks=True,
            keep_trailing_newline=True,
        )
        self.environment.filters.update(
            formula=formulas.formula,
            notes=notes.notes,
            unit=numbers.unit,
            unit_text=numbers.unit_text,
            chemical=words.chemical,
            date=words.date,
            lower_first=words.lower_first,
            sentence=words.sentence,
            symbols=words.symbols,
        )
        self.environment.globals.update(words=words)

    def render(self, template: str, **context: Any) -> bytes:
        """One page as UTF-8. Raises FaultsError, naming template:line, where the template cannot be rendered."""
        try:
            return self.environment.get_template(template).render(**context).encode()
        except FaultsError:
            raise
        except _TEMPLATE_ERRORS as error:
            place = self._place(error)
            if place is None:
                raise
            raise FaultsError([Fault(place, _explained(error))]) from error

    def _place(self, error: BaseException) -> Place | None:
        """Where in a template the error arose; None where it arose in none."""
        if isinstance(error, jinja2.TemplateSyntaxError):
            return Place(error.filename or error.name or "a template", error.lineno)
        frames = traceback.extract_tb(error.__traceback__)
        own = [frame for frame in frames if frame.filename.startswith(self.folders)]
        if own:
            return Place(own[-1].filename, own[-1].lineno or 0)
        if isinstance(error, jinja2.TemplateNotFound):
            return Place(str(Path(self.folders[0]) / str(error.name)))
        return None


def _explained(error: BaseException) -> str:
    match error:
        case jinja2.UndefinedError():
            return f"{error.message}; expected a name that the page is given. Correct the name in the template."
        case jinja2.TemplateSyntaxError():
            return f"{error.message}; expected a Jinja template. Correct it at this line."
        case jinja2.TemplateNotFound():
            return f"there is no template {str(error.name)!r}. Add it, or correct the name where it is used."
        case formulas.FormulaError():
            return f"{error}. Write it in LaTeX that MathML can show."
    return f"{error} ({type(error).__name__}). Correct the template at this line."
