"""The HTML: whole in itself, valid, escaped, the same each time."""

import re
from dataclasses import replace
from html.parser import HTMLParser

import pytest

from curvelab.reports.comparison import comparison_document
from curvelab.reports.document import Plate
from curvelab.reports.html import html_text
from curvelab.reports.review import review_document
from tests.reports.examples import case, pair_case

VOID = {"meta", "col", "link", "br"}


class Reader(HTMLParser):
    """Names, attributes, and whether every element is closed in its turn."""

    def __init__(self):
        super().__init__()
        self.open, self.ids, self.links, self.data = [], [], [], []

    def handle_starttag(self, tag, attrs):
        if tag not in VOID:
            self.open.append(tag)
        for name, value in attrs:
            if name == "id":
                self.ids.append(value)
            if name in ("href", "src", "xlink:href"):
                self.links.append(value)

    def handle_startendtag(self, tag, attrs):
        self.handle_starttag(tag, attrs)
        if tag not in VOID:
            self.open.pop()

    def handle_endtag(self, tag):
        assert self.open.pop() == tag

    def handle_data(self, data):
        self.data.append(data)


def read(text):
    reader = Reader()
    reader.feed(text)
    assert reader.open == []
    return reader


@pytest.fixture(scope="module")
def review():
    return html_text(review_document(case()))


def test_nothing_is_fetched_and_every_name_is_used_once(review):
    reader = read(review)
    assert len(reader.ids) == len(set(reader.ids))
    assert all(link.startswith(("#", "data:image/png;base64,")) for link in reader.links)
    named = {link[1:] for link in reader.links if link.startswith("#")}
    assert named <= set(reader.ids)


def test_pictures_are_inline_and_have_words_for_who_cannot_see_them(review):
    assert review.count("<svg") == review.count('role="img" aria-label="') == 3


def test_what_people_wrote_cannot_become_markup():
    whole = review_document(case(note="<script>alert(1)</script> & $name ${title}"))
    of_words = [section for section in whole.sections if not isinstance(section.blocks[0], Plate)]
    text = html_text(replace(whole, sections=tuple(of_words)))
    assert "<script>" not in text
    assert "&lt;script&gt;alert(1)&lt;/script&gt; &amp; $name ${title}" in text


def test_the_same_case_gives_the_same_text(review):
    assert html_text(review_document(case())) == review


def test_a_printed_page_is_a4_with_its_number(review):
    assert re.search(r"@page \{\s+size: A4", review)
    assert 'content: "Page " counter(page) " of " counter(pages)' in review
    assert '@top-left { content: "riverside-b16@1"' in review


def test_hatching_is_kept_as_pixels_for_browsers_that_print():
    text = html_text(comparison_document(pair_case()))
    assert "<pattern" not in text
    assert text.count('src="data:image/png;base64,') == 1
