"""The engine starts in the browser, says why when it does not, and is started again when it dies."""

from __future__ import annotations

import pytest

ASK = """async (answers) => {
  const { Engine } = await import("./boot.js");
  const engine = new Engine();
  return engine.ask({ language: "en", units: "si", view: "flow", answers });
}"""

# Starts an engine of its own with a short limit and returns every state it went through.
STATES = """async (timeoutMs) => {
  const { Engine } = await import("./boot.js");
  const states = [];
  const engine = new Engine({ timeoutMs, onState: ({ state, code, key }) => states.push([state, code, key].join(" ").trim()) });
  await engine.start().catch(() => {});
  return states;
}"""


def test_engine_answers(server, browser):
    """Asked with no answers, the engine in the browser replies with the safety gate, under the page's protocol number."""
    page = browser.open()
    page.goto(server.address)
    reply = page.evaluate(ASK, [])
    assert reply["protocol"] == 1
    assert reply["screen"]["form"]["question"] == "gate"


def test_nothing_leaves_the_origin(server, browser):
    """Page, worker, runtime and service worker ask our own origin for everything."""
    page = browser.open()
    page.goto(server.address)
    page.evaluate(ASK, [])
    page.locator("#offline[data-state=ready]").wait_for()
    assert browser.requests
    assert [url for url in browser.requests if not url.startswith(server.address)] == []


def test_policy_is_sent_and_kept(server, browser):
    """Page and worker carry the policy, nothing of ours breaks it, and what it forbids is refused."""
    page = browser.open()
    heard = {}
    page.context.on("response", lambda response: heard.update({response.url: response.headers.get("content-security-policy", "")}))
    page.goto(server.address)
    page.evaluate(ASK, [])
    for name in ("", "worker.js"):
        policy = heard[server.address + name]
        assert "default-src 'none'" in policy
        assert "'unsafe-eval'" not in policy
        assert "require-trusted-types-for 'script'" in policy
    assert [line for line in browser.console if "Content Security Policy" in line] == []
    assert (
        page.evaluate("() => { try { document.body.innerHTML = '<b>x</b>'; return ''; } catch (error) { return error.name; } }")
        == "TypeError"
    )
    assert page.evaluate("() => fetch('http://localhost:1/').then(() => '', (error) => error.name)") == "TypeError"
    assert any("Content Security Policy" in line for line in browser.console)


def _words(page, key):
    return page.locator("#words").evaluate("(words, key) => words.content.querySelector(`[data-word=${key}]`).textContent", key)


def _fails_with_the_gate_standing(page, code):
    """The page says that the engine failed and offers to start it again, while gate, stop and tonight work."""
    trouble = page.locator("#trouble")
    trouble.wait_for()
    assert _words(page, "boot_failed") in trouble.inner_text()
    assert code in trouble.inner_text()
    assert trouble.get_by_role("button", name=_words(page, "start_again")).is_visible()
    assert page.locator("#gate").is_visible()
    for sheet in ("stop", "tonight"):
        page.locator(f".reach-{sheet}").click()
        assert page.locator(f"#{sheet} h2").is_visible()


def test_no_webassembly(server, browser):
    """With WebAssembly off the page says at once that the engine did not start; gate, stop and tonight work."""
    # What a browser does in its strictest security mode: no compiled code at all, so no WebAssembly either.
    page = browser.open("--js-flags=--jitless")
    page.goto(server.address)
    assert page.evaluate("typeof WebAssembly") == "undefined"
    _fails_with_the_gate_standing(page, "no_wasm")


def test_worker_blocked(server, browser):
    """With the worker's script refused the page says that the engine did not start; gate, stop and tonight work."""
    page = browser.open()
    page.context.route("**/worker.js", lambda route: route.abort())
    page.goto(server.address)
    _fails_with_the_gate_standing(page, "worker")


def test_start_again(server, browser):
    """After a failed start, "start again" starts the engine once the cause is gone."""
    server.instead["/worker.js"] = [b"throw new Error('planted')"]
    page = browser.open()
    page.goto(server.address)
    page.locator("#trouble").wait_for()
    page.locator("#trouble [data-act=again]").click()
    page.locator("#trouble").wait_for(state="hidden")
    assert page.evaluate(ASK, [])["screen"]


@pytest.mark.parametrize(
    ("worker", "code"),
    [
        (b"// says nothing, ever", "timeout"),
        (b"throw new Error('planted')", "worker"),
        (b"addEventListener('message', () => postMessage({ type: 'ready', protocol: 2, version: '9' }));", "protocol"),
        (b"addEventListener('message', () => postMessage({ type: 'failed', code: 'crash' }));", "crash"),
    ],
    ids=["silent", "broken", "other protocol", "crashing"],
)
def test_start_that_fails(server, browser, worker, code):
    """A worker that says nothing, breaks, speaks another protocol or crashes ends in "failed" with its own code and one sentence."""
    page = browser.open()
    page.goto(server.address + "notices.html")
    server.instead["/worker.js"] = [worker]
    assert page.evaluate(STATES, 2000) == ["starting", f"failed {code} boot_failed"]


def test_worker_names_its_protocol(server, browser):
    """The worker, too, refuses a page that speaks another protocol."""
    page = browser.open()
    page.goto(server.address + "notices.html")
    reply = page.evaluate(
        """async () => {
          const { scriptURL } = await import("./trusted.js");
          const worker = new Worker(scriptURL("worker.js"), { type: "module" });
          return new Promise((resolve) => {
            worker.onmessage = ({ data }) => resolve(data);
            worker.postMessage({ type: "start", protocol: 2 });
          });
        }"""
    )
    assert reply == {"type": "failed", "code": "protocol"}


def test_loader_that_hangs(server, browser):
    """Without leave to compile WebAssembly in the worker the loader hangs for ever; the time limit ends it."""
    server.policy["/worker.js"] = "default-src 'none'; script-src 'self'; connect-src 'self'"
    page = browser.open()
    page.goto(server.address + "notices.html")
    assert page.evaluate(STATES, 3000)[-1] == "failed timeout boot_failed"


def test_death_during_an_answer(server, browser):
    """A worker that dies over a request is replaced, and the request is asked again without the page noticing."""
    page = browser.open()
    page.goto(server.address + "notices.html")
    dying = """addEventListener("message", ({ data }) => {
      if (data.type === "ask") throw new Error("planted");
      postMessage({ type: "ready", protocol: 1, version: "0" });
    });"""
    server.instead["/worker.js"] = [dying.encode()]
    assert page.evaluate(ASK, [])["screen"]["form"]["question"] == "gate"
    assert server.served["/worker.js"] == 2


def test_only_our_scripts(server, browser):
    """The Trusted Types policy gives no address outside the site's folder."""
    page = browser.open()
    page.goto(server.address)
    given = """async (name) => {
      const { scriptURL } = await import("./trusted.js");
      try { return `${scriptURL(name)}`; } catch (error) { return error.name; }
    }"""
    assert page.evaluate(given, "worker.js") == server.address + "worker.js"
    for name in ("http://localhost:1/worker.js", "//localhost:1/worker.js", "data:text/javascript,1"):
        assert page.evaluate(given, name) == "TypeError"
