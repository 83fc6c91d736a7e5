"""The zip container of a workbook: a strict directory, bounded inflating, and a copy with parts replaced.

The whole file is held as bytes (the gate's size limit keeps that small), so what was examined is what
is used. Sizes and check sums are counted on the real data; what the directory says is only compared.
"""

from __future__ import annotations

import io
import os
import struct
import tempfile
import zipfile
import zlib
from collections.abc import Collection, Iterator, Mapping
from dataclasses import dataclass
from itertools import pairwise
from pathlib import Path

from cellfuncs.errors import BookRefused

MAX_FILE = 20 * 1024 * 1024
MAX_ENTRIES = 2000
MAX_INFLATED = 200 * 1024 * 1024
MAX_RATIO = 100
RATIO_FROM = 1024 * 1024
CHUNK = 64 * 1024
_NO_DATE = (1980, 1, 1, 0, 0, 0)

_DAMAGED = "The file is damaged: {}. Save it again in your spreadsheet program."


@dataclass(frozen=True)
class Member:
    """One part in the container: where its packed bytes lie in the file, and its directory entry."""

    name: str
    start: int
    info: zipfile.ZipInfo


class Package:
    """The parts of a container in the order of its directory."""

    def __init__(self, data: bytes) -> None:
        self.data = data
        self.members = _directory(data)

    def pieces(self, name: str) -> Iterator[bytes]:
        """The inflated bytes of one part, piece by piece; raises BookRefused past the limits."""
        member = self.members[name]
        info = member.info
        packed = memoryview(self.data)[member.start : member.start + info.compress_size]
        total, checksum = 0, 0
        for piece in _inflate(packed, info.compress_type):
            total += len(piece)
            if total > MAX_INFLATED:
                raise BookRefused(f"The part {shown(name)} grows past 200 MB when unpacked, which no workbook needs.")
            if total > RATIO_FROM and total > MAX_RATIO * max(len(packed), 1):
                raise BookRefused(
                    f"The part {shown(name)} unpacks to more than {MAX_RATIO} times its size, as only a trap does."
                )
            checksum = zlib.crc32(piece, checksum)
            yield piece
        if total != info.file_size or checksum != info.CRC:
            raise BookRefused(_DAMAGED.format(f"the part {shown(name)} is not what the directory says"))

    def read(self, name: str) -> bytes:
        """The whole inflated part."""
        return b"".join(self.pieces(name))


def shown(name: str) -> str:
    """A part's name fit for a message: short and printable."""
    text = "".join(c if c.isprintable() else "?" for c in name)
    return text if len(text) <= 60 else text[:57] + "..."


def _inflate(packed: memoryview, method: int) -> Iterator[bytes]:
    if method == zipfile.ZIP_STORED:
        for at in range(0, len(packed), CHUNK):
            yield bytes(packed[at : at + CHUNK])
        return
    unpacker = zlib.decompressobj(-15)
    try:
        for at in range(0, len(packed), CHUNK):
            waiting = bytes(packed[at : at + CHUNK])
            while waiting:
                piece = unpacker.decompress(waiting, CHUNK)
                waiting = unpacker.unconsumed_tail
                if piece:
                    yield piece
                if unpacker.eof:
                    if unpacker.unused_data or at + CHUNK < len(packed):
                        raise BookRefused(_DAMAGED.format("a part is followed by stray bytes"))
                    return
        while piece := unpacker.decompress(unpacker.unconsumed_tail, CHUNK):
            yield piece
    except zlib.error as error:
        raise BookRefused(_DAMAGED.format("a part cannot be unpacked")) from error
    if not unpacker.eof:
        raise BookRefused(_DAMAGED.format("a part ends too early"))


def _directory(data: bytes) -> dict[str, Member]:
    if data.count(b"PK\x01\x02") > 2 * MAX_ENTRIES:
        raise BookRefused(f"The file holds more than {MAX_ENTRIES} parts, which no workbook needs.")
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as archive:
            entries = archive.infolist()
    except (
        zipfile.BadZipFile,
        zipfile.LargeZipFile,
        NotImplementedError,
        struct.error,
        ValueError,
        OSError,
    ) as error:
        raise BookRefused(_DAMAGED.format("its zip directory cannot be read; it may be cut off")) from error
    if len(entries) > MAX_ENTRIES:
        raise BookRefused(f"The file holds {len(entries)} parts; at most {MAX_ENTRIES} are read.")
    members: dict[str, Member] = {}
    seen: set[str] = set()
    for info in entries:
        _check_name(info)
        if info.filename.casefold() in seen:
            raise BookRefused(
                f"The part {shown(info.filename)} stands twice in the file, so it is unclear which one counts."
            )
        seen.add(info.filename.casefold())
        if info.flag_bits & 0x1:
            raise BookRefused(
                "A part of the file is encrypted. Remove the password in your spreadsheet program and save it."
            )
        if info.compress_type not in (zipfile.ZIP_STORED, zipfile.ZIP_DEFLATED):
            raise BookRefused("The file is packed by an unusual method. Save it again in your spreadsheet program.")
        members[info.filename] = Member(info.filename, _data_start(data, info), info)
    _check_overlap(members)
    if sum(m.info.file_size for m in members.values()) > MAX_INFLATED:
        raise BookRefused("The file would unpack to more than 200 MB, which no workbook needs.")
    return members


def _check_name(info: zipfile.ZipInfo) -> None:
    raw = info.orig_filename
    if "\0" in raw or "\\" in raw or raw.startswith("/") or ":" in raw or ".." in raw.split("/"):
        raise BookRefused(f"The part name {shown(raw)} points outside the file, as only a trap does.")


def _data_start(data: bytes, info: zipfile.ZipInfo) -> int:
    """Where the packed bytes begin, from the local header, which must agree with the directory."""
    header = data[info.header_offset : info.header_offset + 30]
    if len(header) < 30 or header[:4] != b"PK\x03\x04":
        raise BookRefused(_DAMAGED.format(f"the part {shown(info.filename)} is not where the directory says"))
    name_length, extra_length = struct.unpack("<HH", header[26:30])
    start = info.header_offset + 30 + name_length + extra_length
    name = data[info.header_offset + 30 : info.header_offset + 30 + name_length]
    encoding = "utf-8" if struct.unpack("<H", header[6:8])[0] & 0x800 else "cp437"
    if name.decode(encoding, "replace") != info.orig_filename:
        raise BookRefused(_DAMAGED.format(f"the part {shown(info.filename)} has two names"))
    if start + info.compress_size > len(data):
        raise BookRefused(_DAMAGED.format(f"the part {shown(info.filename)} reaches past the end of the file"))
    return start


def _check_overlap(members: Mapping[str, Member]) -> None:
    spans = sorted((m.info.header_offset, m.start + m.info.compress_size) for m in members.values())
    for (_, end), (begin, _) in pairwise(spans):
        if begin < end:
            raise BookRefused("Parts of the file lie on top of each other, as only a trap does.")


def copy_with(package: Package, changed: Mapping[str, bytes], dropped: Collection[str] = ()) -> bytes:
    """A container with the parts in `changed` replaced, or added at the end, and those in `dropped` left out.

    All others keep their packed bytes, name, order and date.
    """
    out = io.BytesIO()
    with zipfile.ZipFile(out, "w", zipfile.ZIP_DEFLATED) as archive:
        for member in package.members.values():
            if member.name in dropped:
                continue
            info = _same_entry(member.info)
            if member.name in changed:
                archive.writestr(info, changed[member.name], compress_type=zipfile.ZIP_DEFLATED)
                continue
            # zipfile cannot copy packed bytes, so the entry is placed by hand: a public header, the
            # bytes, and the directory entry that the closing of the archive writes.
            info.CRC, info.file_size, info.compress_size = (
                member.info.CRC,
                member.info.file_size,
                member.info.compress_size,
            )
            info.compress_type = member.info.compress_type
            info.header_offset = out.tell()
            out.write(info.FileHeader(zip64=False))
            out.write(package.data[member.start : member.start + info.compress_size])
            archive.filelist.append(info)
            archive.NameToInfo[info.filename] = info
            archive.start_dir = out.tell()
            archive._didModify = True
        for name in changed:
            if name not in package.members:
                info = zipfile.ZipInfo(name, _NO_DATE)
                info.create_system = 0  # the same bytes on every system
                archive.writestr(info, changed[name], compress_type=zipfile.ZIP_DEFLATED)
    return out.getvalue()


def _same_entry(old: zipfile.ZipInfo) -> zipfile.ZipInfo:
    new = zipfile.ZipInfo(old.filename, old.date_time)
    new.external_attr, new.internal_attr = old.external_attr, old.internal_attr
    new.create_system, new.comment = old.create_system, old.comment
    new.flag_bits = old.flag_bits & ~0x8  # sizes stand in the header, not behind the data
    return new


def write_whole(path: Path, data: bytes) -> None:
    """Write `data` to `path` through a temporary file beside it and a rename: whole or not at all."""
    path = Path(path)
    try:
        handle, temporary = tempfile.mkstemp(prefix=f".{path.name}.", suffix=".part", dir=path.parent)
    except OSError as error:
        raise BookRefused(f"Cannot write in {path.parent}: {error.strerror}.") from error
    try:
        with os.fdopen(handle, "wb") as file:
            file.write(data)
            file.flush()
            os.fsync(file.fileno())
        mask = os.umask(0)
        os.umask(mask)
        os.chmod(temporary, 0o666 & ~mask)
        os.replace(temporary, path)
    except BaseException as error:
        Path(temporary).unlink(missing_ok=True)
        if isinstance(error, OSError):
            raise BookRefused(f"Cannot write {path.name}: {error.strerror}.") from error
        raise
