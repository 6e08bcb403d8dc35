"""The part of the page that works without the engine, as the build writes it."""

from __future__ import annotations

import re
from html.parser import HTMLParser
from pathlib import Path
from typing import Any

import pytest

from static_pages import render
from strayline.catalogue.questions import GATE_SIGNS
from strayline.screen import static_sections

WEBUI = Path(__file__).resolve().parents[2] / "webui"


class Outline(HTMLParser):
    """What the tests ask of a page: its ids, its links and their texts, and the text inside each element that has an id."""

    def __init__(self, page: str) -> None:
        super().__init__()
        self.ids: list[str] = []
        self.links: list[tuple[str, str]] = []
        self.texts: dict[str, str] = {}
        self.tags: list[str] = []
        self._open: list[tuple[str, str]] = []
        self.feed(page)

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        """Note an element."""
        given = dict(attrs)
        name = given.get("id") or ""
        self.tags.append(tag)
        if name:
            self.ids.append(name)
            self.texts[name] = ""
        if tag == "a":
            self.links.append((given.get("href") or "", ""))
        if tag not in ("meta", "link", "input", "path"):
            self._open.append((tag, name))

    def handle_endtag(self, tag: str) -> None:
        """Leave an element."""
        while self._open and self._open.pop()[0] != tag:
            pass

    def handle_data(self, data: str) -> None:
        """Note a text for every element around it."""
        for _, name in self._open:
            if name:
                self.texts[name] += data
        if any(tag == "a" for tag, _ in self._open):
            href, text = self.links[-1]
            self.links[-1] = (href, text + data)


@pytest.fixture(scope="module")
def sections() -> dict[str, Any]:
    """The sections of the catalogue."""
    return static_sections("en")


@pytest.fixture(scope="module")
def page(sections) -> Outline:
    """The page as built."""
    return Outline(render((WEBUI / "index.html").read_text(encoding="utf-8"), sections, "9.8.7", "b0b1"))


def test_every_placeholder_is_filled(sections):
    """No label in braces and no comment of ours is left, while the build's own is left to the build; version and build are shown."""
    made = render((WEBUI / "index.html").read_text(encoding="utf-8"), sections, "9.8.7", "b0b1")
    assert "{{" not in made
    assert re.findall(r"build:\w+", made) == ["build:head"]
    assert "9.8.7" in made
    assert "b0b1" in made


def test_ids_are_unique_and_links_lead_somewhere(page):
    """No id stands twice, and every link into the page names an id that exists."""
    assert len(page.ids) == len(set(page.ids))
    assert [href for href, _ in page.links if href.startswith("#") and href[1:] not in page.ids] == []


def test_every_sign_leads_to_its_orders(page, sections):
    """Each sign of the gate, and "I don't know", is a plain link to a section holding all its orders and the orders that always hold."""
    links = dict(page.links)
    for sign in (*GATE_SIGNS, "unknown"):
        assert f"#stop-{sign}" in links
    for sign, orders in sections["stop"]["signs"].items():
        text = page.texts[f"stop-{sign}"]
        assert [line for line in (*orders["orders"], *sections["stop"]["lead"]) if line not in text] == []


def test_tonight_and_cautions_are_whole(page, sections):
    """The tonight sheet and the cautions hold every line of the catalogue."""
    tonight, cautions = sections["tonight"], sections["cautions"]
    assert [line for line in (*tonight["lead"], *tonight["orders"]) if line not in page.texts["tonight"]] == []
    assert [line for line in cautions["lines"] if line not in page.texts["cautions"]] == []


def test_the_gate_stands_before_everything_that_needs_the_engine(page):
    """In the page's own order the gate comes first, then the questions, then the sheets."""
    places = [page.ids.index(name) for name in ("gate", "flow", "stop", "tonight")]
    assert places == sorted(places)


def test_words_are_never_markup(sections):
    """A word of the catalogue that looks like markup, or like a placeholder, comes out as the text it is."""
    nasty = "<script>alert('{{version}}')</script> & <!-- build:gate -->"
    words = {**sections["page"], "stop": nasty}
    gate = {**sections["gate"], "title": nasty, "lead": [nasty], "signs": [{"value": "tingling", "label": nasty}]}
    plain = Outline(render((WEBUI / "index.html").read_text(encoding="utf-8"), sections, "9.8.7", "b0b1"))
    made = Outline(render((WEBUI / "index.html").read_text(encoding="utf-8"), {**sections, "gate": gate, "page": words}, "9.8.7", "b0b1"))
    assert made.tags.count("script") == plain.tags.count("script")
    assert made.texts["gate"].count(nasty) == 3


def test_a_missing_label_is_an_error(sections):
    """A label that the catalogue lacks stops the build with its name."""
    with pytest.raises(KeyError, match=r"page\.nowhere"):
        render("{{page.nowhere}}", sections, "9.8.7", "b0b1")
