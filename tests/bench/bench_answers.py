"""From an answer to the next screen: the same requests to the worker in Chromium and to `handle` in this Python.

Each set-up is told in full (its tables must be computed), then its tests are answered one by one (its tables stand).
"""

from __future__ import annotations

import json
import shutil
import statistics
import subprocess
import sys
import tempfile
from pathlib import Path
from typing import TYPE_CHECKING, Any

from playwright.sync_api import sync_playwright
from table import Row

import build
from driving import Browser, SiteServer

if TYPE_CHECKING:
    from collections.abc import Iterator

# One line each: supply, plug, device on the post, device aboard, what opened, when.
SETUPS = (
    ("split_120_240", "one_cord", "device_30", "device_30", "pedestal", "any_load"),
    ("split_120_240", "combining_y", "device_30", "none", "pedestal", "plug_in"),
    ("split_120_240", "two_cords", "device_30", "device_30", "both", "main_on"),
    ("split_120_240", "one_cord_four_wire", "class_a", "none", "pedestal", "one_load"),
    ("wye_120_208", "one_cord", "device_30", "none", "pedestal", "random"),
    ("single_230", "one_cord", "device_30", "device_30", "pedestal", "wet"),
    ("single_230", "one_cord", "none", "device_30", "aboard", "any_load"),
)
TOLD = ("supply", "plug", "pedestal_device", "aboard_device", "opened", "when")
TESTS_ANSWERED = 4

# Asks the requests one after the other and gives back how long each took.
ASK_ALL = """async (requests) => {
  const { Engine } = await import("./boot.js");
  const engine = new Engine();
  await engine.start();
  const times = [];
  for (const request of requests) {
    const started = performance.now();
    const reply = await engine.ask(request);
    times.push(performance.now() - started);
    if (!reply.screen) throw new Error(JSON.stringify(reply));
  }
  return times;
}"""

# The same, in a Python of its own: reads the requests, writes milliseconds.
HANDLE_ALL = """
import json, sys, time
from strayline.protocol import handle
times = []
for request in json.load(sys.stdin):
    text = json.dumps({"id": "1", "protocol": 1, **request})
    started = time.perf_counter()
    handle(text)
    times.append(1000 * (time.perf_counter() - started))
json.dump(times, sys.stdout)
"""


def rows() -> Iterator[Row]:
    """Medians in Chromium, and how many times CPython's they are."""
    requests, changed = journey()
    done = subprocess.run([sys.executable, "-c", HANDLE_ALL], input=json.dumps(requests), capture_output=True, text=True, check=True)
    cpython: list[float] = json.loads(done.stdout)
    chromium = _in_chromium(requests)
    for name, kind, limit in (("its tables stand", False, 150.0), ("the set-up changed", True, 1500.0)):
        here = [at for at, is_change in enumerate(changed) if is_change is kind]
        browser, native = (statistics.median(times[at] for at in here) for times in (chromium, cpython))
        worst = max(chromium[at] for at in here)
        yield Row(f"answer to next screen in Chromium, {name}", browser, "ms", limit, f"median of {len(here)}, worst {worst:.0f} ms")
        yield Row(
            f"  / the same calls in CPython {sys.version_info.major}.{sys.version_info.minor} ({native:.0f} ms)", browser / native, "x"
        )


def journey() -> tuple[list[dict[str, Any]], list[bool]]:
    """Requests in order, and for each whether it is the first of its set-up to need tables."""
    from strayline.protocol import handle

    requests: list[dict[str, Any]] = []
    changed: list[bool] = []
    for setup in SETUPS:
        given = {"gate": "none", "role": "technician", "tools": "clamp", **dict(zip(TOLD, setup, strict=True)), "afloat": "afloat"}
        answers = [_answer(question, None, value, seq) for seq, (question, value) in enumerate(given.items(), 1)]
        first = True
        while len(answers) < len(given) + 2 * TESTS_ANSWERED:
            request = {"language": "en", "units": "si", "view": "flow", "answers": list(answers)}
            screen = json.loads(handle(json.dumps({"id": "1", "protocol": 1, **request})))["screen"]
            if first and not screen["ranking"]:
                raise RuntimeError(f"this set-up is not told in full: {screen['title']}")
            requests.append(request)
            changed.append(first)
            first = False
            form = screen["form"]
            if form is None:
                break
            value = "unknown" if form["input"] == "number" else form["choices"][0]["value"]
            answers.append(_answer(form["question"], form["subject"], value, len(answers) + 1))
    return requests, changed


def _answer(question: str, subject: str | None, value: str, seq: int) -> dict[str, Any]:
    return {"question": question, "subject": subject, "value": value, "seq": seq, "at": "2026-01-01T12:00:00+00:00"}


def _in_chromium(requests: list[dict[str, Any]]) -> list[float]:
    server = SiteServer(build.build())
    with tempfile.TemporaryDirectory() as name, sync_playwright() as playwright:
        browser = Browser(playwright, str(shutil.which("chromium")), Path(name))
        page = browser.open(service_workers="block")
        page.goto(server.address + "notices.html")  # a page of ours that starts no engine of its own
        times: list[float] = page.evaluate(ASK_ALL, requests)
        browser.close()
    server.stop()
    return times
