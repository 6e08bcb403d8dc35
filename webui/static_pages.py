"""The part of the page that works without the engine: gate, stop, tonight and cautions, written into index.html at build.

Every word comes from `strayline.screen.static_sections`; this module knows only where it goes. Each stop order is a section of its own
that a plain link opens, so none of them needs a script.
"""

from __future__ import annotations

import re
from html import escape
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping

_LABEL = re.compile(r"\{\{([a-z_.]+)\}\}")
_PART = re.compile(r"<!-- build:([a-z]+) -->")


def render(template: str, sections: Mapping[str, Any], version: str, build: str) -> str:
    """The page: `template` with every placeholder that this module owns filled in, all text escaped.

    template -- index.html: `{{page.KEY}}`, `{{version}}`, `{{build}}`, and the comments build:gate, build:sheets and build:words
    sections -- the reply of `strayline.screen.static_sections`
    version, build -- shown at the foot of the page

    Other comments are left for whoever owns them. Raises KeyError for a label or a section that the catalogue does not have.
    """
    labels = {"version": version, "build": build, **{f"page.{key}": text for key, text in sections["page"].items()}}
    parts = {"gate": _gate(sections), "sheets": _sheets(sections), "words": _words(sections["page"])}
    page = _LABEL.sub(lambda found: escape(labels[found[1]]), template)
    return _PART.sub(lambda found: parts.get(found[1], found[0]), page)


def _gate(sections: Mapping[str, Any]) -> str:
    gate = sections["gate"]
    return f"""<section id="gate" aria-labelledby="gate-title">
<h2 id="gate-title" tabindex="-1">{escape(gate["title"])}</h2>
<div class="lead">{_paragraphs(gate["lead"])}</div>
{_signs(gate)}
<noscript><p class="problem">{escape(sections["page"]["no_script"])}</p></noscript>
<p class="gate-ends">
<button type="button" class="main" data-gate="none">{escape(gate["none"])}</button>
<a class="quiet" href="#stop-unknown" data-gate="unknown">{escape(gate["unknown"])}</a>
</p>
</section>"""


def _signs(gate: Mapping[str, Any]) -> str:
    """One link a sign: the browser opens its stop orders by itself; a script, where there is one, also keeps the answer."""
    links = (
        f'<li><a href="#stop-{escape(sign["value"])}" data-gate="{escape(sign["value"])}">{escape(sign["label"])}</a></li>'
        for sign in gate["signs"]
    )
    return f'<ul class="signs">{"".join(links)}</ul>'


def _sheets(sections: Mapping[str, Any]) -> str:
    page, stop, tonight, cautions = (sections[name] for name in ("page", "stop", "tonight", "cautions"))
    home = f'<p class="steer"><a class="quiet return" href="#home">{escape(page["return"])}</a></p>'
    always = f'<div class="always"><h3>{escape(page["stop_always"])}</h3><ul>{_items(stop["lead"])}</ul></div><div data-reply></div>'
    onward = f'<p class="steer"><a class="quiet" href="#gate">{escape(page["gate_again"])}</a></p>'
    # The general sheet asks which sign it is; a sign's own sheet gives its orders first, then those that always hold.
    sheets = [
        _sheet("stop", "stop", stop["title"], f'<ul class="orders">{_items(stop["lead"])}</ul>{_signs(sections["gate"])}{home}'),
        *(
            _sheet(f"stop-{sign}", "stop", orders["title"], f'<ol class="orders">{_items(orders["orders"])}</ol>{always}{onward}')
            for sign, orders in stop["signs"].items()
        ),
        _sheet(
            "tonight",
            "tonight",
            tonight["title"],
            f'{_paragraphs(tonight["lead"])}<ul class="orders">{_items(tonight["orders"])}</ul>{home}',
        ),
        _sheet("cautions", "cautions", cautions["title"], f'<ul class="orders">{_items(cautions["lines"])}</ul>{home}'),
    ]
    return "\n".join(sheets)


def _sheet(name: str, kind: str, title: str, body: str) -> str:
    return (
        f'<section class="sheet {kind}" id="{escape(name)}" aria-labelledby="{escape(name)}-title">'
        f'<h2 id="{escape(name)}-title" tabindex="-1">{escape(title)}</h2>{body}</section>'
    )


def _words(page: Mapping[str, str]) -> str:
    words = (f'<span data-word="{escape(key)}">{escape(text)}</span>' for key, text in page.items())
    return f'<template id="words">{"".join(words)}</template>'


def _paragraphs(lines: Iterable[str]) -> str:
    return "".join(f"<p>{escape(line)}</p>" for line in lines)


def _items(lines: Iterable[str]) -> str:
    return "".join(f"<li>{escape(line)}</li>" for line in lines)
