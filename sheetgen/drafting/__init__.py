"""Drafts of records: what follows from a formula or a CIF filled in, the rest left as blanks that say what fits."""

from sheetgen.drafting.draft import Drafted, draft_cif, draft_formula
from sheetgen.drafting.placing import DraftRefusedError
from sheetgen.drafting.suggestions import FormulaRefusedError

__all__ = ["DraftRefusedError", "Drafted", "FormulaRefusedError", "draft_cif", "draft_formula"]
