"""Fixtures that every test folder shares: the tools a test may need, skipped by name where they are missing."""

from __future__ import annotations

import os
import shutil

import pytest


def _tool(name: str, package: str) -> str:
    found = shutil.which(name)
    if found is None:
        sentence = f"{name} is missing; install it (on Debian or Ubuntu: apt-get install {package})"
        if os.environ.get("CI", "").lower() == "true":
            pytest.fail(sentence)
        pytest.skip(sentence)
    return found


@pytest.fixture(scope="session")
def ngspice() -> str:
    """The path of ngspice, the independent circuit program."""
    return _tool("ngspice", "ngspice")


@pytest.fixture(scope="session")
def chromium() -> str:
    """The path of the Chromium that the browser tests drive."""
    return _tool("chromium", "chromium")
