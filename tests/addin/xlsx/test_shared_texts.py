"""Texts that cells refer to by number."""

from __future__ import annotations

import pytest

from strutbook_addin.xlsx import UnreadableWorkbook
from strutbook_addin.xlsx import shared_texts as part
from strutbook_addin.xlsx.shared_texts import shared_texts

MAIN = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"


def texts(items: str, encoding: str = "utf-8") -> list[str]:
    """Texts of a part that holds these items."""
    return shared_texts(f'<sst xmlns="{MAIN}" xmlns:x="{MAIN}">{items}</sst>'.encode(encoding), "xl/texts.xml")


@pytest.mark.parametrize(
    ("item", "text"),
    [
        ("<si><t>plain</t></si>", "plain"),
        ('<si><t xml:space="preserve"> a </t></si>', " a "),
        ("<si> <t>a</t>\n</si>", "a"),
        ("<si><r><t>U</t></r><r><rPr><b/></rPr><t>3</t></r></si>", "U3"),
        ('<si><t>東京</t><rPh sb="0" eb="2"><t>トウキョウ</t></rPh><phoneticPr/></si>', "東京"),
        ("<si><t>a &lt; b &#233; <![CDATA[<c>]]><!-- no --></t></si>", "a < b é <c>"),
        ("<si><t>_x0041__x005F_x0041_</t></si>", "A_x0041_"),
        ("<x:si><x:t>prefixed</x:t></x:si>", "prefixed"),
        ("<si/>", ""),
        ("<si><t/></si>", ""),
    ],
)
def test_item_is_a_text(item: str, text: str) -> None:
    assert texts(f"<si><t>before</t></si>{item}<si><t>after</t></si>") == ["before", text, "after"]


def test_part_may_be_in_utf_16() -> None:
    assert texts("<si><t>Stäbe</t></si>", "utf-16") == ["Stäbe"]


def test_document_type_is_refused() -> None:
    with pytest.raises(UnreadableWorkbook, match=r"xl/texts\.xml declares a document type"):
        shared_texts(b"<!DOCTYPE sst><sst/>", "xl/texts.xml")


def test_part_that_is_no_xml_is_refused() -> None:
    with pytest.raises(UnreadableWorkbook, match=r"xl/texts\.xml is damaged"):
        texts("<si>")


def test_texts_without_end_are_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(part, "TEXTS_LIMIT", 3)
    assert len(texts("<si/>" * 3)) == 3
    with pytest.raises(UnreadableWorkbook, match="holds more than 3 texts"):
        texts("<si/>" * 4)
