"""The built site, served, and a Chromium to open it with."""

from __future__ import annotations

import contextlib
import subprocess
import sys
from pathlib import Path
from typing import TYPE_CHECKING

import pytest
from playwright.sync_api import sync_playwright

from driving import Browser, SiteServer

if TYPE_CHECKING:
    from collections.abc import Iterator

    from playwright.sync_api import Playwright

ROOT = Path(__file__).resolve().parents[2]


@pytest.fixture(scope="session")
def site() -> Path:
    """The folder that `python3 webui build` makes."""
    done = subprocess.run([sys.executable, str(ROOT / "webui"), "build"], check=False, capture_output=True, text=True)
    assert done.returncode == 0, done.stderr
    return Path(done.stdout.splitlines()[-1])


@pytest.fixture
def server(site: Path) -> Iterator[SiteServer]:
    """The built site on a free port."""
    running = SiteServer(site)
    yield running
    running.stop()


@pytest.fixture(scope="session")
def playwright() -> Iterator[Playwright]:
    """The driver of the browser."""
    with sync_playwright() as started:
        yield started


@pytest.fixture
def browser(playwright: Playwright, chromium: str, tmp_path: Path) -> Iterator[Browser]:
    """A Chromium with a new profile."""
    made = Browser(playwright, chromium, tmp_path / "profile")
    yield made
    with contextlib.suppress(Exception):  # a browser that a test has killed
        made.close()
