"""Fixtures that every test folder shares: the tools a test may need, skipped by name where they are missing."""

from __future__ import annotations

import os
import shutil
from pathlib import Path
from typing import NoReturn

import pytest

import bootstrap


def _missing(sentence: str) -> NoReturn:
    """Skip the test by name; in CI, where nothing may be skipped unseen, fail it."""
    if os.environ.get("CI", "").lower() == "true":
        pytest.fail(sentence)
    pytest.skip(sentence)


def _tool(name: str, package: str) -> str:
    return shutil.which(name) or _missing(f"{name} is missing; install it (on Debian or Ubuntu: apt-get install {package})")


@pytest.fixture(scope="session")
def ngspice() -> str:
    """The path of ngspice, the independent circuit program."""
    return _tool("ngspice", "ngspice")


@pytest.fixture(scope="session")
def chromium() -> str:
    """The path of the Chromium that the browser tests drive."""
    return _tool("chromium", "chromium")


@pytest.fixture(scope="session")
def referees() -> Path:
    """The Python of the hidden environment that holds independent programs with heavy dependencies."""
    try:
        return bootstrap.environment("referees", Path(__file__).parent / "referees.lock")
    except bootstrap.MissingToolError as error:
        _missing(str(error))
