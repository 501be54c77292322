"""The commands: read the command line, call the handbook, print. No physics, no HTML."""

from __future__ import annotations

import json
import traceback
from collections.abc import Iterable, Sequence
from pathlib import Path
from typing import Any

import click

from sheetgen import __version__
from sheetgen.faults import Fault, FaultsError, MachineError, did_you_mean
from sheetgen.terminal import Argument, Command, Commands, ProgressLine, WrongWordError, with_example

DONE, RECORDS, COMMAND_LINE, MACHINE, INTERRUPTED = 0, 1, 2, 3, 130
MATERIALS = Path("materials")
SITE = Path("site")
PORT = 8930


def run(words: Sequence[str]) -> int:
    """Run one command line and return its exit status; whatever went wrong is one clear line on stderr."""
    show_traceback = "--traceback" in words
    try:
        return commands.main(list(words), prog_name="sheetgen", standalone_mode=False) or DONE
    except (KeyboardInterrupt, click.Abort):
        return _failed("stopped; what was published before still stands", INTERRUPTED)
    except click.exceptions.NoArgsIsHelpError as error:
        click.echo(error.format_message(), err=True)
        return COMMAND_LINE
    except click.UsageError as error:
        return _failed(with_example(error), COMMAND_LINE)
    except SystemExit:  # click leaves this way where whoever reads our output has seen enough
        return DONE
    except Exception as error:  # the last net: a person gets a line that helps, not a traceback
        if show_traceback:
            traceback.print_exc()
        return _failed(_what_happened(error), MACHINE)


def _failed(line: str, status: int) -> int:
    click.echo(f"sheetgen: {line}", err=True)
    return status


def _what_happened(error: Exception) -> str:
    if isinstance(error, MachineError):
        return str(error)
    if isinstance(error, OSError):
        return f"{error.filename or 'the machine'}: {(error.strerror or str(error)).lower()}"
    if isinstance(error, ModuleNotFoundError):
        return f"the library '{error.name}' is not installed; install sheetgen again with what it needs"
    if isinstance(error, MemoryError):
        return "the memory of this machine does not suffice"
    frame = traceback.extract_tb(error.__traceback__)[-1]
    place = f"{Path(frame.filename).name}:{frame.lineno}"
    return (
        f"the program itself is at fault ({type(error).__name__} at {place}: {error}). "
        "Add --traceback to see how it came about, and report it."
    )


def _version(context: click.Context, _option: click.Option, wanted: bool) -> None:
    if wanted and not context.resilient_parsing:
        from sheetgen.sheet import CONSTANTS

        click.echo(f"sheetgen {__version__}, constants {CONSTANTS}")
        context.exit()


def _standing(folder: Path) -> Path:
    """The folder itself, where it stands; else a line that guesses which one was meant."""
    if folder.is_dir():
        return folder
    if folder.exists():
        raise WrongWordError(f"{folder} is a file; expected the folder that holds it.")
    beside = folder.parent.iterdir() if folder.parent.is_dir() else ()
    guess = did_you_mean(folder.name, [entry.name for entry in beside if entry.is_dir()])
    raise WrongWordError(f"There is no folder {folder}.{guess or ' Make it, or name the one that holds the records.'}")


def _file(path: Path) -> Path:
    """The file itself, where it stands; else a line that guesses which one was meant."""
    if path.is_file():
        return path
    beside = path.parent.iterdir() if path.parent.is_dir() else ()
    guess = did_you_mean(path.name, [entry.name for entry in beside if entry.is_file()])
    raise WrongWordError(f"There is no file {path}.{guess}")


materials = click.argument(
    "materials",
    cls=Argument,
    said="the folder of records: handbook.yaml, sources.bib, a YAML file a material [default: materials]",
    type=click.Path(path_type=Path),
    default=MATERIALS,
)
as_json = click.option("--json", "as_json", is_flag=True, help="Print the result as JSON.")
with_traceback = click.option(
    "--traceback", is_flag=True, expose_value=False, help="Show how an error of the program came about."
)


@click.group(
    cls=Commands,
    examples=["sheetgen press materials --into site", "sheetgen quote copper fermi_energy"],
)
@click.option(
    "--version",
    is_flag=True,
    expose_value=False,
    is_eager=True,
    callback=_version,
    help="Print the version and the set of physical constants.",
)
def commands() -> None:
    """Turn reviewed records of conducting materials into a reference handbook."""


@commands.command(
    "press", cls=Command, examples=["sheetgen press materials --into site", "sheetgen press --pdf --into site"]
)
@materials
@click.option(
    "--into",
    metavar="SITE",
    type=click.Path(path_type=Path),
    default=SITE,
    help="The folder to publish to [default: site].",
)
@click.option(
    "--draws",
    metavar="N",
    type=click.IntRange(100, 10_000_000),
    help="Check each uncertainty by N draws, and state 95 % coverage intervals.",
)
@click.option("--pdf", is_flag=True, help="Also set each sheet and the whole handbook as PDF (needs the extra 'pdf').")
@as_json
@with_traceback
def press_command(materials: Path, into: Path, draws: int | None, pdf: bool, as_json: bool) -> int:
    """Derive every sheet and publish the site: the whole new one, or at any fault the old one as it stood."""
    from sheetgen.press import FolderRefusedError, press

    try:
        with ProgressLine() as progress:
            pressed = press(_standing(materials), into, progress, draws=draws or 0, paper=pdf)
    except FaultsError as error:
        return _at_fault(error.faults, as_json, f"Nothing was published; {into} stands as it stood.")
    except FolderRefusedError as error:
        raise WrongWordError(str(error)) from error
    report = pressed.report
    if as_json:
        _print_json(
            {
                "site": str(into),
                "sheets": pressed.sheets,
                "written": list(report.written),
                "unchanged": len(report.unchanged),
                "removed": list(report.removed),
                "kept": list(report.kept),
                "overwritten": list(report.overwritten),
                "remarks": [_fault_json(remark) for remark in pressed.remarks],
            }
        )
        return DONE
    _list(pressed.remarks)
    _list(f"{into / path}: changed by hand since the last press; written anew" for path in report.overwritten)
    _list(f"{into / path}: not made by a press; kept" for path in report.kept if path != ".gitignore")
    click.echo(
        f"{into}: {_count(pressed.sheets, 'sheet')}; {_count(len(report.written), 'file')} written, "
        f"{len(report.unchanged)} unchanged, {len(report.removed)} removed."
    )
    return DONE


@commands.command("proof", cls=Command, examples=["sheetgen proof materials", "sheetgen proof --site site"])
@materials
@click.option(
    "--strict",
    is_flag=True,
    help="Also a fault: a value without a source or from memory, and a record not reviewed or reviewed too long ago.",
)
@click.option(
    "--untrusted",
    is_flag=True,
    help="The records are strangers': run no code of their folder, own quantities included.",
)
@click.option(
    "--site",
    metavar="SITE",
    type=click.Path(path_type=Path),
    help="Leave the records alone, and hold a published folder against its manifest.",
)
@click.option(
    "--sarif",
    metavar="FILE",
    type=click.Path(path_type=Path, dir_okay=False),
    help="Also write what was found as SARIF 2.1.0, which code hosts show beside the lines.",
)
@as_json
@with_traceback
def proof_command(
    materials: Path, strict: bool, untrusted: bool, site: Path | None, sarif: Path | None, as_json: bool
) -> int:
    """Read and derive everything, list what is at fault and what to know, publish nothing."""
    if site is not None:
        return _proof_of_site(site, sarif, as_json)
    from sheetgen.handbook import Handbook

    try:
        with ProgressLine() as progress:
            progress("reading records", 0, 0)
            load = Handbook.load_untrusted if untrusted else Handbook.load
            handbook = load(_standing(materials))
            if strict:
                handbook.require_strict()
    except FaultsError as error:
        _write_sarif(error.faults, sarif)
        return _at_fault(error.faults, as_json)
    _write_sarif(handbook.remarks, sarif)
    if as_json:
        remarks = [_fault_json(remark) for remark in handbook.remarks]
        _print_json({"sheets": len(handbook.sheets), "faults": [], "remarks": remarks})
    else:
        _list(handbook.remarks)
        remarks = _count(len(handbook.remarks), "remark")
        click.echo(f"{materials}: {_count(len(handbook.sheets), 'record')} in order, {remarks}.")
    return DONE


@commands.command(
    "draft", cls=Command, examples=["sheetgen draft TiN", "sheetgen draft --cif quartz.cif --materials materials"]
)
@click.argument("formula", cls=Argument, required=False, said="such as Cu, TiN or Al0.3Ga0.7As")
@click.option(
    "--cif", metavar="FILE", type=click.Path(path_type=Path), help="Take cell, sites and publication from a CIF."
)
@click.option(
    "--materials",
    metavar="FOLDER",
    type=click.Path(path_type=Path),
    default=MATERIALS,
    help="The folder of records [default: materials].",
)
@click.option("--name", metavar="NAME", default="", help="What the material is called, where the usual name is taken.")
@as_json
@with_traceback
def draft_command(formula: str | None, cif: Path | None, materials: Path, name: str, as_json: bool) -> int:
    """Start a record: what follows from a formula or a CIF is filled in, the rest says what belongs there."""
    from sheetgen.drafting import DraftRefusedError, FormulaRefusedError, draft_cif, draft_formula

    if (formula is None) == (cif is None):
        raise WrongWordError("Give either a formula, as in: sheetgen draft Cu, or a CIF, as in: --cif quartz.cif")
    folder = _standing(materials)
    try:
        drafted = draft_formula(formula or "", folder, name) if cif is None else draft_cif(_file(cif), folder, name)
    except (FormulaRefusedError, DraftRefusedError) as error:
        raise WrongWordError(str(error)) from error
    except FaultsError as error:
        return _at_fault(error.faults, as_json, "Nothing was written.")
    return _printed(drafted, drafted.lines(), as_json)


@commands.command(
    "quote",
    cls=Command,
    examples=["sheetgen quote copper fermi_energy", "sheetgen quote Na chemical_potential --at 77"],
)
@click.argument("material", cls=Argument, said="its slug, name or formula, in capitals or not")
@click.argument("quantity", cls=Argument, said="its id or title, as fermi_energy or 'Fermi energy'")
@click.option("--at", metavar="T", type=float, help="The temperature in kelvins [default: the reference].")
@click.option(
    "--materials",
    metavar="FOLDER",
    type=click.Path(path_type=Path),
    default=MATERIALS,
    help="The folder of records [default: materials].",
)
@as_json
@with_traceback
def quote_command(material: str, quantity: str, at: float | None, materials: Path, as_json: bool) -> int:
    """Print one number with its uncertainty, what it comes from, what it assumes, and its standing."""
    from sheetgen.handbook import Handbook
    from sheetgen.quote import NotDerivedError, NotFoundError, quote

    try:
        quoted = quote(Handbook.load(_standing(materials)), material, quantity, at)
    except FaultsError as error:
        return _at_fault(error.faults, as_json)
    except NotFoundError as error:
        raise WrongWordError(str(error)) from error
    except NotDerivedError as error:
        return _failed(str(error), RECORDS)
    return _printed(quoted, quoted.lines(), as_json)


@commands.command(
    "errata",
    cls=Command,
    examples=["sheetgen errata HEAD~1 materials", "sheetgen errata old/handbook.json site --json"],
)
@click.argument("old", cls=Argument, said="an edition: a handbook.json, a site, a folder of records, a git revision")
@click.argument("new", cls=Argument, said="the later edition, in any of these forms")
@click.option(
    "--materials",
    metavar="FOLDER",
    type=click.Path(path_type=Path),
    default=MATERIALS,
    help="The folder of records that a git revision is looked for in [default: materials].",
)
@as_json
@with_traceback
def errata_command(old: str, new: str, materials: Path, as_json: bool) -> int:
    """Tell which numbers moved between two editions, by how much, and because of which input."""
    from sheetgen.errata import EditionError, errata, open_edition
    from sheetgen.errata_lines import lines

    try:
        with ProgressLine() as progress:
            progress(f"reading {old}", 0, 0)
            earlier = open_edition(old, materials)
            progress(f"reading {new}", 0, 0)
            later = open_edition(new, materials)
            progress("deriving what each change does", 0, 0)
            found = errata(earlier, later)
    except FaultsError as error:
        return _at_fault(error.faults, as_json)
    except EditionError as error:
        raise WrongWordError(str(error)) from error
    return _printed(found, lines(found), as_json)


@commands.command("galley", cls=Command, examples=["sheetgen galley materials", "sheetgen galley --port 0"])
@materials
@click.option(
    "--port",
    metavar="N",
    type=int,
    default=PORT,
    help=f"The port on this machine; 0 takes a free one [default: {PORT}].",
)
@with_traceback
def galley_command(materials: Path, port: int) -> int:
    """Serve the handbook on this machine only, press it anew as records are saved, until Ctrl-C."""
    from sheetgen.galley import run

    if not 0 <= port <= 65535:
        raise WrongWordError(f"There is no port {port}; choose one from 1 to 65535 with --port, or 0 for a free one.")

    def opened(address: str) -> None:
        progress.clear()
        click.echo(address)

    def told(line: str) -> None:
        progress.clear()
        click.echo(line, err=True)

    with ProgressLine() as progress:
        run(_standing(materials), port, opened, told, progress)
    return DONE


def _proof_of_site(site: Path, sarif: Path | None, as_json: bool) -> int:
    from sheetgen.press import FolderRefusedError, deviations

    try:
        found = deviations(_standing(site))
    except FolderRefusedError as error:
        raise WrongWordError(str(error)) from error
    _write_sarif(found, sarif)
    faults = [fault for fault in found if fault.severity == "fault"]
    _list(fault for fault in found if fault.severity == "remark")
    if faults:
        return _at_fault(faults, as_json)
    if as_json:
        _print_json({"faults": [], "remarks": [_fault_json(remark) for remark in found]})
    else:
        click.echo(f"{site}: every file is as it was published.")
    return DONE


def _write_sarif(found: Iterable[Fault], file: Path | None) -> None:
    if file is not None:
        from sheetgen.sarif import sarif_log

        file.write_text(json.dumps(sarif_log(found, Path.cwd()), indent=1, ensure_ascii=False) + "\n", encoding="utf-8")


def _at_fault(faults: Sequence[Fault], as_json: bool, closing: str = "") -> int:
    """Every fault on stderr, sorted by place; with --json the same once more on stdout, for a program."""
    _list(faults)
    click.echo(f"{_count(len(faults), 'fault')}. {closing}".rstrip(), err=True)
    if as_json:
        _print_json({"faults": [_fault_json(fault) for fault in faults]})
    return RECORDS


def _fault_json(fault: Fault) -> dict[str, Any]:
    place = fault.place
    return {"file": place.file, "line": place.line, "column": place.column, "message": fault.message}


def _list(lines: Iterable[object], err: bool = True) -> None:
    for line in lines:
        click.echo(str(line), err=err)


def _printed(result: Any, lines: Iterable[object], as_json: bool) -> int:
    """Print what a command found, as JSON or in lines, and return that it is done."""
    if as_json:
        _print_json(result.as_json())
    else:
        _list(lines, err=False)
    return DONE


def _print_json(content: dict[str, Any]) -> None:
    click.echo(json.dumps(content, indent=1, ensure_ascii=False))


def _count(number: int, word: str) -> str:
    return f"{number} {word}{'' if number == 1 else 's'}"
