"""The zip package of a workbook: parts read within limits, and those left alone copied byte for byte."""

from __future__ import annotations

import io
import stat
import struct
import zipfile
import zlib
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path

from strutbook_addin.xlsx.doctypes import declares_doctype, forbidden_doctype
from strutbook_addin.xlsx.errors import UnreadableWorkbook

MEBIBYTE = 1 << 20
#: Largest file that is opened.
FILE_LIMIT = 512 * MEBIBYTE
#: Largest inflated size of one part, and of all together.
PART_LIMIT = 512 * MEBIBYTE
TOTAL_LIMIT = 2048 * MEBIBYTE
#: How many times larger than its compressed bytes a part may be, above the size from which it matters.
RATIO_LIMIT = 400
RATIO_FROM = 64 * MEBIBYTE
ENTRY_LIMIT = 20_000

_OLE_SIGNATURE = bytes.fromhex("d0cf11e0a1b11ae1")
_CENTRAL_SIGNATURE = b"PK\1\2"
_CENTRAL = struct.Struct("<4s4B4HL2L5H2L")
_LOCAL = struct.Struct("<4s2B4HL2L2H")
_END = struct.Struct("<4s4H2LH")
#: In zip archives this size or offset means that the real one stands elsewhere.
_ELSEWHERE = 0xFFFFFFFF
#: What the standard library raises for archives that are none, or are damaged.
_DAMAGED = (zipfile.BadZipFile, EOFError, NotImplementedError, RuntimeError, struct.error, ValueError)
#: Parts in XML; pictures in SVG, which may rightly declare a document type, are never parsed.
_MARKUP = (".xml", ".rels", ".vml")
#: Bytes of a part from which its first element is told.
_HEAD = 512


@dataclass(frozen=True)
class _Entry:
    info: zipfile.ZipInfo
    central: bytes  #: its record in the central directory, as it was found
    start: int  #: where its local header begins
    content: int  #: where its compressed bytes begin
    end: int  #: where its data and all that belongs to it end


class Package:
    """A workbook file in memory. `read` gives the bytes of a part; `packed` the file with parts changed."""

    def __init__(self, data: bytes) -> None:
        self.data = data
        self._archive = self._open(data)
        self._entries = self._entries_of(self._archive)
        self._by_folded_name = {_folded(entry.info.filename): entry for entry in self._entries}
        self._check_limits()
        self._check_doctypes()

    @classmethod
    def open(cls, path: Path) -> Package:
        """Read a file whole, so that it cannot change while it is worked on.

        Raises
        ------
        UnreadableWorkbook
            When the file is no workbook package or breaks a limit.
        OSError
            When the file cannot be read at all.
        """
        state = path.stat()
        if not stat.S_ISREG(state.st_mode):
            kind = "a folder" if stat.S_ISDIR(state.st_mode) else "no file but a device"
            raise UnreadableWorkbook(f"it is {kind}. Name a workbook, .xlsx or .xlsm.")
        size = state.st_size
        if size > FILE_LIMIT:
            raise UnreadableWorkbook(
                f"the file holds {size // MEBIBYTE} MiB; at most {FILE_LIMIT // MEBIBYTE} MiB are read. "
                "Remove from it what the truss does not need."
            )
        return cls(path.read_bytes())

    def names(self) -> list[str]:
        """Names of all parts, in their order in the file."""
        return [entry.info.filename for entry in self._entries]

    def find(self, name: str) -> str | None:
        """Name of a part as it is written in the file; part names match without regard to case."""
        entry = self._by_folded_name.get(_folded(name))
        return None if entry is None else entry.info.filename

    def read(self, name: str) -> bytes:
        """Bytes of a part.

        Raises
        ------
        UnreadableWorkbook
            When it is missing or damaged.
        """
        entry = self._by_folded_name.get(_folded(name))
        if entry is None:
            raise UnreadableWorkbook(f"the file is damaged: its part {name} is missing. {_REPAIR}")
        info = entry.info
        # One byte more than the archive declares shows a part that inflates to more than it says.
        data = self._inflated(entry, info.compress_size, info.file_size + 1)
        if len(data) != info.file_size or zlib.crc32(data) != info.CRC:
            raise UnreadableWorkbook(f"the file is damaged in its part {info.filename}. {_REPAIR}")
        return data

    def packed(self, changed: Mapping[str, bytes], removed: frozenset[str] = frozenset()) -> bytes:
        """The file with some parts changed, added or removed; every other byte of its parts is copied.

        New parts come last.
        """
        out = io.BytesIO()
        central: list[bytes] = []
        pending = dict(changed)
        for entry in self._entries:
            name = entry.info.filename
            if name in removed:
                continue
            offset = out.tell()
            if name in pending:
                central.append(_write_part(out, entry.info, pending.pop(name)))
            else:
                out.write(self.data[entry.start : entry.end])
                central.append(_moved(entry, offset))
        central.extend(_write_part(out, _new_info(name), data) for name, data in pending.items())
        start = out.tell()
        directory = b"".join(central)
        comment = self._archive.comment
        out.write(directory)
        out.write(_END.pack(b"PK\5\6", 0, 0, len(central), len(central), len(directory), start, len(comment)))
        out.write(comment)
        return out.getvalue()

    def _inflated(self, entry: _Entry, compressed: int, limit: int) -> bytes:
        """At most `limit` bytes of a part, from so many of its compressed bytes."""
        packed = self.data[entry.content : entry.content + compressed]
        if entry.info.compress_type == zipfile.ZIP_STORED:
            return packed[:limit]
        try:
            return zlib.decompressobj(-15).decompress(packed, limit)
        except zlib.error as error:
            name = entry.info.filename
            raise UnreadableWorkbook(f"the file is damaged in its part {name} ({error}). {_REPAIR}") from error

    def _open(self, data: bytes) -> zipfile.ZipFile:
        if data.startswith(_OLE_SIGNATURE):
            raise UnreadableWorkbook(
                "the file is protected by a password or is an old .xls workbook. "
                "Open it in your spreadsheet program and save it as .xlsx without a password."
            )
        # Counted before the directory is read: millions of entries would take minutes and all memory.
        if data.count(_CENTRAL_SIGNATURE) > ENTRY_LIMIT:
            raise UnreadableWorkbook(f"the file holds more than {ENTRY_LIMIT:,} parts; no workbook does.")
        try:
            return zipfile.ZipFile(io.BytesIO(data))
        except _DAMAGED as error:
            state = "is empty" if not data else "is not a workbook, or is damaged"
            raise UnreadableWorkbook(
                f"the file {state}. Open it in your spreadsheet program and save it as .xlsx."
            ) from error

    def _entries_of(self, archive: zipfile.ZipFile) -> list[_Entry]:
        infos = archive.infolist()
        starts = sorted(info.header_offset for info in infos)
        following = dict(zip(starts, [*starts[1:], archive.start_dir], strict=True))
        entries: list[_Entry] = []
        position = archive.start_dir
        for info in infos:
            fields = _CENTRAL.unpack_from(self.data, position)
            central_end = position + _CENTRAL.size + sum(fields[12:15])
            start, end = info.header_offset, following[info.header_offset]
            content = start + _LOCAL.size
            if start >= 0 and content <= end:
                content += sum(_LOCAL.unpack_from(self.data, start)[10:12])
            # Parts that overlap make a small file inflate without end, and could not be copied one by one.
            if start < 0 or content + info.compress_size > end:
                raise UnreadableWorkbook(f"the file is damaged near its part {info.filename}. {_REPAIR}")
            entries.append(_Entry(info, self.data[position:central_end], start, content, end))
            position = central_end
        folded = {_folded(info.filename) for info in infos}
        if len(folded) < len(infos) or len(following) < len(infos):
            raise UnreadableWorkbook(
                f"the file holds two parts of one name, and programs would differ in it. {_REPAIR}"
            )
        return entries

    def _check_limits(self) -> None:
        total = 0
        for entry in self._entries:
            info = entry.info
            total += info.file_size
            ratio = info.file_size / max(info.compress_size, 1)
            if info.file_size > PART_LIMIT or (info.file_size > RATIO_FROM and ratio > RATIO_LIMIT):
                raise UnreadableWorkbook(
                    f"the file is not opened: its part {info.filename} would inflate from "
                    f"{info.compress_size:,} to {info.file_size:,} bytes, as if made to exhaust memory."
                )
            if info.flag_bits & 1:
                raise UnreadableWorkbook(
                    "the file is protected by a password. Save it without one in your spreadsheet program."
                )
            if info.compress_type not in (zipfile.ZIP_STORED, zipfile.ZIP_DEFLATED):
                raise UnreadableWorkbook(
                    f"its part {info.filename} is compressed in a way that no spreadsheet program uses. "
                    "Save it as .xlsx in your spreadsheet program."
                )
        if total > TOTAL_LIMIT:
            raise UnreadableWorkbook(
                f"the file is not opened: its parts would inflate to {total // MEBIBYTE} MiB; "
                f"at most {TOTAL_LIMIT // MEBIBYTE} MiB are read."
            )

    def _check_doctypes(self) -> None:
        for entry in self._entries:
            name = entry.info.filename
            if name.casefold().endswith(_MARKUP):
                head = self._inflated(entry, min(entry.info.compress_size, _HEAD), _HEAD)
                declared = declares_doctype(head)
                if declared is None:
                    declared = declares_doctype(self.read(name))
                if declared:
                    raise forbidden_doctype(name)


_REPAIR = "Open it in your spreadsheet program, let it repair the file, and save it again."


def _folded(name: str) -> str:
    """Name of a part without regard to case and to how its folders are written."""
    return name.replace("\\", "/").lstrip("/").casefold()


def _moved(entry: _Entry, offset: int) -> bytes:
    """Central record of an entry that was copied to another place."""
    fields = list(_CENTRAL.unpack_from(entry.central))
    if _ELSEWHERE in (fields[10], fields[11], fields[18]):
        return _central_record(entry.info, offset)
    fields[18] = offset
    return _CENTRAL.pack(*fields) + entry.central[_CENTRAL.size :]


def _new_info(name: str) -> zipfile.ZipInfo:
    info = zipfile.ZipInfo(name)
    info.compress_type = zipfile.ZIP_DEFLATED
    return info


def _write_part(out: io.BytesIO, like: zipfile.ZipInfo, data: bytes) -> bytes:
    """Write a part with the name and date of `like`; return its central record."""
    info = zipfile.ZipInfo(like.filename, like.date_time)
    info.compress_type = zipfile.ZIP_DEFLATED
    info.create_system, info.external_attr = like.create_system, like.external_attr
    deflate = zlib.compressobj(6, zlib.DEFLATED, -15)
    packed = deflate.compress(data) + deflate.flush()
    info.CRC, info.file_size, info.compress_size = zlib.crc32(data), len(data), len(packed)
    offset = out.tell()
    out.write(info.FileHeader(zip64=False))
    out.write(packed)
    return _central_record(info, offset)


def _central_record(info: zipfile.ZipInfo, offset: int) -> bytes:
    try:
        name, flags = info.filename.encode("ascii"), info.flag_bits & ~0x800
    except UnicodeEncodeError:
        name, flags = info.filename.encode("utf-8"), info.flag_bits | 0x800
    year, month, day, hour, minute, second = info.date_time
    return (
        _CENTRAL.pack(
            b"PK\1\2",
            max(info.create_version, 20),
            info.create_system,
            max(info.extract_version, 20),
            0,
            flags,
            info.compress_type,
            hour << 11 | minute << 5 | second // 2,
            (year - 1980) << 9 | month << 5 | day,
            info.CRC,
            info.compress_size,
            info.file_size,
            len(name),
            0,
            0,
            0,
            info.internal_attr,
            info.external_attr,
            offset,
        )
        + name
    )
