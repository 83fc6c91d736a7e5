"""Notes put on the cells of a sheet.

A note lives in two parts: its text in the sheet's comments part, and the box it is shown in as a shape of the
sheet's legacy drawing (ECMA-376 part 1, 18.7, and part 4, 19). Both are added where a sheet has none. What
stands in them already stays; a text for a cell that has a note is put behind that note's own.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from typing import NamedTuple
from xml.sax.saxutils import quoteattr

from cellfuncs.books.grid import LAST_COLUMN, LAST_ROW, area_text, rectangle
from cellfuncs.books.parts import HEAD, Draft, Element, parsed, put_in
from cellfuncs.books.reading import tag_end
from cellfuncs.books.scans import MAIN, RELATIONS
from cellfuncs.books.splice import apply_edits
from cellfuncs.books.xmltext import escaped
from cellfuncs.errors import BookRefused

_COMMENTS_TYPE = "application/vnd.openxmlformats-officedocument.spreadsheetml.comments+xml"
_DRAWING_TYPE = "application/vnd.openxmlformats-officedocument.vmlDrawing"
_SPACES = (
    ("v", "urn:schemas-microsoft-com:vml"),
    ("o", "urn:schemas-microsoft-com:office:office"),
    ("x", "urn:schemas-microsoft-com:office:excel"),
)
_DECLARED = "".join(f' xmlns:{prefix}="{name}"' for prefix, name in _SPACES)
_BOX_TYPE = (
    '<v:shapetype id="_x0000_t202"{spaces} coordsize="21600,21600" o:spt="202" path="m,l,21600r21600,l21600,xe">'
    '<v:stroke joinstyle="miter"/><v:path gradientshapeok="t" o:connecttype="rect"/></v:shapetype>'
)
_BOX = (
    '<v:shape id="_x0000_s{number}"{spaces} type="#_x0000_t202" style="position:absolute;visibility:hidden"'
    ' fillcolor="#ffffe1" o:insetmode="auto"><v:path o:connecttype="none"/><v:textbox/>'
    '<x:ClientData ObjectType="Note"><x:MoveWithCells/><x:SizeWithCells/><x:Anchor>{anchor}</x:Anchor>'
    "<x:AutoFill>False</x:AutoFill><x:Row>{row}</x:Row><x:Column>{column}</x:Column></x:ClientData></v:shape>"
)
_BLOCK = 1024  # numbers of shapes go in blocks of this size, which a drawing reserves
_WIDE, _SIGNS = 4, 38  # columns of a box, and signs that stand in one of its lines
_HIGHEST = 20  # rows of a box

# What may stand between the cells of a sheet and its legacy drawing (ECMA-376 part 1, 18.3.1.99).
_BEFORE = re.compile(
    "sheetCalcPr|sheetProtection|protectedRanges|scenarios|autoFilter|sortState|dataConsolidate|customSheetViews"
    "|mergeCells|phoneticPr|conditionalFormatting|dataValidations|hyperlinks|printOptions|pageMargins|pageSetup"
    "|headerFooter|rowBreaks|colBreaks|customProperties|cellWatches|ignoredErrors|smartTags|drawing"
)
_DATA_END = re.compile(rb"</(?:[\w.-]+:)?sheetData\s*>|<(?:[\w.-]+:)?sheetData\s*/>")


class Note(NamedTuple):
    """A text for a cell."""

    row: int
    column: int
    text: str


def add_notes(draft: Draft, sheet: str, notes: Sequence[Note], author: str) -> list[Note]:
    """Put notes on the cells of the sheet in the part `sheet`; gives those that found no place there.

    That are notes for cells with a conversation, which hides the cell's note, and all notes where the parts that
    hold the sheet's own ones cannot be followed.
    """
    talked = _conversations(draft, sheet)
    placed = [note for note in notes if (note.row, note.column) not in talked]
    if not placed:
        return list(notes)
    before = dict(draft.changed)
    try:
        new = _add_texts(draft, sheet, placed, author)
        if new:
            _add_boxes(draft, sheet, new)
    except BookRefused:
        draft.changed = before
        return list(notes)
    return [note for note in notes if (note.row, note.column) in talked]


def _conversations(draft: Draft, sheet: str) -> set[tuple[int, int]]:
    relation = draft.related(sheet, "threadedComment")
    if relation is None:
        return set()
    root = parsed(draft.read(relation.target), relation.target)
    areas = (rectangle(element.attributes.get("ref", "")) for element in root.all("threadedComment"))
    return {area[:2] for area in areas if area}


# -- texts ---------------------------------------------------------------------------------------------


def _add_texts(draft: Draft, sheet: str, notes: Sequence[Note], author: str) -> list[Note]:
    """Write the texts; gives the notes that are new, not put behind another one."""
    relation = draft.related(sheet, "comments")
    if relation is None:
        part = draft.free_name("xl/comments{}.xml")
        empty = f'<comments xmlns="{MAIN}"><authors></authors><commentList></commentList></comments>'
        draft.add(part, HEAD + empty.encode(), _COMMENTS_TYPE)
        draft.relate(sheet, f"{RELATIONS}/comments", part)
    else:
        part = relation.target
    data = draft.read(part)
    root = parsed(data, part)
    authors, listed = root.first("authors"), root.first("commentList")
    if authors is None or listed is None:
        raise BookRefused("The notes of a sheet are written in a way that cannot be followed.")
    names = [element.text for element in authors.all("author")]
    edits = []
    if author not in names:
        edits.append(put_in(data, authors, _written(root.prefix, "author", author)))
        names.append(author)
    known = {element.attributes.get("ref", ""): element for element in listed.all("comment")}
    new: list[Note] = []
    rows: list[bytes] = []
    p = root.prefix
    for note in notes:
        place = area_text((note.row, note.column, note.row, note.column))
        old = known.get(place)
        if old is not None:
            edits += _behind(data, old, note.text)
            continue
        new.append(note)
        rows.append(f'<{p}comment ref="{place}" authorId="{names.index(author)}"><{p}text>'.encode())
        rows += (_written(p, "t", note.text), f"</{p}text></{p}comment>".encode())
    if rows:
        edits.append(put_in(data, listed, b"".join(rows)))
    draft.write(part, apply_edits(data, edits))
    return new


def _behind(data: bytes, comment: Element, text: str) -> list[tuple[int, int, bytes]]:
    """The edits that put a text behind that of a note."""
    holder = comment.first("text")
    if holder is None:
        raise BookRefused("A note is written in a way that cannot be followed.")
    p = comment.prefix
    runs = [child for child in holder.children if child.name in ("t", "r")]
    between = "\n\n" if runs else ""
    run = f"<{p}r>".encode() + _written(p, "t", between + text) + f"</{p}r>".encode()
    if not runs:
        return [put_in(data, holder, run)]
    edits = [
        # A plain text cannot stand beside runs.
        edit
        for plain in holder.all("t")
        for edit in ((plain.start, plain.start, f"<{p}r>".encode()), (plain.end, plain.end, f"</{p}r>".encode()))
    ]
    return [*edits, (runs[-1].end, runs[-1].end, run)]


def _written(prefix: str, name: str, text: str) -> bytes:
    keep = ' xml:space="preserve"' if name == "t" else ""
    written = f"<{prefix}{name}{keep}>{escaped(text)}</{prefix}{name}>"
    return written.encode("ascii", "xmlcharrefreplace")


# -- boxes ---------------------------------------------------------------------------------------------


def _add_boxes(draft: Draft, sheet: str, notes: Sequence[Note]) -> None:
    data = draft.read(sheet)
    at, key = _legacy_drawing(data, sheet)
    if key is None:
        part = draft.free_name("xl/drawings/vmlDrawing{}.vml")
        first = 1 + max((_highest_block(draft.read(p)) for p in draft.parts() if p.lower().endswith(".vml")), default=0)
        blocks = ",".join(str(first + n) for n in range(1 + len(notes) // _BLOCK))
        layout = f'<o:shapelayout v:ext="edit"><o:idmap v:ext="edit" data="{blocks}"/></o:shapelayout>'
        draft.add(part, f"<xml{_DECLARED}>{layout}</xml>".encode(), _DRAWING_TYPE)
        key = draft.relate(sheet, f"{RELATIONS}/vmlDrawing", part)
        element = f'<{_prefix(data)}legacyDrawing xmlns:r="{RELATIONS}" r:id={quoteattr(key)}/>'.encode()
        draft.write(sheet, data[:at] + element + data[at:])
        number = first * _BLOCK + 1
    else:
        part = getattr(draft.relations(sheet).get(key), "target", None)
        if part not in draft.parts():
            raise BookRefused("The drawing of a sheet's notes is missing.")
        number = 0
    drawing = draft.read(part)
    end = drawing.rfind(b"</xml")
    if end < 0 or b"\0" in drawing[:200]:
        raise BookRefused("The drawing of a sheet's notes is written in a way that cannot be followed.")
    numbers = [int(found) for found in re.findall(rb"_x0000_s(\d{1,9})\b", drawing)]
    number = number or max([_BLOCK, *numbers]) + 1
    head = drawing[: tag_end(drawing, drawing.find(b"<xml"))] if b"<xml" in drawing else b""
    spaces = "" if all(f'xmlns:{prefix}="{name}"'.encode() in head for prefix, name in _SPACES) else _DECLARED
    shapes = [] if b'id="_x0000_t202"' in drawing else [_BOX_TYPE.format(spaces=spaces)]
    shapes += [_box(note, number + count, spaces) for count, note in enumerate(notes)]
    draft.write(part, drawing[:end] + "".join(shapes).encode() + drawing[end:])


def _legacy_drawing(data: bytes, part: str) -> tuple[int, str | None]:
    """Where a sheet's legacy drawing belongs, and its relation's key where it has one."""
    found = _DATA_END.search(data)
    if found is None:
        raise BookRefused("A sheet is written in a way that cannot be followed.")
    at = found.end()
    head = _root_tag(data)
    root = parsed(head + data[at:], part)  # without the cells
    place, key = at, None
    for child in root.children:
        if _BEFORE.fullmatch(child.name):
            place = at + child.end - len(head)
        elif child.name == "legacyDrawing":
            key = next((value for name, value in child.attributes.items() if name.rpartition(":")[2] == "id"), "")
    return place, key


def _root_tag(data: bytes) -> bytes:
    match = re.search(rb"<(?:[\w.-]+:)?worksheet\b", data)
    if match is None:
        raise BookRefused("A sheet is written in a way that cannot be followed.")
    return data[match.start() : tag_end(data, match.start())]


def _prefix(data: bytes) -> str:
    return _root_tag(data)[1:].partition(b"worksheet")[0].decode()


def _highest_block(drawing: bytes) -> int:
    """The highest block of numbers that a drawing reserves or uses."""
    reserved = [int(n) for found in re.findall(rb'data="([\d,]{1,999})"', drawing) for n in found.split(b",") if n]
    return max([0, *reserved, *(int(n) // _BLOCK for n in re.findall(rb"_x0000_s(\d{1,9})\b", drawing))])


def _box(note: Note, number: int, spaces: str) -> str:
    lines = sum(1 + len(line) // _SIGNS for line in note.text.split("\n"))
    high = min(_HIGHEST, 2 + lines)
    left = max(0, min(note.column, LAST_COLUMN - 1 - _WIDE))
    top = max(0, min(note.row - 2, LAST_ROW - 1 - high))
    anchor = f"{left}, 15, {top}, 10, {left + _WIDE}, 15, {top + high}, 4"
    return _BOX.format(number=number, spaces=spaces, anchor=anchor, row=note.row - 1, column=note.column - 1)
