"""Document types are refused in every part that is markup, whether it is read or only copied."""

from __future__ import annotations

import pytest

from strutbook_addin.xlsx import UnreadableWorkbook

ATTACK = '<?xml version="1.0"?><!DOCTYPE a [<!ENTITY e "boom">]><a>&e;</a>'
UTF_16 = ATTACK.replace("?>", ' encoding="UTF-16"?>', 1)


@pytest.mark.parametrize(
    "part",
    [
        "[Content_Types].xml",
        "_rels/.rels",
        "xl/workbook.xml",
        "xl/_rels/workbook.xml.rels",
        "xl/worksheets/sheet1.xml",
        "xl/drawings/vmlDrawing1.vml",
        "customXml/item1.xml",
    ],
)
@pytest.mark.parametrize(
    "content",
    [
        ATTACK,
        "\ufeff" + ATTACK,
        UTF_16.encode("utf-16"),
        b"\xfe\xff" + UTF_16.encode("utf-16-be"),
        UTF_16.encode("utf-16-le"),
        ATTACK.replace("<!DOCTYPE", f"<!-- {'long ' * 5000} --><!DOCTYPE"),
        ATTACK.replace("<!DOCTYPE", "<?a one?><!-- ?> --><!DOCTYPE"),
        ATTACK.removeprefix('<?xml version="1.0"?>'),
    ],
    ids=["plain", "mark", "utf-16", "utf-16-be", "utf-16 unmarked", "behind a remark", "behind two", "first"],
)
def test_document_type_is_refused(book, part: str, content: str | bytes) -> None:
    book.parts[part] = content
    with pytest.raises(UnreadableWorkbook, match="declares a document type"):
        book.open()


@pytest.mark.parametrize(
    "content",
    [
        "<a><![CDATA[<!DOCTYPE a>]]></a>",
        "<a><!-- <!DOCTYPE a> --></a>",
        "<!-- <!DOCTYPE a> --><a/>",
        "<?remark <!DOCTYPE a> ?><a/>",
        "",
        "no markup <!DOCTYPE a>",
        '<?xml version="1.0" encoding="no-such"?><!-- --><a/>',
    ],
)
def test_words_that_only_look_like_one_are_not(book, content: str) -> None:
    book.parts["customXml/item1.xml"] = content
    assert book.read() == []


def test_picture_may_declare_its_own(book) -> None:
    book.parts["xl/media/image1.svg"] = '<!DOCTYPE svg PUBLIC "-//W3C//DTD SVG 1.1//EN" ""><svg/>'
    assert book.read() == []
