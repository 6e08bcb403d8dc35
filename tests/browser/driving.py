"""A server that can really be stopped, and a Chromium that can be closed and opened again with the same profile."""

from __future__ import annotations

import threading
from collections import Counter
from typing import TYPE_CHECKING, Any

import serve

if TYPE_CHECKING:
    from pathlib import Path

    from playwright.sync_api import BrowserContext, Page, Playwright

# Chromium reaches for its maker's hosts unless told not to; --no-sandbox because CI runs as root.
ARGUMENTS = (
    "--no-sandbox",
    "--disable-quic",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
    "--no-first-run",
)


class SiteServer:
    """A folder served on 127.0.0.1 until `stop`; `start` again takes the same port, so that the origin stays.

    served -- how often each path was asked for. instead -- path -> bodies to send in place of the file, one a request, then the file again.
    policy -- path -> the content security policy to send with it.
    """

    def __init__(self, site: Path) -> None:
        self.site = site
        self.port = 0
        self.served: Counter[str] = Counter()
        self.instead: dict[str, list[bytes]] = {}
        self.policy: dict[str, str] = {}
        self._server: Any = None
        self.start()

    @property
    def address(self) -> str:
        """The site's address, with a slash at the end."""
        return f"http://{serve.HOST}:{self.port}/"

    def start(self) -> None:
        """Serve, on the port of before if there was one."""
        outer = self

        class Handler(serve.Handler):
            """The real handler, watched and tampered with."""

            def do_GET(self) -> None:  # noqa: N802  (http.server names it)
                path = self.path.split("?", 1)[0]
                outer.served[path] += 1
                if not outer.instead.get(path):
                    return super().do_GET()
                body = outer.instead[path].pop(0)
                self.send_response(200)
                self.send_header("Content-Type", self.guess_type(path))
                self.send_header("Content-Length", str(len(body)))
                self.end_headers()
                self.wfile.write(body)
                return None

            def send_header(self, keyword: str, value: str) -> None:
                if keyword == "Content-Security-Policy":
                    value = outer.policy.get(self.path, value)
                super().send_header(keyword, value)

            def translate_path(self, path: str) -> str:
                self.directory = str(outer.site)
                return super().translate_path(path)

        self._server = serve.server(self.site, self.port, Handler)
        self.port = self._server.server_port
        threading.Thread(target=self._server.serve_forever, kwargs={"poll_interval": 0.05}, daemon=True).start()

    def stop(self) -> None:
        """Close the port: whoever asks now is refused, as with no network at all."""
        if self._server:
            self._server.shutdown()
            self._server.server_close()
            self._server = None


class Browser:
    """Chromium with one profile: `open` starts it, `close` ends it, and a later `open` finds what was stored."""

    def __init__(self, playwright: Playwright, executable: str, profile: Path) -> None:
        self._playwright, self._executable, self._profile = playwright, executable, profile
        self._context: BrowserContext | None = None
        self.requests: list[str] = []
        self.console: list[str] = []

    def open(self, *arguments: str, **options: Any) -> Page:
        """Start the browser (extra command line arguments; options as Playwright's) and return its page, empty."""
        self.close()
        options = {"viewport": {"width": 360, "height": 740}, **options}
        self._context = self._playwright.chromium.launch_persistent_context(
            str(self._profile), executable_path=self._executable, args=[*ARGUMENTS, *arguments], **options
        )
        self._context.on("request", lambda request: self.requests.append(request.url))
        self._context.on("console", lambda message: self.console.append(message.text))
        return self._context.pages[0]

    def close(self) -> None:
        """End the browser, if it runs."""
        if self._context:
            self._context.close()
            self._context = None
