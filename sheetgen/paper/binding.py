"""Binding documents to one: pages, outline, links, and the structure that a screen reader goes by."""

from __future__ import annotations

import io
import warnings
from collections.abc import Sequence
from typing import Any

from sheetgen.paper.typesetting import Bookmark, Printed

LINK = b"sheetgen:"


def bound(front: Printed, parts: Sequence[tuple[str, Printed]], back: Printed, folios: bytes) -> bytes:
    """One PDF/UA of the front, the titled parts and the back, with the page numbers of `folios` laid over all.

    Links of the front to `sheetgen:3` lead to that page of the sheets and the back, which count from 1.
    """
    import pikepdf

    book = pikepdf.open(io.BytesIO(front.pdf))
    structure = _Structure(book)
    opened = [pikepdf.open(io.BytesIO(one.pdf)) for _, one in parts] + [pikepdf.open(io.BytesIO(back.pdf))]
    starts = []
    for part in opened:
        starts.append(len(book.pages))
        structure.take_in(part, starts[-1])
    structure.close()
    if (names := opened[-1].Root.get("/Names")) is not None:
        book.Root.Names = book.copy_foreign(opened[-1].make_indirect(names))
    _lead_links(book, front.pages)
    titled = [(title, one.bookmarks) for title, one in parts]
    _outline(book, front, titled, (back.bookmarks, starts[-1]), starts)
    _number(book, pikepdf.open(io.BytesIO(folios)), front.pages)
    out = io.BytesIO()
    book.save(out, deterministic_id=True, object_stream_mode=pikepdf.ObjectStreamMode.generate)
    return out.getvalue()


class _Structure:
    """The tree of tags of the whole, into which those of the parts are grafted."""

    def __init__(self, book: Any):
        self.book = book
        self.root = book.Root.StructTreeRoot
        self.document = self.root.K[0]
        numbers = self.root.ParentTree.Nums
        self.next = int(numbers[len(numbers) - 2]) + 1

    def take_in(self, part: Any, start: int) -> None:
        """Append the pages of a part, and its tags as a part of the document."""
        import pikepdf

        with warnings.catch_warnings():
            warnings.simplefilter("ignore")  # named destinations stay behind: those that are used follow by `bound`
            self.book.pages.extend(part.pages)
        offset = self.next
        for page in self.book.pages[start:]:
            page.obj.StructParents = int(page.obj.StructParents) + offset
            for annotation in page.obj.get("/Annots", []):
                if "/StructParent" in annotation:
                    annotation.StructParent = int(annotation.StructParent) + offset
        # Pages that were taken in already are not copied again: the tags of the copy point to them.
        tags = self.book.copy_foreign(part.Root.StructTreeRoot)
        branch = tags.K[0]
        branch.S, branch.P = pikepdf.Name.Part, self.document
        self.document.K.append(branch)
        numbers = tags.ParentTree.Nums
        for position in range(0, len(numbers), 2):
            number = int(numbers[position]) + offset
            self.root.ParentTree.Nums.append(number)
            self.root.ParentTree.Nums.append(numbers[position + 1])
            self.next = max(self.next, number + 1)

    def close(self) -> None:
        """Say which number comes next."""
        self.root.ParentTreeNextKey = self.next


def _lead_links(book: Any, front: int) -> None:
    import pikepdf

    for page in book.pages[:front]:
        for annotation in page.obj.get("/Annots", []):
            action = annotation.get("/A")
            if action is None or not bytes(action.get("/URI", b"")).startswith(LINK):
                continue
            number = int(bytes(action.URI)[len(LINK) :])
            del annotation["/A"]
            annotation.Dest = pikepdf.Array([book.pages[front + number - 1].obj, pikepdf.Name.Fit])


def _outline(
    book: Any,
    front: Printed,
    parts: Sequence[tuple[str, Sequence[Bookmark]]],
    back: tuple[Sequence[Bookmark], int],
    starts: Sequence[int],
) -> None:
    from pikepdf import OutlineItem, PageLocation

    def item(mark: Bookmark, start: int) -> Any:
        height = float(book.pages[start + mark.page].mediabox[3])
        return OutlineItem(mark.words, start + mark.page, PageLocation.XYZ, left=0, top=height - mark.down)

    with book.open_outline() as outline:
        outline.root[:] = [item(mark, 0) for mark in front.bookmarks]
        for (title, marks), start in zip(parts, starts, strict=False):
            sheet = OutlineItem(title, start, PageLocation.Fit)
            sheet.is_closed = True
            sheet.children.extend(item(mark, start) for mark in marks if mark.level > 1)
            outline.root.append(sheet)
        outline.root.extend(item(mark, back[1]) for mark in back[0] if mark.level == 1)


def _number(book: Any, folios: Any, roman: int) -> None:
    """Lay the page numbers over the pages, and give the viewer the same ones."""
    from pikepdf import Array, Dictionary, Name

    for number, (page, folio) in enumerate(zip(book.pages, folios.pages, strict=True)):
        form = book.copy_foreign(folio.as_form_xobject())
        # Pages of a part share their resources, so that each needs a name of its own; left alone, it would be random.
        name = page.add_resource(form, Name.XObject, Name(f"/Folio{number}"))
        # The page's own operators turn its axes over and leave them so.
        page.contents_add(b"q", prepend=True)
        page.contents_add(b"Q /Artifact BMC q %s Do Q EMC" % str(name).encode())
    styles = [0, Dictionary(S=Name.r), roman, Dictionary(S=Name.D)]
    book.Root.PageLabels = Dictionary(Nums=Array(styles))
    book.Root.PageMode = Name.UseOutlines
