"""Whole cases tapped through on a phone-sized screen with the real engine, the server stopped and the browser opened anew."""

from __future__ import annotations

import pytest

from contract_examples import EXAMPLES, SCREENS, ending, texts

ENDINGS = ("named", "group", "nothing_now", "unknown", "danger", "stop")
SAID_LATER = ("stop_late", "stop_found_burnt")  # what ends these is said out of the order in which the flow asks
JOURNEYS = {ending(screen): name for name, screen in reversed(SCREENS.items()) if ending(screen) and name not in SAID_LATER}


def test_the_contract_holds_an_example_of_every_ending():
    """Every way in which a case can end stands among the contract's examples, so that a journey to it is made here."""
    assert [end for end in ENDINGS if end not in JOURNEYS] == []


@pytest.mark.parametrize("end", JOURNEYS)
def test_a_journey_ends_as_the_contract_says(server, browser, end):
    """Tapping an example's answers one after the other, offline, meets each of its questions and ends on its screen, text for text."""
    page = browser.open()
    page.goto(server.address)
    page.locator("#offline[data-state=ready]").wait_for(timeout=60_000)
    browser.close()
    server.stop()
    page = browser.open()
    page.goto(server.address)
    answers = sorted(EXAMPLES[JOURNEYS[end]]["request"]["answers"], key=lambda answer: answer["seq"])
    for at, answer in enumerate(answers):
        _give(page, answer, [str(at), answer["question"]])
    shown = SCREENS[JOURNEYS[end]]
    place = page.locator(".sheet:target" if shown["kind"] == "stop" else "#flow:not([aria-busy]) .screen:not(:has(form [value=unknown]))")
    place.wait_for()
    assert page.locator("main").get_attribute("data-screen") == shown["kind"]
    text = place.evaluate("(place) => place.textContent")
    told = {key: part for key, part in shown.items() if shown["kind"] != "stop" or key in ("title", "lead", "steps")}
    assert [line for line in texts(told) if line not in text] == []


def _give(page, answer, where):
    """Answer the question on show, which must be this one."""
    if answer["question"] == "gate":
        return page.locator(f"#gate [data-gate={answer['value']}]").click()
    form = page.locator("#flow:not([aria-busy]) form")
    form.locator("button:enabled").first.wait_for(timeout=60_000)
    choice = form.locator(f"button[name=answer][value='{answer['value']}']")
    if choice.count():
        return choice.click()
    assert form.locator("#reading").count(), f"answer {where} has no place on this screen: {page.locator('#flow h2').inner_text()}"
    form.locator("#reading").fill(answer["value"])
    return form.locator(".reading button").click()
