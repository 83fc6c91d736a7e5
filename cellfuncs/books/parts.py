"""A workbook's container under change: parts replaced, added and taken out, relations and content types kept right.

Parts are changed by putting bytes in or taking bytes out at places that the parser names, so that whatever
else stands in them stays as it is.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from xml.parsers import expat
from xml.sax.saxutils import quoteattr

from cellfuncs.books.gate import Book, resolved
from cellfuncs.books.package import copy_with, shown
from cellfuncs.books.reading import element_end, tag_end
from cellfuncs.books.splice import apply_edits
from cellfuncs.errors import BookRefused

HEAD = b'<?xml version="1.0" encoding="UTF-8" standalone="yes"?>\n'
PACKAGE_RELATIONS = "http://schemas.openxmlformats.org/package/2006/relationships"
TYPES = "[Content_Types].xml"


@dataclass(slots=True)
class Element:
    """One element of a part: its plain name, the prefix before it, attributes, text, children, and where it lies."""

    name: str
    prefix: str
    attributes: dict[str, str]
    start: int
    opened: int  # past its start tag
    closing: int = 0  # where its closing tag begins
    end: int = 0  # past its closing tag
    text: str = ""
    children: list[Element] = field(default_factory=list)

    def all(self, name: str) -> list[Element]:
        """The children of that name."""
        return [child for child in self.children if child.name == name]

    def first(self, name: str) -> Element | None:
        """The first child of that name."""
        return next((child for child in self.children if child.name == name), None)


def parsed(data: bytes, part: str) -> Element:
    """The root of a small part. Raises BookRefused where bytes cannot be put into it."""
    if b"\0" in data[:200]:
        raise BookRefused(f"The part {shown(part)} is not written in UTF-8. Save the workbook again.")
    parser = expat.ParserCreate()
    parser.buffer_text = True
    top = Element("", "", {}, 0, 0)
    path = [top]

    def start(name: str, attributes: dict[str, str]) -> None:
        head, colon, local = name.rpartition(":")
        at = parser.CurrentByteIndex
        element = Element(local, head + colon, attributes, at, tag_end(data, at))
        path[-1].children.append(element)
        path.append(element)

    def end(_: str) -> None:
        element = path.pop()
        element.closing = parser.CurrentByteIndex
        element.end = element_end(data, element.start, element.closing)

    def text(piece: str) -> None:
        path[-1].text += piece

    parser.StartElementHandler, parser.EndElementHandler, parser.CharacterDataHandler = start, end, text
    try:
        parser.Parse(data, True)
    except expat.ExpatError as error:
        raise BookRefused(f"The part {shown(part)} is not well-formed XML.") from error
    return top.children[0]


def put_in(data: bytes, parent: Element, new: bytes) -> tuple[int, int, bytes]:
    """The edit that puts `new` behind the last child of `parent`."""
    if data[parent.opened - 2 : parent.opened] != b"/>":
        return parent.closing, parent.closing, new
    tag = data[parent.start : parent.opened - 2].rstrip() + b">"
    return parent.start, parent.end, tag + new + f"</{parent.prefix}{parent.name}>".encode()


@dataclass(frozen=True)
class Relation:
    """What a part is related to: the last word of the relation's kind, and the part, or None outside the file."""

    key: str
    kind: str
    target: str | None


class Draft:
    """The container with its changes so far."""

    def __init__(self, book: Book) -> None:
        self.book = book
        self.changed: dict[str, bytes] = {}
        self.dropped: set[str] = set()

    def read(self, part: str) -> bytes:
        """A part as it stands now."""
        return self.changed[part] if part in self.changed else self.book.package.read(part)

    def write(self, part: str, data: bytes) -> None:
        """Set a part, where that changes it."""
        if part not in self.parts() or self.read(part) != data:
            self.changed[part] = data

    def parts(self) -> set[str]:
        """The names of all parts."""
        return (set(self.book.package.members) | set(self.changed)) - self.dropped

    def container(self) -> bytes:
        """The whole file; the very bytes of the old one where nothing has changed."""
        if not self.changed and not self.dropped:
            return self.book.package.data
        return copy_with(self.book.package, self.changed, self.dropped)

    def free_name(self, pattern: str) -> str:
        """The first name `pattern` gives with 1, 2 … that no part has."""
        taken = {part.casefold() for part in self.parts()}
        number = 1
        while pattern.format(number).casefold() in taken:
            number += 1
        return pattern.format(number)

    def add(self, part: str, data: bytes, content_type: str) -> None:
        """Add a part and say what it is."""
        self.changed[part] = data
        types = self.read(TYPES)
        root = parsed(types, TYPES)
        text = f"<{root.prefix}Override PartName={quoteattr('/' + part)} ContentType={quoteattr(content_type)}/>"
        self.changed[TYPES] = apply_edits(types, [put_in(types, root, _ascii(text))])

    def relations(self, part: str) -> dict[str, Relation]:
        """The relations of a part by their keys."""
        place = relations_part(part)
        if place not in self.parts():
            return {}
        found = {}
        for element in parsed(self.read(place), place).all("Relationship"):
            get = element.attributes.get
            outside = get("TargetMode") == "External"
            target = None if outside else resolved(part.rpartition("/")[0], get("Target", ""))
            found[get("Id", "")] = Relation(get("Id", ""), get("Type", "").rpartition("/")[2], target)
        return found

    def related(self, part: str, kind: str) -> Relation | None:
        """The first relation of that kind whose part is there."""
        parts = self.parts()
        return next((r for r in self.relations(part).values() if r.kind == kind and r.target in parts), None)

    def relate(self, part: str, kind: str, target: str) -> str:
        """Relate a part to another; `kind` is the whole kind. Gives the key."""
        place = relations_part(part)
        known = self.relations(part)
        number = len(known) + 1
        while f"rId{number}".casefold() in {key.casefold() for key in known}:
            number += 1
        data = self.read(place) if place in self.parts() else None
        if data is None:
            data = HEAD + f'<Relationships xmlns="{PACKAGE_RELATIONS}"></Relationships>'.encode()
        root = parsed(data, place)
        text = f'<{root.prefix}Relationship Id="rId{number}" Type="{kind}" Target={quoteattr("/" + target)}/>'
        self.changed[place] = apply_edits(data, [put_in(data, root, _ascii(text))])
        return f"rId{number}"

    def drop(self, part: str, owner: str) -> None:
        """Take a part out, with its relation from `owner` and its content type."""
        self.dropped.add(part)
        self.changed.pop(part, None)
        place = relations_part(owner)
        data = self.read(place)
        folder = owner.rpartition("/")[0]
        gone = [
            (element.start, element.end, b"")
            for element in parsed(data, place).all("Relationship")
            if resolved(folder, element.attributes.get("Target", "")) == part
        ]
        self.changed[place] = apply_edits(data, gone)
        types = self.read(TYPES)
        gone = [
            (element.start, element.end, b"")
            for element in parsed(types, TYPES).all("Override")
            if element.attributes.get("PartName", "").lstrip("/").casefold() == part.casefold()
        ]
        self.changed[TYPES] = apply_edits(types, gone)


def relations_part(part: str) -> str:
    """The part that holds the relations of another."""
    folder, _, name = part.rpartition("/")
    return f"{folder}/_rels/{name}.rels".lstrip("/")


def _ascii(text: str) -> bytes:
    """Right in every encoding that a part may have."""
    return text.encode("ascii", "xmlcharrefreplace")
