"""What is refused as a workbook file, and how its parts are copied."""

from __future__ import annotations

import struct
import zipfile
import zlib
from io import BytesIO
from pathlib import Path

import pytest

from strutbook_addin.hosts.offline import OfflineWorkbook
from strutbook_addin.xlsx import UnreadableWorkbook
from strutbook_addin.xlsx import package as limits
from strutbook_addin.xlsx.package import Package

CENTRAL, LOCAL = b"PK\1\2", b"PK\3\4"


def refusal(data: bytes) -> str:
    """Sentence with which a file is refused."""
    with pytest.raises(UnreadableWorkbook) as refused:
        Package(data)
    return str(refused.value)


def zipped(*parts: tuple[str, bytes], method: int = zipfile.ZIP_DEFLATED) -> bytes:
    """A package of parts, of which two may have one name."""
    file = BytesIO()
    with zipfile.ZipFile(file, "w", method) as archive:
        for name, content in parts:
            archive.writestr(name, content)
    return file.getvalue()


def with_field(data: bytes, name: str, central: int, local: int | None, value: int, code: str) -> bytes:
    """A package with a field of a part's records overwritten, by its offset in either record."""
    changed = bytearray(data)
    for signature, length, offset in ((CENTRAL, 46, central), (LOCAL, 30, local)):
        place = data.index(signature)
        while data[place + length : place + length + len(name)] != name.encode():
            place = data.index(signature, place + 1)
        if offset is not None:
            struct.pack_into(code, changed, place + offset, value)
    return bytes(changed)


def with_size(data: bytes, name: str, size: int) -> bytes:
    """A package that declares another inflated size of a part."""
    return with_field(data, name, 24, 22, size, "<L")


def test_empty_file_is_refused() -> None:
    assert refusal(b"").startswith("the file is empty.")


def test_text_file_is_refused() -> None:
    assert "is not a workbook, or is damaged" in refusal(b"Joint,x,y\nA,0,0\n" * 9)


def test_encrypted_or_old_file_is_refused() -> None:
    assert "protected by a password or is an old .xls" in refusal(bytes.fromhex("d0cf11e0a1b11ae1") + bytes(600))


def test_truncated_file_is_refused() -> None:
    whole = zipped(("xl/workbook.xml", b"<a/>" * 500))
    assert "damaged" in refusal(whole[: len(whole) // 2])


def test_every_truncation_is_refused_with_a_sentence() -> None:
    whole = zipped(("a.xml", b"<a/>"), ("b.xml", b"<b/>"))
    for length in range(len(whole)):
        assert refusal(whole[:length]).startswith("the file ")


@pytest.mark.parametrize("second", ["xl/Workbook.xml", "xl\\workbook.xml", "/xl/workbook.xml"])
def test_two_parts_of_one_name_are_refused(second: str) -> None:
    assert "two parts of one name" in refusal(zipped(("xl/workbook.xml", b"<a/>"), (second, b"<b/>")))


def test_encrypted_part_is_refused() -> None:
    data = with_field(zipped(("a.xml", b"<a/>")), "a.xml", 8, 6, 1, "<H")
    assert "protected by a password" in refusal(data)


def test_unusual_compression_is_refused() -> None:
    assert "compressed in a way that no spreadsheet" in refusal(
        zipped(("a.xml", b"<a/>" * 99), method=zipfile.ZIP_BZIP2)
    )


def test_part_beyond_the_size_limit_is_refused() -> None:
    data = with_size(zipped(("a.xml", b"<a/>")), "a.xml", limits.PART_LIMIT + 1)
    assert "as if made to exhaust memory" in refusal(data)


def test_part_that_inflates_too_much_is_refused() -> None:
    data = with_size(zipped(("a.xml", b"<a/>" * 50)), "a.xml", limits.RATIO_FROM + 1)
    assert "as if made to exhaust memory" in refusal(data)


def test_part_that_inflates_to_more_than_it_declares_is_not_inflated() -> None:
    honest = zipped(("a.xml", b"<a>" + b"0" * 9_000_000 + b"</a>"))
    package = Package(with_size(honest, "a.xml", 10))
    with pytest.raises(UnreadableWorkbook, match=r"damaged in its part a\.xml"):
        package.read("a.xml")


def test_parts_beyond_the_size_limit_together_are_refused() -> None:
    content, size = bytes(2_000_000), 480 * limits.MEBIBYTE
    data = zipped(*((f"{number}.bin", content) for number in range(5)), method=zipfile.ZIP_STORED)
    for number in range(5):
        data = with_size(data, f"{number}.bin", size)
    assert "its parts would inflate to 2400 MiB; at most 2048 MiB are read" in refusal(data)


def test_too_many_parts_are_refused_before_they_are_listed() -> None:
    assert "holds more than 20,000 parts" in refusal(LOCAL + CENTRAL * (limits.ENTRY_LIMIT + 1))


def test_file_beyond_the_size_limit_is_refused(tmp_path: Path) -> None:
    path = tmp_path / "huge.xlsx"
    with path.open("wb") as file:
        file.truncate(limits.FILE_LIMIT + 1)
    with pytest.raises(UnreadableWorkbook, match="holds 512 MiB; at most 512 MiB are read"):
        Package.open(path)


def test_overlapping_parts_are_refused() -> None:
    data = zipped(("a.xml", b"<a/>" * 99), ("b.xml", b"<b/>" * 99))
    overlapping = with_field(data, "a.xml", 20, 18, 4096, "<L")
    assert "damaged" in refusal(overlapping)


def test_parts_that_would_begin_before_the_file_are_refused() -> None:
    data = zipped(("a.xml", b"<a/>" * 99), ("b.xml", b"<b/>"))
    # The directory, moved towards the start, says that every part begins earlier than it does.
    assert "damaged" in refusal(data[20:])


def test_damaged_part_is_refused_when_it_is_read() -> None:
    data = zipped(("a.txt", b"some text"), method=zipfile.ZIP_STORED).replace(b"some text", b"same text", 1)
    package = Package(data)
    with pytest.raises(UnreadableWorkbook, match=r"damaged in its part a\.txt"):
        package.read("a.txt")


def test_part_that_is_no_deflate_stream_is_refused_when_it_is_read() -> None:
    content = b"0123456789" * 30
    data = zipped(("a.bin", content))
    packed = zlib.compress(content, wbits=-15)
    assert packed in data
    package = Package(data.replace(packed, b"\xff" * len(packed)))
    with pytest.raises(UnreadableWorkbook, match=r"damaged in its part a\.bin"):
        package.read("a.bin")


def test_missing_part_is_named() -> None:
    with pytest.raises(UnreadableWorkbook, match=r"its part xl/styles\.xml is missing"):
        Package(zipped(("a.xml", b"<a/>"))).read("xl/styles.xml")


def test_folder_is_refused(tmp_path: Path) -> None:
    with pytest.raises(UnreadableWorkbook, match="it is a folder"):
        OfflineWorkbook.open(tmp_path)


def test_device_is_refused() -> None:
    device = Path("/dev/null")
    if not device.exists():
        pytest.skip("this system has no /dev/null")
    with pytest.raises(UnreadableWorkbook, match="no file but a device"):
        OfflineWorkbook.open(device)


def test_missing_file_is_an_error_of_the_system(tmp_path: Path) -> None:
    with pytest.raises(FileNotFoundError):
        OfflineWorkbook.open(tmp_path / "none.xlsx")


def test_part_names_match_without_regard_to_case_and_slashes() -> None:
    package = Package(zipped(("xl\\Worksheets\\sheet1.xml", b"<a/>")))
    assert package.read("XL/worksheets/Sheet1.xml") == b"<a/>"


def test_repacking_without_changes_copies_every_byte() -> None:
    file = BytesIO()
    with zipfile.ZipFile(file, "w", zipfile.ZIP_DEFLATED) as archive:
        archive.comment = b"a remark"
        archive.writestr("a.xml", b"<a/>" * 50)
        archive.writestr(zipfile.ZipInfo("pictures/\u00e9.png", (1999, 12, 31, 23, 58, 58)), bytes(99))
        with archive.open("streamed.bin", "w", force_zip64=True) as part:
            part.write(b"written without knowing its length")
    data = file.getvalue()
    assert Package(data).packed({}) == data


def test_streamed_parts_are_copied_with_what_follows_them() -> None:
    class Pipe(BytesIO):
        """A target that cannot go back, so that sizes stand behind each part."""

        def seekable(self) -> bool:
            return False

        def tell(self) -> int:
            raise OSError

    file = Pipe()
    with zipfile.ZipFile(file, "w", zipfile.ZIP_DEFLATED) as archive:
        archive.writestr("a.bin", b"first" * 20)
        archive.writestr("b.bin", b"second" * 20)
    result = Package(file.getvalue()).packed({"a.bin": b"changed", "c.bin": b"new"})
    with zipfile.ZipFile(BytesIO(result)) as archive:
        assert archive.testzip() is None
        assert {name: archive.read(name) for name in archive.namelist()} == {
            "a.bin": b"changed",
            "b.bin": b"second" * 20,
            "c.bin": b"new",
        }


def test_bytes_before_the_first_part_do_not_shift_the_parts() -> None:
    data = b"#!/bin/sh\n" + zipped(("a.bin", b"one"), ("b.bin", b"two"))
    package = Package(data)
    assert package.read("b.bin") == b"two"
    assert Package(package.packed({"a.bin": b"other"})).read("b.bin") == b"two"


def test_changed_part_keeps_its_place_and_removed_part_goes() -> None:
    package = Package(zipped(("a.bin", b"1"), ("b.bin", b"2"), ("c.bin", b"3")))
    result = Package(package.packed({"b.bin": b"new"}, frozenset(["c.bin"])))
    assert result.names() == ["a.bin", "b.bin"]
    assert result.read("b.bin") == b"new"
