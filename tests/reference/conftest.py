"""Readers of the independent programs that the reference tests compare with."""

from __future__ import annotations

import re
import subprocess
from collections.abc import Callable
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from pathlib import Path

SpiceResiduals = Callable[[str], dict[str, complex]]

_PRINTED = re.compile(r"^res_(\w+) = (\S+),(\S+)$", re.MULTILINE)


@pytest.fixture
def spice_residuals(ngspice: str, tmp_path: Path) -> SpiceResiduals:
    """A function from netlist text to the residual, in amperes, that ngspice prints for each sensor id; the text is run unchanged."""

    def run(text: str) -> dict[str, complex]:
        file = tmp_path / "network.cir"
        file.write_text(text, encoding="utf-8")
        done = subprocess.run([ngspice, "-b", str(file)], capture_output=True, text=True, timeout=60, check=False)
        assert done.returncode == 0, done.stdout + done.stderr
        return {name: complex(float(real), float(imaginary)) for name, real, imaginary in _PRINTED.findall(done.stdout)}

    return run
