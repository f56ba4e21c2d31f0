"""The PDF: A4, named and numbered on each page, nothing clipped, the same bytes each time."""

from dataclasses import replace

import pypdfium2
import pytest

from curvelab.reports.comparison import comparison_document
from curvelab.reports.document import Document, Facts, Paragraph, Row, Section, Table, columns_of
from curvelab.reports.pdf import pdf_bytes
from curvelab.reports.review import review_document
from curvelab.reports.review_parts import summary_section
from tests.reports.examples import case, isolator, pair_case

MM = 25.4 / 72


def pages(content):
    document = pypdfium2.PdfDocument(content)
    found = []
    for page in document:
        text = page.get_textpage()
        boxes = [text.get_charbox(index) for index in range(text.count_chars())]
        found.append(
            (page.get_size(), " ".join(text.get_text_range().split()), [box for box in boxes if box[2] > box[0]])
        )
        text.close()
    document.close()
    return found


@pytest.fixture(scope="module")
def review():
    return pages(pdf_bytes(review_document(case())))


def test_every_page_is_a4_and_says_what_it_is_about_and_its_number(review):
    for number, (size, words, _) in enumerate(review, start=1):
        assert [side * MM for side in size] == pytest.approx([210, 297], abs=0.2)
        assert "riverside-b16@1" in words
        assert f"Page {number} of {len(review)}" in words


def test_nothing_is_printed_where_a_printer_cannot(review):
    # Office printers leave 4.2 mm (1/6 inch) unprinted, a common figure of their manuals.
    for (width, height), _, boxes in review:
        left, bottom, right, top = (column for column in zip(*boxes, strict=True))
        assert min(left) * MM > 4.2
        assert min(bottom) * MM > 4.2
        assert (width - max(right)) * MM > 4.2
        assert (height - max(top)) * MM > 4.2


def test_all_that_a_reviewer_needs_is_there(review):
    words = " ".join(text for _, text, _ in review)
    for expected in (
        "ab" * 32,
        "Miniature circuit-breaker, characteristic B, 16 A",
        "2.55 × 16 A = 40.8 A",
        "Margin 1 − 30 s / 60 s = +50 %",
        "label_doubtful",
        "A. Reviewer: it is 1",
        "B. Checker",
        "1 open, 1 accepted",
        "Icn",
        "signature",
        "Do not re-close on a fault",
        "Revision 1 of riverside-b16 is not released",
        "guided",
        "adiabatic",
        "Not ruled out here: another form.",
    ):
        assert expected.replace(" ", "") in words.replace(" ", "").replace("\u00a0", ""), expected


def test_the_same_case_gives_the_same_bytes_without_a_date():
    first, second = (pdf_bytes(comparison_document(pair_case())) for _ in range(2))
    assert first == second
    assert b"CreationDate" not in first
    assert b"ModDate" not in first


def test_a_switch_has_a_document_too_and_is_said_to_protect_nothing():
    words = " ".join(text for _, text, _ in pages(pdf_bytes(review_document(isolator()))))
    assert "not a protective device" in words
    assert "This device has no curve" in words


def test_a_comparison_names_both_and_what_is_undecided():
    found = pages(pdf_bytes(comparison_document(pair_case())))
    words = found[0][1]
    assert "moor-g63@1 and riverside-b16@1" in words
    assert "Who clears first" in words
    assert all("moor-g63@1 and riverside-b16@1" in text for _, text, _ in found)


def one(*blocks):
    section = Section(heading="Only", blocks=blocks)
    return Document(title="Test", name="key@1", subtitle="", sections=(section,), program="curvelab")


def test_a_long_table_goes_on_with_its_headings_and_no_row_is_lost():
    rows = tuple(Row(cells=(f"row {number}.", "word " * 30)) for number in range(60))
    found = pages(pdf_bytes(one(Table(columns=columns_of({"First": 1, "Second": 3}), rows=rows))))
    assert len(found) > 2
    assert all("First" in words and "Second" in words for _, words, _ in found)
    words = " ".join(text for _, text, _ in found)
    assert all(f"row {number}." in words for number in range(60))


def test_words_stay_within_their_column():
    long = "a" * 200
    table = Table(columns=columns_of({"Left": 1, "Right": 1}), rows=(Row(cells=(long, "b")), Row(cells=("c", long))))
    facts = Facts(pairs=(("Name", long), ("Other", long)))
    (page,) = pages(pdf_bytes(one(table, facts, Paragraph(words=long))))
    assert max(box[2] for box in page[2]) * MM <= 210 - 18 + 0.3


def test_an_unreleased_state_and_an_older_revision_are_said():
    old = case()
    old = replace(old, history=({"revision": 1, "is_current": 0}, {"revision": 2, "is_current": 1}))
    words = " ".join(block.words for block in summary_section(old).blocks if isinstance(block, Paragraph))
    assert "Revision 2 is the current one" in words
    assert "Checked by a second person, not released" in words
