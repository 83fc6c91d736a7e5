"""New values set into a sheet's own text: only the cells that change are written anew, all else stays byte for byte."""

from __future__ import annotations

import re
from bisect import bisect_left
from collections.abc import Mapping
from typing import Any

from cellfuncs.books.grid import LAST_COLUMN, LAST_ROW, Area, area_text, column_letters, rectangle
from cellfuncs.books.reading import Cell, Sheet, tag_end
from cellfuncs.books.xmltext import Value, decoded, encoded, escaped

_KEPT = object()  # a formula that stays as it is


def apply_edits(data: bytes, edits: list[tuple[int, int, bytes]]) -> bytes:
    """`data` with each (start, end, new bytes) put in place; the edits do not overlap."""
    edits.sort(key=lambda edit: (edit[0], edit[1]))
    pieces, last = [], 0
    for start, end, new in edits:
        pieces += (data[last:start], new)
        last = end
    pieces.append(data[last:])
    return b"".join(pieces)


def set_values(
    sheet: Sheet,
    values: Mapping[tuple[int, int], Value],
    extents: Mapping[tuple[int, int], Area] | None = None,
    formulas: Mapping[tuple[int, int], str | None] | None = None,
) -> bytes:
    """The sheet's text with `values` in their cells (None empties one) and new `extents` of array formulas.

    Formulas stay, but for those in `formulas`, which get another text or, with None, go. Formats and everything
    else stay. Cells and rows that are not there yet are put in in order. Where a cell already holds the value,
    its bytes are not touched.
    """
    extents, formulas = extents or {}, formulas or {}
    edits: list[tuple[int, int, bytes]] = []
    missing: dict[int, dict[int, Value]] = {}
    for row, column in sorted(set(values) | set(extents) | set(formulas)):
        place = (row, column)
        index = sheet.at(row, column)
        if index is None:
            if values.get(place) is not None:
                missing.setdefault(row, {})[column] = values[place]
            continue
        old = sheet.cell(index)
        formula = formulas.get(place) if place in formulas else _KEPT
        new = _rewritten(sheet, old, values.get(place), place in values, extents.get(place), formula)
        if new is not None:
            edits.append((old.start, old.end, new))
    edits += _insertions(sheet, missing)
    edits += _dimension(sheet, missing)
    return apply_edits(sheet.data, edits) if edits else sheet.data


def with_attribute(tag: bytes, name: str, value: str | None) -> bytes:
    """A start tag with one attribute set, or taken out where `value` is None. `value` needs no escaping."""
    pattern = re.compile(rb"\s+" + name.encode() + rb"\s*=\s*(\"[^\"]*\"|'[^']*')")
    match = next((m for m in pattern.finditer(tag) if not _in_quotes(tag, m.start())), None)
    if value is None:
        return tag if match is None else tag[: match.start()] + tag[match.end() :]
    written = f' {name}="{value}"'.encode()
    if match is not None:
        return tag[: match.start()] + written + tag[match.end() :]
    end = len(tag) - (2 if tag.endswith(b"/>") else 1)
    return tag[:end].rstrip() + written + tag[end:]


def _in_quotes(tag: bytes, at: int) -> bool:
    quote = 0
    for byte in tag[:at]:
        if quote:
            if byte == quote:
                quote = 0
        elif byte in b"\"'":
            quote = byte
    return bool(quote)


def _rewritten(
    sheet: Sheet, cell: Cell, value: Value, set_value: bool, extent: Area | None, formula: Any = _KEPT
) -> bytes | None:
    """The cell's new bytes, or None where nothing changes."""
    mark = cell.attributes.get("t")
    texts = [child.text for child in cell.children if child.name in ("v", "is")]
    stands = mark != "s" and _same(decoded(mark, texts[0] if texts else None), value)
    renew = set_value and not stands
    changed, kept = renew, []
    for child in cell.children:
        raw = sheet.data[child.start : child.end]
        if child.name in ("v", "is") and renew:
            continue
        if child.name == "f" and formula is not _KEPT:
            changed = True
            if formula is None:
                continue
            raw = _formula(sheet, raw, formula)
        elif child.name == "f" and extent is not None:
            end = tag_end(raw, 0)
            if rectangle(_ref(raw[:end])) != extent:
                raw = with_attribute(raw[:end], "ref", area_text(extent)) + raw[end:]
                changed = True
        kept.append((child.name, raw))
    if not changed:
        return None
    head = sheet.data[cell.start : cell.tag_end]
    if formula is None:  # a plain value is no dynamic array and no rich value
        head = with_attribute(with_attribute(head, "cm", None), "vm", None)
    if renew:
        new_mark, text = encoded(value)
        head = with_attribute(head, "t", new_mark)
        if text is not None:
            at = next((i + 1 for i, (name, _) in enumerate(kept) if name == "f"), 0)
            kept.insert(at, ("v", f"<{sheet.prefix}v>{text}</{sheet.prefix}v>".encode()))
    inner = b"".join(raw for _, raw in kept)
    if cell.closed and inner:
        head = head[:-2].rstrip() + b">"
    tail = b"" if cell.closed and not inner else f"</{sheet.prefix}c>".encode()
    return head + inner + tail


def _formula(sheet: Sheet, raw: bytes, text: str) -> bytes:
    """A formula's element with another text; a shared one becomes one of its own."""
    tag = raw[: tag_end(raw, 0)]
    if tag.endswith(b"/>"):
        tag = tag[:-2].rstrip() + b">"
    if re.search(rb"\st\s*=\s*[\"']shared[\"']", tag):
        for name in ("t", "ref", "si"):
            tag = with_attribute(tag, name, None)
    return tag + f"{escaped(text)}</{sheet.prefix}f>".encode()


def _ref(tag: bytes) -> str:
    """The `ref` attribute in a start tag, or an empty text."""
    match = re.search(rb"\sref\s*=\s*[\"']([^\"']*)[\"']", tag)
    return match[1].decode() if match else ""


def _same(old: Value, new: Value) -> bool:
    return (type(old) is type(new) and old == new) or (
        isinstance(old, float) and isinstance(new, int) and not isinstance(new, bool) and old == new
    )


def _insertions(sheet: Sheet, missing: dict[int, dict[int, Value]]) -> list[tuple[int, int, bytes]]:
    edits: list[tuple[int, int, bytes]] = []
    p = sheet.prefix
    for row, cells in sorted(missing.items()):
        index = bisect_left(sheet.rows, row)
        exists = index < len(sheet.rows) and sheet.rows[index] == row
        style = None
        if exists:
            start, end = sheet.row_starts[index], sheet.row_ends[index]
            opened = tag_end(sheet.data, start)
            tag = sheet.data[start:opened]
            style = _row_style(tag)
        new = {column: _new_cell(sheet, row, column, value, style) for column, value in sorted(cells.items())}
        if not exists:
            at = sheet.row_starts[index] if index < len(sheet.rows) else sheet.data_end
            text = f'<{p}row r="{row}">'.encode() + b"".join(new.values()) + f"</{p}row>".encode()
            edits.append((at, at, text))
            continue
        if tag.endswith(b"/>"):
            tag = _spanned(tag, new)[:-2].rstrip() + b">"
            edits.append((start, opened, tag + b"".join(new.values()) + f"</{p}row>".encode()))
            continue
        spanned = _spanned(tag, new)
        if spanned != tag:
            edits.append((start, opened, spanned))
        places: dict[int, list[bytes]] = {}
        for column, text in new.items():
            after = bisect_left(sheet.keys, row * 16384 + column - 1)
            here = after < len(sheet.keys) and sheet.keys[after] // 16384 == row
            places.setdefault(sheet.starts[after] if here else end, []).append(text)
        edits += [(at, at, b"".join(texts)) for at, texts in places.items()]
    # Rows that are put in at one place are one edit, in order.
    joined: dict[tuple[int, int], bytes] = {}
    for start, end, text in edits:
        joined[start, end] = joined.get((start, end), b"") + text
    return [(start, end, text) for (start, end), text in joined.items()]


def _row_style(tag: bytes) -> str | None:
    if re.search(rb"\scustomFormat\s*=\s*[\"'](?:1|true)[\"']", tag):
        match = re.search(rb"\ss\s*=\s*[\"'](\d+)[\"']", tag)
        return match[1].decode() if match else None
    return None


def _spanned(tag: bytes, cells: Mapping[int, bytes]) -> bytes:
    match = re.search(rb"\sspans\s*=\s*[\"'](\d+):(\d+)[\"']", tag)
    if match is None:
        return tag
    first, last = min(int(match[1]), *cells), max(int(match[2]), *cells)
    if (first, last) == (int(match[1]), int(match[2])):
        return tag
    return with_attribute(tag, "spans", f"{first}:{last}")


def _new_cell(sheet: Sheet, row: int, column: int, value: Value, style: str | None) -> bytes:
    if style is None:
        style = next((s for first, last, s in sheet.columns if first <= column <= last), None)
    mark, text = encoded(value)
    p = sheet.prefix
    attributes = f' r="{column_letters(column)}{row}"'
    attributes += f' s="{style}"' if style and style.isdigit() and style != "0" else ""
    attributes += f' t="{mark}"' if mark else ""
    return f"<{p}c{attributes}><{p}v>{text}</{p}v></{p}c>".encode()


def _dimension(sheet: Sheet, missing: dict[int, dict[int, Value]]) -> list[tuple[int, int, bytes]]:
    if not missing or sheet.dimension is None:
        return []
    start, reference = sheet.dimension
    area = rectangle(reference)
    if area is None:
        return []
    columns = [column for cells in missing.values() for column in cells]
    wide = (
        min(area[0], *missing),
        min(area[1], *columns),
        min(max(area[2], *missing), LAST_ROW),
        min(max(area[3], *columns), LAST_COLUMN),
    )
    if wide == area:
        return []
    end = tag_end(sheet.data, start)
    return [(start, end, with_attribute(sheet.data[start:end], "ref", area_text(wide)))]
