"""Once the page says that it is ready to work offline, it is: server stopped, browser closed and opened again."""

from __future__ import annotations

import hashlib
import json
import re
import shutil
import time
from urllib.parse import urlsplit

import pytest

ASK = """async () => {
  const { Engine } = await import("./boot.js");
  return new Engine().ask({ language: "en", units: "si", view: "flow", answers: [] });
}"""

STORED = """async () => {
  const names = await caches.keys();
  const urls = await Promise.all(names.map(async (name) => (await (await caches.open(name)).keys()).map((request) => request.url)));
  return Object.fromEntries(names.map((name, at) => [name, urls[at]]));
}"""


def _precache(site):
    """Build id and rows (path, hash, bytes) of the list that the build wrote."""
    text = (site / "precache.js").read_text(encoding="utf-8")
    rows = [json.loads(line.strip().rstrip(",")) for line in text.splitlines() if line.startswith("  [")]
    return re.search(r'BUILD = "([0-9a-f]+)"', text)[1], rows


def _until(page, expression):
    """Ask the page until it agrees; Playwright's own way of waiting needs eval, which the policy forbids."""
    end = time.monotonic() + 60
    while not page.evaluate(expression):
        assert time.monotonic() < end, expression
        page.wait_for_timeout(50)


def _visit_until_ready(page, server):
    page.goto(server.address)
    page.locator("#offline[data-state=ready]").wait_for()


def test_works_with_the_server_stopped(server, browser):
    """After "ready": server stopped, browser relaunched, the page opens, the engine starts and answers."""
    _visit_until_ready(browser.open(), server)
    browser.close()
    server.stop()
    page = browser.open()
    page.goto(server.address)
    assert page.locator("#gate").is_visible()
    assert page.evaluate(ASK)["screen"]["form"]["question"] == "gate"
    page.locator("#offline[data-state=ready]").wait_for()


def test_engine_restarts_offline_on_the_first_visit(server, browser):
    """On the very first visit, with no reload, the engine can be started again after the server is gone."""
    page = browser.open()
    _visit_until_ready(page, server)
    _until(page, "navigator.serviceWorker.controller !== null")
    server.stop()
    assert page.evaluate(ASK)["screen"]


def test_every_page_works_offline(server, browser):
    """Offline, the address with a query, the bare file name and the notices with their licence texts all open."""
    _visit_until_ready(browser.open(), server)
    browser.close()
    server.stop()
    page = browser.open()
    for name, shown in (
        ("?from=home", "Strayline"),
        ("index.html", "Strayline"),
        ("notices.html", "Pyodide"),
        ("licences/mpl-2.0.txt", "Mozilla"),
    ):
        page.goto(server.address + name)
        assert shown in page.locator("body").inner_text()


def test_every_byte_is_stored(server, browser):
    """What is stored when the page says ready is the whole list, once each, with the bytes that the list names."""
    page = browser.open()
    _visit_until_ready(page, server)
    build, rows = _precache(server.site)
    stored = page.evaluate(STORED)
    assert list(stored) == [f"strayline {build}"]
    assert sorted(urlsplit(url).path[1:] for url in stored[f"strayline {build}"]) == sorted(path for path, _, _ in rows)
    hashes = page.evaluate(
        """async (name) => {
          const cache = await caches.open(name);
          const found = {};
          for (const request of await cache.keys()) {
            const digest = await crypto.subtle.digest("SHA-256", await (await cache.match(request)).arrayBuffer());
            const path = new URL(request.url).pathname.slice(1);
            found[path] = Array.from(new Uint8Array(digest), (byte) => byte.toString(16).padStart(2, "0")).join("");
          }
          return found;
        }""",
        f"strayline {build}",
    )
    assert hashes == {path: sha256 for path, sha256, _ in rows}


def test_wrong_bytes_are_never_ready(server, browser):
    """A file that arrives with other bytes than the list names is not stored, and the page does not say ready."""
    server.instead["/licences/isc.txt"] = [b"not these"]
    page = browser.open()
    page.add_init_script("globalThis.heard = []; navigator.serviceWorker.addEventListener('message', ({ data }) => heard.push(data));")
    page.goto(server.address)
    _until(page, "heard.some(({ type }) => type === 'failed')")
    heard = page.evaluate("heard")
    assert "licences/isc.txt" in next(message["message"] for message in heard if message["type"] == "failed")
    assert all(message["type"] != "ready" for message in heard)
    assert page.locator("#offline").get_attribute("data-state") != "ready"
    # The next visit takes up where this one stopped: a file that came before it in the list is not fetched again.
    page.goto("about:blank")
    _visit_until_ready(page, server)
    assert server.served["/licences/bsd-2-clause.txt"] == 1


def test_stored_page_keeps_the_policy(server, browser):
    """Offline, page and worker still carry the content security policy."""
    _visit_until_ready(browser.open(), server)
    browser.close()
    server.stop()
    page = browser.open()
    page.goto(server.address)
    for name in ("index.html", "worker.js"):
        policy = page.evaluate("async (name) => (await fetch(name)).headers.get('content-security-policy')", name)
        assert policy is not None
        assert "require-trusted-types-for 'script'" in policy


@pytest.fixture
def later_site(site, tmp_path):
    """The same site one version on: another style sheet, another build id."""
    later = tmp_path / "later"
    shutil.copytree(site, later)
    build, rows = _precache(site)
    style = (site / "styles.css").read_bytes() + b"\n:root { --later: 1; }\n"
    (later / "styles.css").write_bytes(style)
    old = next(sha256 for path, sha256, _ in rows if path == "styles.css")
    text = (site / "precache.js").read_text(encoding="utf-8")
    (later / "precache.js").write_text(text.replace(build, "f" * 12).replace(old, hashlib.sha256(style).hexdigest()), encoding="utf-8")
    return later


def test_new_version_waits(server, browser, later_site):
    """A new version is stored while the old one is in use, starts when every tab is closed, and then removes the old one's files."""
    later = "getComputedStyle(document.documentElement).getPropertyValue('--later')"
    page = browser.open()
    _visit_until_ready(page, server)
    server.site = later_site
    page.reload()
    _until(page, "navigator.serviceWorker.getRegistration().then((registration) => registration.waiting !== null)")
    page.reload()
    assert page.evaluate(later) == ""
    browser.close()
    page = browser.open()
    page.goto(server.address)
    assert page.evaluate(later) == "1"
    _until(page, "caches.keys().then((names) => names.join() === 'strayline ffffffffffff')")
