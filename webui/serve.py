"""Serves the built site on this machine only, with the headers that a real host should send too."""

from __future__ import annotations

import contextlib
import http.server
import os
import sys
from functools import partial
from typing import TYPE_CHECKING, Any

import policy

if TYPE_CHECKING:
    from pathlib import Path

HOST = "127.0.0.1"
PORT = 8017
_TYPES = {
    ".css": "text/css; charset=utf-8",
    ".html": "text/html; charset=utf-8",
    ".js": "text/javascript; charset=utf-8",
    ".json": "application/json",
    ".mjs": "text/javascript; charset=utf-8",
    ".png": "image/png",
    ".svg": "image/svg+xml",
    ".txt": "text/plain; charset=utf-8",
    ".wasm": "application/wasm",
    ".webmanifest": "application/manifest+json",
    ".whl": "application/octet-stream",
    ".zip": "application/zip",
}


class Handler(http.server.SimpleHTTPRequestHandler):
    """Files of one folder, no listings, our headers on each."""

    protocol_version = "HTTP/1.1"
    extensions_map = _TYPES

    def end_headers(self) -> None:
        """Add what we say of every file."""
        self.send_header("Content-Security-Policy", policy.HEADER)
        self.send_header("X-Content-Type-Options", "nosniff")
        self.send_header("Referrer-Policy", "no-referrer")
        self.send_header("Cache-Control", "no-cache")
        super().end_headers()

    def list_directory(self, path: object) -> None:  # noqa: ARG002  (the base class names it)
        """A folder without a page is not there."""
        self.send_error(404)

    def log_message(self, *args: object) -> None:
        """Say nothing: the terminal keeps the one line with the address."""


class _Server(http.server.ThreadingHTTPServer):
    # On Windows "reuse" would let two servers share one port, each getting some of the requests.
    allow_reuse_address = os.name != "nt"

    def handle_error(self, request: Any, client_address: Any) -> None:
        """A browser that closes a connection in the middle is no error of ours; the rest is printed as ever."""
        if not isinstance(sys.exception(), ConnectionError):
            super().handle_error(request, client_address)


def server(site: Path, port: int | None = None, handler: type[Handler] = Handler) -> http.server.HTTPServer:
    """A server for folder `site`, bound and ready for `serve_forever`.

    port -- 0 for any free one, None for 8017 or the next free one after it. Raises OSError when the named port is taken.
    """
    for_site = partial(handler, directory=str(site))
    if port is not None:
        return _Server((HOST, port), for_site)
    for candidate in range(PORT, PORT + 100):
        with contextlib.suppress(OSError):
            return _Server((HOST, candidate), for_site)
    return _Server((HOST, 0), for_site)
