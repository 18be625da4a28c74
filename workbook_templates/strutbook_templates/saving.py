"""Workbooks to files, the same bytes each time and never half written."""

from __future__ import annotations

import re
import tempfile
import zipfile
from io import BytesIO
from pathlib import Path
from typing import IO

from openpyxl import Workbook

#: Date that stands in every file for its creation, so that two builds do not differ.
_DATE = b"2026-01-01T00:00:00Z"
_ZIP_DATE = (2026, 1, 1, 0, 0, 0)
_PROPERTIES = "docProps/core.xml"


def save_workbook(workbook: Workbook, path: Path) -> None:
    """Write a workbook to `path` with fixed dates; a file of that name is replaced in one step."""
    workbook.properties.creator = "strutbook"
    workbook.properties.title = "strutbook workbook"
    saved = BytesIO()
    workbook.save(saved)
    with tempfile.NamedTemporaryFile(dir=path.parent, suffix=path.suffix, delete=False) as target:
        temporary = Path(target.name)
        try:
            _copy_with_fixed_dates(saved, target.file)
        except OSError:
            temporary.unlink()
            raise
    temporary.chmod(0o644)
    temporary.replace(path)


def _copy_with_fixed_dates(saved: BytesIO, target: IO[bytes]) -> None:
    with zipfile.ZipFile(saved) as source, zipfile.ZipFile(target, "w", zipfile.ZIP_DEFLATED) as copy:
        for name in source.namelist():
            content = source.read(name)
            if name == _PROPERTIES:
                content = re.sub(rb"(<dcterms:(?:created|modified)[^>]*>)[^<]*", rb"\g<1>" + _DATE, content)
            entry = zipfile.ZipInfo(name, _ZIP_DATE)
            entry.compress_type = zipfile.ZIP_DEFLATED
            copy.writestr(entry, content)
