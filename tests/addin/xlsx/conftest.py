"""Workbooks written by hand, part by part, so that each test shows the bytes it is about."""

from __future__ import annotations

import subprocess
import zipfile
from collections.abc import Callable, Sequence
from pathlib import Path
from shutil import which

import pytest

from strutbook_addin.hosts.offline import OfflineWorkbook
from strutbook_addin.sheets import Grid, Refusal, Written

MAIN = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
RELATIONS = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
PACKAGE = "http://schemas.openxmlformats.org/package/2006"
SHEET = "xl/worksheets/sheet1.xml"
SPREADSHEET = "application/vnd.openxmlformats-officedocument.spreadsheetml"


class HandWritten:
    """A workbook with one sheet, S; tests put what they are about into its parts."""

    def __init__(self, folder: Path) -> None:
        self.path = folder / "book.xlsx"
        self.parts: dict[str, str | bytes] = {
            "[Content_Types].xml": (
                f'<Types xmlns="{PACKAGE}/content-types"><Default Extension="xml" ContentType="application/xml"/>'
                '<Default Extension="rels" '
                'ContentType="application/vnd.openxmlformats-package.relationships+xml"/>'
                f'<Override PartName="/xl/workbook.xml" ContentType="{SPREADSHEET}.sheet.main+xml"/>'
                f'<Override PartName="/{SHEET}" ContentType="{SPREADSHEET}.worksheet+xml"/></Types>'
            ),
            "_rels/.rels": relations(("rId1", "officeDocument", "xl/workbook.xml")),
            "xl/workbook.xml": (
                f'<workbook xmlns="{MAIN}" xmlns:r="{RELATIONS}"><sheets>'
                '<sheet name="S" sheetId="1" r:id="rId1"/></sheets></workbook>'
            ),
            "xl/_rels/workbook.xml.rels": relations(("rId1", "worksheet", "worksheets/sheet1.xml")),
        }
        self.sheet("<sheetData/>")

    def sheet(self, content: str) -> HandWritten:
        """Put content into the worksheet element."""
        self.parts[SHEET] = f'<worksheet xmlns="{MAIN}" xmlns:r="{RELATIONS}">{content}</worksheet>'
        return self

    def rows(self, rows: str) -> HandWritten:
        """Put rows into the sheet."""
        return self.sheet(f"<sheetData>{rows}</sheetData>")

    def replace(self, part: str, old: str, new: str) -> HandWritten:
        """Change a piece of a part that is there exactly once."""
        text = self.parts[part]
        assert isinstance(text, str)
        assert text.count(old) == 1
        self.parts[part] = text.replace(old, new)
        return self

    def relate(self, identity: str, kind: str, target: str, content: str | bytes) -> HandWritten:
        """Add a part to which the workbook has a relationship."""
        self.parts[f"xl/{target}"] = content
        declared = f"{SPREADSHEET}.{kind}+xml" if target.endswith("xml") else f"application/{kind}"
        override = f'<Override PartName="/xl/{target}" ContentType="{declared}"/></Types>'
        self.replace("[Content_Types].xml", "</Types>", override)
        new = f'<Relationship Id="{identity}" Type="{RELATIONS}/{kind}" Target="{target}"/></Relationships>'
        return self.replace("xl/_rels/workbook.xml.rels", "</Relationships>", new)

    def file(self) -> Path:
        """Write the parts into the file."""
        with zipfile.ZipFile(self.path, "w", zipfile.ZIP_DEFLATED) as archive:
            for name, content in self.parts.items():
                archive.writestr(name, content)
        return self.path

    def open(self) -> OfflineWorkbook:
        """Write the file and open it."""
        return OfflineWorkbook.open(self.file())

    def read(self) -> Grid:
        """Values of the sheet."""
        return self.open().read("S")

    def reopened(self) -> OfflineWorkbook:
        """Open the file as it stands."""
        return OfflineWorkbook.open(self.path)

    def write(self, *rectangles: tuple[int, int, Sequence[Sequence[Written]]]) -> list[Refusal]:
        """Write rectangles into the sheet and save; what was refused comes back."""
        workbook = self.open()
        refusals = [refusal for place in rectangles for refusal in workbook.write("S", *place)]
        workbook.save(self.path)
        return refusals

    def sheet_after(self, *rectangles: tuple[int, int, Sequence[Sequence[Written]]]) -> str:
        """Content of the worksheet element after rectangles were written."""
        assert self.write(*rectangles) == []
        text = parts_of(self.path)[SHEET].decode()
        return text[text.index(">", text.index("worksheet ")) + 1 : text.rindex("</")]


def relations(*targets: tuple[str, str, str]) -> str:
    """Content of a relationships part, from identities, kinds and targets."""
    items = "".join(
        f'<Relationship Id="{identity}" Type="{RELATIONS}/{kind}" Target="{target}"/>'
        for identity, kind, target in targets
    )
    return f'<Relationships xmlns="{PACKAGE}/relationships">{items}</Relationships>'


def parts_of(path: Path) -> dict[str, bytes]:
    """Parts of a file, in their order, each checked against its sum."""
    with zipfile.ZipFile(path) as archive:
        return {name: archive.read(name) for name in archive.namelist()}


@pytest.fixture
def book(tmp_path: Path) -> HandWritten:
    """A workbook with one empty sheet."""
    return HandWritten(tmp_path)


@pytest.fixture
def parts() -> Callable[[Path], dict[str, bytes]]:
    """Read the parts of a file."""
    return parts_of


@pytest.fixture
def converted(tmp_path: Path) -> Callable[[Path, str], Path]:
    """Convert a file by LibreOffice."""
    program = which("soffice")
    if program is None:
        pytest.skip("LibreOffice (soffice) is not installed")

    def convert(path: Path, kind: str) -> Path:
        folder = tmp_path / f"{path.stem}-converted"
        profile = (tmp_path / "profile").as_uri()
        subprocess.run(
            [
                program,
                f"-env:UserInstallation={profile}",
                "--headless",
                "--convert-to",
                kind,
                "--outdir",
                str(folder),
                str(path),
            ],
            check=True,
            capture_output=True,
            timeout=300,
        )
        return folder / f"{path.stem}.{kind.partition(':')[0]}"

    return convert
