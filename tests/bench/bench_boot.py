"""Engine ready against a bare stock Pyodide, both offline.

Both sites are stored by the same kind of service worker; the server is stopped, the browser is opened anew for every start, and the two
take turns. Ready means here: core imported and the reply to no answers given. The bare one only has to finish `loadPyodide()`.
"""

from __future__ import annotations

import shutil
import statistics
import tempfile
from pathlib import Path
from typing import TYPE_CHECKING

from playwright.sync_api import sync_playwright
from table import Row

import bootstrap
import build
from driving import Browser, SiteServer

if TYPE_CHECKING:
    from collections.abc import Iterator

TIMES = 7

OURS = """async () => {
  const { Engine } = await import("./boot.js");
  const started = performance.now();
  const engine = new Engine();
  await engine.ask({ language: "en", units: "si", view: "flow", answers: [] });
  return performance.now() - started;
}"""

BARE = """async () => {
  const { scriptURL } = await import("./trusted.js");
  const started = performance.now();
  const worker = new Worker(scriptURL("worker.js"), { type: "module" });
  await new Promise((resolve) => { worker.onmessage = resolve; });
  return performance.now() - started;
}"""

BARE_PAGE = """<!doctype html>
<meta charset="utf-8">
<title>bare</title>
<script type="module" src="page.js"></script>
"""

BARE_SCRIPT = """import { scriptURL } from "./trusted.js";
navigator.serviceWorker.addEventListener("message", ({ data }) => {
  if (data.type === "ready") document.documentElement.className = "ready";
});
navigator.serviceWorker.register(scriptURL("service_worker.js"), { type: "module" });
"""

BARE_WORKER = """import { loadPyodide } from "./pyodide/pyodide.mjs";
await loadPyodide();
postMessage("ready");
"""


def rows() -> Iterator[Row]:
    """The ratio that the issue bounds, and the two times behind it."""
    site = build.build()
    with tempfile.TemporaryDirectory() as name, sync_playwright() as playwright:
        # An empty page of the real site: its own page would start an engine beside the measured one.
        quiet = Path(name, "ours")
        shutil.copytree(site, quiet)
        (quiet / "index.html").write_text(BARE_PAGE, encoding="utf-8")
        (quiet / "page.js").write_text(BARE_SCRIPT, encoding="utf-8")
        build.write_service_worker(quiet, "bench ours")
        starts = {quiet: OURS, _bare_site(Path(name, "bare")): BARE}
        browsers = {}
        for folder in starts:
            server = SiteServer(folder)
            browser = Browser(playwright, str(shutil.which("chromium")), Path(name, f"profile {folder.name}"))
            page = browser.open()
            page.goto(server.address)
            page.locator("html.ready").wait_for()
            server.stop()
            browsers[folder] = (browser, server.address)
        times: dict[Path, list[float]] = {folder: [] for folder in starts}
        for turn in range(TIMES + 1):
            for folder, start in starts.items():
                browser, address = browsers[folder]
                page = browser.open()
                page.goto(address)
                took = page.evaluate(start)
                browser.close()
                if turn:  # the first start of each fills the browser's cache of compiled WebAssembly
                    times[folder].append(took)
    ours, bare = (statistics.median(times[folder]) for folder in starts)
    yield Row("engine ready, offline, browser relaunched", ours, "ms", note=_spread(times[quiet]))
    yield Row("bare stock loadPyodide(), likewise", bare, "ms", note=_spread(times[next(folder for folder in starts if folder != quiet)]))
    yield Row("engine ready / bare loadPyodide()", ours / bare, "x", 0.6)


def _bare_site(folder: Path) -> Path:
    pyodide = bootstrap.node_tools(build.HERE) / "node_modules" / "pyodide"
    (folder / "pyodide").mkdir(parents=True)
    for name in (*build.RUNTIME, build.STDLIB, "pyodide-lock.json"):
        shutil.copyfile(pyodide / name, folder / "pyodide" / name)
    shutil.copyfile(build.HERE / "trusted.js", folder / "trusted.js")
    for name, text in {"index.html": BARE_PAGE, "page.js": BARE_SCRIPT, "worker.js": BARE_WORKER}.items():
        (folder / name).write_text(text, encoding="utf-8")
    build.write_service_worker(folder, "bench bare")
    return folder


def _spread(times: list[float]) -> str:
    return f"median of {len(times)}, from {min(times):.0f} to {max(times):.0f} ms"
