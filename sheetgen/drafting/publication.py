"""Where a CIF was published, by the tags of the core dictionary and of the journals and databases."""

from __future__ import annotations

from typing import TYPE_CHECKING

from sheetgen.drafting.bibliography import Publication
from sheetgen.drafting.cif_text import plain_text

if TYPE_CHECKING:
    import gemmi

_DATABASES = {
    "_cod_database_code": "Crystallography Open Database",
    "_database_code_ICSD": "Inorganic Crystal Structure Database",
    "_database_code_amcsd": "American Mineralogist Crystal Structure Database",
    "_database_code_CSD": "Cambridge Structural Database",
}


def publication_of(document: gemmi.cif.Document, block: gemmi.cif.Block) -> Publication:
    """What the block of the structure says of its publication, or else a block beside it, as journals write them."""
    blocks = [block, *(other for other in document if other.name != block.name)]
    for one in blocks:
        found = _one(one)
        if found.title or found.journal or found.doi:
            return found
    return next((found for one in blocks if (found := _one(one))), Publication())


def _one(block: gemmi.cif.Block) -> Publication:
    first, last = (first_text(block, (f"_journal_page_{end}", f"_citation_page_{end}")) for end in ("first", "last"))
    codes = [f"{name} {code}" for tag, name in _DATABASES.items() if (code := text_of(block, tag))]
    return Publication(
        authors=tuple(_authors(block)),
        title=first_text(block, ("_publ_section_title", "_citation_title")),
        journal=first_text(block, ("_journal_name_full", "_citation_journal_full", "_citation_journal_abbrev")),
        volume=first_text(block, ("_journal_volume", "_citation_journal_volume")),
        number=first_text(block, ("_journal_issue", "_citation_journal_issue")),
        pages=f"{first}--{last}" if first and last and first != last else first or last,
        year=first_text(block, ("_journal_year", "_citation_year")),
        doi=first_text(block, ("_journal_paper_doi", "_journal_DOI", "_citation_doi")),
        note=", ".join(codes),
    )


def _authors(block: gemmi.cif.Block) -> list[str]:
    from gemmi import cif

    names = [plain_text(cif.as_string(raw)) for raw in block.find_values("_publ_author_name")]
    if not names:
        wanted = text_of(block, "_citation_author_citation_id")
        for row in block.find("_citation_author_", ["name", "?citation_id"]):
            if not row.has(1) or row.str(1) == wanted:
                names.append(plain_text(row.str(0)))
    return [name for name in names if name not in ("", "?", ".")]


def first_text(block: gemmi.cif.Block, tags: tuple[str, ...]) -> str:
    """The value of the first tag that has one; "" where none has."""
    return next((text for tag in tags if (text := text_of(block, tag))), "")


def text_of(block: gemmi.cif.Block, tag: str) -> str:
    """The value of a tag in plain Unicode, the first where it is looped; "" where it is absent or unknown."""
    from gemmi import cif

    values = block.find_values(tag)
    raw = block.find_value(tag) or (values[0] if len(values) else None)
    text = "" if raw is None else plain_text(cif.as_string(raw))
    return "" if text in ("?", ".") else text
