"""The page with an engine of the test's own: what each tap keeps, sends and shows."""

from __future__ import annotations

import json
from typing import TYPE_CHECKING, Any

import pytest

from contract_examples import SCREENS, texts

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator

    from playwright.sync_api import Browser, BrowserContext, Page

    Screen = dict[str, Any]

# Stands in for webui/boot.js. What is on the phone when the engine hears of an answer goes along, to show that saving came first.
BOOT = """
import { openDB } from "./page/vendor/idb.js";
let boot = globalThis.holdBoot ? new Promise((resolve) => { globalThis.finishBoot = resolve; }) : Promise.resolve("");
async function saved() {
  try { return await (await openDB("strayline", 1)).getAll("cases"); } catch { return []; }
}
export class Engine {
  constructor({ onState }) { this.onState = onState; }
  async start() {
    this.onState({ state: "starting", code: "", key: "", version: "" });
    const code = await boot;
    this.onState({ state: code ? "failed" : "ready", code, key: code ? "boot_failed" : "", version: "0" });
    if (code) throw new Error(code);
  }
  restart() { boot = Promise.resolve(""); return this.start(); }
  async ask(request) {
    const code = await boot;
    if (code) return this.start();
    return JSON.parse(await globalThis.reply(JSON.stringify(request), JSON.stringify(await saved())));
  }
}
"""


def screen(kind: str, title: str, **rest: Any) -> Screen:
    """A whole screen of the contract's shape with only what a test is about filled in."""
    empty: Screen = {key: [] for key in ("lead", "cautions", "steps", "facts", "ranking", "tonight", "answered", "assumed")}
    return {"kind": kind, "title": title, **empty, "form": None, "why": "", "verdict": None, "progress": "", "version": "0", **rest}


def form(question: str, *values: str, subject: str | None = None, number: bool = False, problem: str = "", value: str = "") -> Screen:
    """A form whose labels are its values in capitals; `unknown` is always among them."""
    choices = [{"value": item, "label": item.upper()} for item in (*values, "unknown")]
    kind, unit = ("number", "mA") if number else ("choice", "")
    return {
        "question": question, "subject": subject, "input": kind, "legend": f"{question}?", "choices": choices, "unit": unit, "value": value,
        "problem": problem,
    }  # fmt: skip


class ScriptedEngine:
    """Asks colour, size, then a line before power, then a reading, and concludes. Keeps what it was asked and what was saved by then."""

    def __init__(self) -> None:
        self.broken = False
        self.requests: list[dict[str, Any]] = []
        self.saved: list[list[dict[str, Any]]] = []

    def reply(self, request: str, saved: str) -> str:
        """The reply to one request; both are JSON text."""
        self.requests.append(json.loads(request))
        self.saved.append(json.loads(saved))
        if self.broken:
            return json.dumps({"id": "1", "protocol": 1, "error": {"code": "bug", "message": "It broke.", "details": {}}})
        return json.dumps({"id": "1", "protocol": 1, "screen": self.screen(self.requests[-1]["answers"])})

    def screen(self, answers: list[dict[str, Any]]) -> Screen:
        """The screen after these answers."""
        given = {answer["question"]: answer["value"] for answer in answers}
        told = [
            {key: answer[key] for key in ("question", "subject", "value")}
            | {"text": f"{answer['question']}?", "value_text": answer["value"].upper()}
            for answer in answers
            if answer["question"] not in ("gate", "clear")
        ]
        if given.get("gate") != "none" or given.get("clear", "clear") != "clear":
            return screen("stop", "Stop", lead=["Only the engine knows this line."])
        if "colour" not in given:
            return screen("question", "colour?", form=form("colour", "red", "green"))
        if "size" not in given:
            return screen("question", "size?", form=form("size", "small", "large"), answered=told)
        if "clear" not in given:
            return screen("question", "clear?", form=form("clear", "clear", "not_clear", subject="clamp"), answered=told)
        if not given.get("clamp", "").replace("unknown", "0").isdigit():
            problem = "That is no number." if "clamp" in given else ""
            asked = form("clamp", number=True, problem=problem, value=given.get("clamp", ""))
            return screen("test", "Clamp", form=asked, cautions=["Mind the step."], steps=["One.", "Two."], answered=told)
        return screen("outcome", "Done", answered=told)

    @property
    def answers(self) -> list[tuple[str, str, int]]:
        """Question, value and seq of every answer in the last request."""
        return [(answer["question"], answer["value"], answer["seq"]) for answer in self.requests[-1]["answers"]]


@pytest.fixture(scope="module")
def chrome(playwright: Any, chromium: str) -> Iterator[Browser]:
    """One Chromium for this file; every test has a profile of its own in it."""
    started = playwright.chromium.launch(executable_path=chromium, args=["--no-sandbox"])
    yield started
    started.close()


@pytest.fixture
def engine() -> ScriptedEngine:
    """The engine that the page talks to."""
    return ScriptedEngine()


@pytest.fixture
def visit(chrome: Browser, server: Any, engine: ScriptedEngine) -> Iterator[Callable[..., Page]]:
    """Opens the page; a second visit finds what the first one left. The arguments are the context's options."""
    contexts: list[BrowserContext] = []

    def opened(before: str = "", **options: Any) -> Page:
        if not contexts:
            context = chrome.new_context(service_workers="block", viewport={"width": 360, "height": 740}, **options)
            context.route("**/boot.js", lambda route: route.fulfill(body=BOOT, content_type="text/javascript"))
            context.expose_function("reply", engine.reply)
            contexts.append(context)
        page = contexts[0].new_page()
        page.set_default_timeout(10_000)
        page.on("pageerror", lambda error: pytest.fail(f"the page's scripts raised {error}"))
        if before:
            page.add_init_script(before)
        page.goto(server.address)
        return page

    yield opened
    for context in contexts:
        context.close()


def tap(page: Page, value: str) -> None:
    """Tap a choice of the question on show."""
    page.locator(f"#flow button[name=answer][value={value}]").click()


def pass_gate(page: Page) -> None:
    """Tap "none of these"."""
    page.locator("#gate [data-gate=none]").click()


def heading(page: Page, text: str) -> None:
    """Wait until the screen with this heading is on show."""
    page.locator("#flow:not([aria-busy]) h2", has_text=text).wait_for()


def answer_all(page: Page) -> None:
    """From the gate to the reading."""
    pass_gate(page)
    for question, value in (("colour", "red"), ("size", "small"), ("clear", "clear")):
        heading(page, question)
        tap(page, value)
    heading(page, "Clamp")


def enter(page: Page, reading: str) -> None:
    """Type a reading and send it."""
    page.locator("#reading").fill(reading)
    page.locator("#flow .reading button").click()


def screen_kind(page: Page) -> str | None:
    """What <main> says is on show."""
    return page.locator("main").get_attribute("data-screen")


# --- the gate, stop and tonight -------------------------------------------------------------------------------------


def test_gate_comes_first_with_nothing_chosen(visit, engine):
    """The first thing seen is the gate, nothing chosen, nothing asked of the engine; "none of these" is one tap to the first question."""
    page = visit()
    assert page.locator("#gate h2").is_visible()
    assert screen_kind(page) == "start"
    assert page.locator("main :checked, main [aria-current], main [aria-pressed=true]").count() == 0
    assert engine.requests == []
    pass_gate(page)
    heading(page, "colour")
    assert engine.answers == [("gate", "none", 1)]
    assert screen_kind(page) == "question"


def test_a_sign_shows_its_orders_with_no_engine(visit, server):
    """Every sign, and "I don't know", shows its own stop orders at once while the engine is not there."""
    page = visit(before="globalThis.holdBoot = true")
    signs = page.locator("#gate [data-gate]:not([data-gate=none])").evaluate_all("links => links.map((link) => link.dataset.gate)")
    assert {"person_in_water", "unknown"} <= set(signs)
    for sign in signs:
        page.locator(f"#gate [data-gate={sign}]").click()
        sheet = page.locator(f"#stop-{sign}")
        assert sheet.locator("ol li").first.is_visible()
        assert screen_kind(page) == "stop"
        assert not page.locator("#home").is_visible()
        sheet.locator("a[href='#gate']").click()
        assert page.locator("#gate").is_visible()


def test_the_gate_is_answered_again_in_place(visit, engine):
    """After a sign, the gate answered with "none" replaces the sign: one gate answer, its first seq."""
    page = visit()
    page.locator("#gate [data-gate=hot_plug]").click()
    page.locator("#stop-hot_plug a[href='#gate']").click()
    pass_gate(page)
    heading(page, "colour")
    assert engine.answers == [("gate", "none", 1)]


@pytest.mark.parametrize("name", ["stop", "tonight"])
def test_stop_and_tonight_are_one_tap_away(visit, engine, name):
    """From a question, one tap shows the sheet with the focus on its heading, and one tap leads back to the question, nothing sent."""
    page = visit()
    pass_gate(page)
    heading(page, "colour")
    sent = len(engine.requests)
    page.locator(f".reach-{name}").click()
    assert page.locator(f"#{name} li").first.is_visible()
    assert page.evaluate("document.activeElement.id") == f"{name}-title"
    page.locator(f"#{name} a.return").click()
    heading(page, "colour")
    assert page.locator("#flow h2").is_visible()
    assert screen_kind(page) == "question"
    assert len(engine.requests) == sent


def test_a_sign_met_on_the_way_stops_the_case(visit, engine):
    """A sign tapped on the stop sheet in the middle of a case is kept as the gate's answer; the case goes on only through the gate."""
    page = visit()
    pass_gate(page)
    heading(page, "colour")
    tap(page, "red")
    heading(page, "size")
    page.locator(".reach-stop").click()
    page.locator("#stop [data-gate=lightning]").click()
    assert page.locator("#stop-lightning h2").is_visible()
    page.locator(".reach-tonight").click()
    page.locator("#tonight a.return").click()
    assert page.locator("#stop-lightning h2").is_visible()
    page.locator("#stop-lightning a[href='#gate']").click()
    pass_gate(page)
    heading(page, "size")
    assert engine.answers == [("gate", "none", 1), ("colour", "red", 2)]


@pytest.mark.parametrize("value", ["not_clear", "unknown"])
def test_power_stays_off_unless_it_is_clear(visit, engine, value):
    """Anything but "clear" before power is restored stops the case; starting again asks that line anew and keeps every other answer."""
    sheet = "stop-not_clear"
    page = visit()
    pass_gate(page)
    for question, choice in (("colour", "red"), ("size", "small"), ("clear", value)):
        heading(page, question)
        tap(page, choice)
    page.locator(f"#{sheet} h2").wait_for()
    page.locator(f"#{sheet} [data-reply]", has_text="Only the engine knows this line.").wait_for()
    assert screen_kind(page) == "stop"
    page.locator(f"#{sheet} a[href='#gate']").click()
    pass_gate(page)
    heading(page, "clear")
    assert engine.answers == [("gate", "none", 1), ("colour", "red", 2), ("size", "small", 3)]


def test_without_scripts_the_orders_can_be_read(visit):
    """With scripts off the gate stands, a sign's link shows its orders, and Stop, Tonight and the cautions open."""
    page = visit(java_script_enabled=False)
    assert page.locator("#gate h2").is_visible()
    page.locator("#gate [data-gate=person_in_water]").click()
    assert page.locator("#stop-person_in_water li").first.is_visible()
    assert not page.locator("#gate").is_visible()
    for link, sheet in ((".reach-stop", "#stop"), (".reach-tonight", "#tonight"), (".foot a[href='#cautions']", "#cautions")):
        page.locator(link).click()
        assert page.locator(f"{sheet} li").first.is_visible()


# --- the engine comes late, fails, or is mistaken -------------------------------------------------------------------


def test_the_gate_is_answered_before_the_engine_is_up(visit, engine):
    """An answer given while the engine starts is kept and used as soon as it is up."""
    page = visit(before="globalThis.holdBoot = true")
    pass_gate(page)
    page.locator("#flow h2").wait_for()
    assert engine.requests == []
    page.evaluate("finishBoot('')")
    heading(page, "colour")
    assert engine.answers == [("gate", "none", 1)]


def test_a_failed_start_is_told_and_tried_again(visit, engine):
    """When the engine does not start, the page says so with a code, keeps the answers, and "start again" goes on from them."""
    page = visit(before="globalThis.holdBoot = true")
    pass_gate(page)
    page.evaluate("finishBoot('timeout')")
    trouble = page.locator("#trouble")
    trouble.locator("h2").wait_for()
    assert "timeout" in trouble.inner_text()
    page.locator(".reach-stop").click()
    assert page.locator("#stop h2").is_visible()
    page.locator("#stop a.return").click()
    trouble.locator("[data-act=again]").click()
    heading(page, "colour")
    assert not trouble.is_visible()
    assert engine.answers == [("gate", "none", 1)]


def test_an_error_of_the_core_leaves_a_way_back(visit, engine):
    """An error reply is shown as a sentence with its code; the answer before it can be looked at and given again."""
    page = visit()
    pass_gate(page)
    heading(page, "colour")
    engine.broken = True
    tap(page, "red")
    page.locator("#trouble", has_text="It broke.").wait_for()
    engine.broken = False
    page.locator("#trouble [data-act=back]").click()
    heading(page, "colour")
    tap(page, "green")
    heading(page, "size")
    assert engine.answers == [("gate", "none", 1), ("colour", "green", 2)]


# --- answers: kept, changed, taken back ------------------------------------------------------------------------------


def test_each_answer_is_saved_before_the_engine_hears_of_it(visit, engine):
    """Whatever the engine is asked stands already on the phone, answer for answer."""
    page = visit()
    answer_all(page)
    for request, cases in zip(engine.requests, engine.saved, strict=True):
        assert [{key: answer[key] for key in ("question", "value", "seq", "at")} for answer in cases[-1]["answers"]] == [
            {key: answer[key] for key in ("question", "value", "seq", "at")} for answer in request["answers"]
        ]
    assert [answer["at"][-6:] for answer in engine.requests[-1]["answers"]] == ["+00:00"] * 4


def test_a_case_survives_a_reload(visit, engine):
    """After a reload, and in a new tab, the same question stands with the same answers, without the gate being asked again."""
    page = visit()
    pass_gate(page)
    heading(page, "colour")
    tap(page, "red")
    heading(page, "size")
    sent = engine.answers
    page.reload()
    heading(page, "size")
    assert engine.answers == sent
    assert not page.locator("[data-act=undo]").is_visible()
    page.close()
    heading(visit(), "size")
    assert engine.answers == sent


def test_a_case_opened_hours_later_meets_the_gate_first(visit, engine):
    """A case that has rested for hours is not lost, but the gate is asked before it goes on."""
    page = visit()
    pass_gate(page)
    heading(page, "colour")
    tap(page, "red")
    heading(page, "size")
    page.clock.install()
    page.clock.fast_forward("05:00:00")
    page.reload()
    page.locator("#gate h2").wait_for()
    assert not page.locator("#flow").is_visible()
    pass_gate(page)
    heading(page, "size")
    assert engine.answers == [("gate", "none", 1), ("colour", "red", 2)]


def test_an_answer_is_changed_in_place(visit, engine):
    """Change shows the old question with the old answer marked; the new one takes its place and seq, and everything after it stays."""
    page = visit()
    answer_all(page)
    page.locator(".answers li", has_text="colour?").locator("[data-act=change]").click()
    heading(page, "colour")
    assert page.locator("#flow [aria-current]").get_attribute("value") == "red"
    tap(page, "green")
    heading(page, "Clamp")
    assert engine.answers == [("gate", "none", 1), ("colour", "green", 2), ("size", "small", 3), ("clear", "clear", 4)]


def test_back_looks_and_loses_nothing(visit, engine):
    """Back shows the question before, again and again down to the gate; "keep" returns with nothing sent and nothing lost."""
    page = visit()
    pass_gate(page)
    heading(page, "colour")
    tap(page, "red")
    heading(page, "size")
    sent = len(engine.requests)
    page.locator("[data-act=back]").click()
    heading(page, "colour")
    page.locator("[data-act=keep]").click()
    heading(page, "size")
    assert len(engine.requests) == sent
    page.locator("[data-act=back]").click()
    page.locator("[data-act=back]").click()
    assert page.locator("#gate").is_visible()
    pass_gate(page)
    heading(page, "size")
    assert engine.answers == [("gate", "none", 1), ("colour", "red", 2)]


def test_undo_takes_back_the_last_tap(visit, engine):
    """Undo takes back an answer, a change, and a new case, one tap at a time, on the phone as well."""
    page = visit()
    pass_gate(page)
    heading(page, "colour")
    tap(page, "red")
    heading(page, "size")
    page.locator("[data-act=change]").click()
    heading(page, "colour")
    tap(page, "green")
    heading(page, "size")
    page.locator("[data-act=undo]").click()
    page.locator(".answers", has_text="RED").wait_for()
    page.locator("[data-act=undo]").click()
    heading(page, "colour")
    assert engine.answers == [("gate", "none", 1)]
    assert [answer["question"] for answer in engine.saved[-1][-1]["answers"]] == ["gate"]
    tap(page, "red")
    heading(page, "size")
    page.locator("[data-act=new]").click()
    page.locator("#gate h2").wait_for()
    page.locator("[data-act=undo]").click()
    heading(page, "size")
    page.reload()
    heading(page, "size")
    assert engine.answers == [("gate", "none", 1), ("colour", "red", 2)]


def test_a_new_case_keeps_the_old_one(visit, engine):
    """A new case starts at the gate with no answers; the old one stays on the phone, under its own id."""
    page = visit()
    pass_gate(page)
    heading(page, "colour")
    tap(page, "red")
    heading(page, "size")
    page.locator("[data-act=new]").click()
    page.locator("#gate h2").wait_for()
    pass_gate(page)
    heading(page, "colour")
    assert engine.answers == [("gate", "none", 1)]
    assert sorted(len(case["answers"]) for case in engine.saved[-1]) == [1, 2]


def test_a_refused_answer_is_asked_again_with_the_problem(visit, engine):
    """A reading that is no number comes back as the same question, problem tied to the field, text kept, focus on it, to be replaced."""
    page = visit()
    answer_all(page)
    enter(page, "3o")
    page.locator("#problem").wait_for()
    field = page.locator("#reading")
    assert field.input_value() == "3o"
    assert field.get_attribute("aria-invalid") == "true"
    described = (field.get_attribute("aria-describedby") or "").split()
    assert "That is no number." in [page.locator(f"#{name}").inner_text() for name in described]
    assert page.evaluate("document.activeElement.id") == "reading"
    enter(page, "30")
    heading(page, "Done")
    assert engine.answers[-1] == ("clamp", "30", 5)
    assert len(engine.answers) == 5


def test_a_second_tap_does_not_answer_the_next_question(visit, engine):
    """A double tap answers one question: the tap that lands on the screen that follows is let go."""
    page = visit()
    pass_gate(page)
    heading(page, "colour")
    page.locator("#flow fieldset button:enabled >> nth=0").wait_for()
    box = page.locator("#flow button[value=red]").bounding_box()
    assert box
    page.mouse.dblclick(box["x"] + 20, box["y"] + 20, delay=20)
    heading(page, "size")
    page.locator("#flow fieldset button:enabled >> nth=0").wait_for()
    assert engine.answers == [("gate", "none", 1), ("colour", "red", 2)]


def test_a_phone_that_cannot_save_is_told(visit, engine):
    """Where the browser refuses storage the case goes on in memory and the page says that a reload would lose it."""
    page = visit(before="Object.defineProperty(globalThis, 'indexedDB', { value: { open() { throw new DOMException('no'); } } })")
    answer_all(page)
    told = page.locator("#words").evaluate("(words) => words.content.querySelector('[data-word=storage_failed]').textContent")
    assert told in page.locator("#kept").inner_text()
    enter(page, "30")
    heading(page, "Done")


# --- what is shown ---------------------------------------------------------------------------------------------------


def test_nothing_is_read_as_markup(visit, engine):
    """Markup in a title, a choice, an answer or an error is shown as the text it is."""
    nasty = "<img src=x onerror=alert(1)>"
    asked = form("colour", "red")
    asked["choices"][0]["label"] = nasty
    asked["legend"] = nasty
    shown = screen(
        "question",
        nasty,
        form=asked,
        lead=[nasty],
        answered=[{"question": "q", "subject": None, "text": nasty, "value": "v", "value_text": nasty}],
    )
    engine.screen = lambda answers: shown
    page = visit()
    pass_gate(page)
    heading(page, nasty)
    assert page.locator("main img").count() == 0
    assert page.locator("#flow").inner_text().count(nasty) >= 4


def test_cautions_stand_before_the_steps_and_the_focus_on_the_heading(visit):
    """On a test the cautions come before the numbered steps, these before the form, and the focus is on the new heading."""
    page = visit()
    answer_all(page)
    order = page.locator("#flow .ask").evaluate(
        "(ask) => [...ask.querySelectorAll('.caution, .steps, form')].map((part) => part.classList[0] ?? part.tagName)"
    )
    assert order == ["caution", "steps", "FORM"]
    assert page.evaluate("document.activeElement.textContent") == "Clamp"


@pytest.mark.parametrize("width", [320, 360, 1280])
@pytest.mark.parametrize("name", SCREENS)
def test_every_example_of_the_contract_is_shown_whole(visit, engine, name, width):
    """Every text of an example stands in the page, nothing sticks out sideways, and whatever can be pressed is at least 48 px high."""
    shown = SCREENS[name]
    engine.screen = lambda answers: shown
    page = visit()
    page.set_viewport_size({"width": width, "height": 740})
    pass_gate(page)
    page.locator("#flow:not([aria-busy]) h2").wait_for()
    assert screen_kind(page) == shown["kind"]
    text, typed = page.locator("#flow").evaluate(
        "(flow) => [flow.textContent, [...flow.querySelectorAll('input')].map((input) => input.value)]"
    )
    assert [line for line in texts(shown) if line not in text and line not in typed] == []
    page.evaluate("for (const fold of document.querySelectorAll('details')) fold.open = true")
    assert page.evaluate("document.documentElement.scrollWidth <= innerWidth")
    pressed = page.locator("#flow button, #flow summary, #flow input, .reach a").filter(visible=True)
    assert pressed.evaluate_all("(all) => all.filter((one) => one.getBoundingClientRect().height < 48).map((one) => one.textContent)") == []
