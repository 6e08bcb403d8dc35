"""Small circuits solved by symbols: lcapy (open source, LGPL) proves each formula and gives its number; ours must be the same number.

lcapy's dependencies are heavy, so it lives in an environment of its own and runs as a child.
"""

from __future__ import annotations

import cmath
import json
import math
import subprocess
from pathlib import Path

import pytest

from strayline.network import Branch, Network
from strayline.solve import solve

HERE = Path(__file__).parent
HERTZ = 60.0
LEG = cmath.rect(120, math.radians(-120))

# name -> (netlist, values, {what: (our signed branches, formula)}). Sources stand from their node to 0; currents run from the first node.
CIRCUITS: dict[str, tuple[str, dict[str, complex], dict[str, tuple[dict[str, int], str]]]] = {
    "combining Y, loads on both legs": (
        "V1 1 0\nV2 2 0\nRA 1 3\nRB 2 3\nRNA 3 0\nRNB 3 0",
        {"V1": 120, "V2": -120, "RA": 12, "RB": 31, "RNA": 0.04, "RNB": 0.07},
        {"r_A": ({"RA": 1, "RNA": -1}, "(1 - RNB/(RNA + RNB))*I_RA - RNB/(RNA + RNB)*I_RB"), "r_B": ({"RB": 1, "RNB": -1}, "I_RNA - I_RA")},
    ),
    "combining Y on two legs of 208Y": (
        "V1 1 0\nV2 2 0\nRA 1 3\nRB 2 3\nRNA 3 0\nRNB 3 0",
        {"V1": 120, "V2": LEG, "RA": 12, "RB": 12, "RNA": 0.05, "RNB": 0.05},
        {"r_A": ({"RA": 1, "RNA": -1}, "(1 - RNB/(RNA + RNB))*I_RA - RNB/(RNA + RNB)*I_RB")},
    ),
    "combining Y, a load across the legs": (
        "V1 1 0\nV2 2 0\nRC 1 2\nRA 1 3\nRNA 3 0\nRNB 3 0",
        {"V1": 120, "V2": -120, "RC": 24, "RA": 60, "RNA": 0.05, "RNB": 0.02},
        {"r_A": ({"RC": 1, "RA": 1, "RNA": -1}, "I_RC + I_RA*RNA/(RNA + RNB)")},
    ),
    "bond aboard splits the return": (
        "V1 1 0\nRL 1 2\nRN 2 0\nRG 2 0",
        {"V1": 120, "RL": 14, "RN": 0.06, "RG": 0.09},
        {"residual": ({"RG": 1}, "I_RL*RN/(RN + RG)")},
    ),
    "bond aboard on TT": (
        "V1 1 0\nRL 1 2\nRN 2 0\nRE 2 3\nRS 3 0",
        {"V1": 230, "RL": 88, "RN": 0.2, "RE": 7, "RS": 4},
        {"residual": ({"RE": 1}, "I_RL*RN/(RN + RE + RS)")},
    ),
    "leak along a 120 V element": (
        "V1 1 0\nR1 1 2\nR2 2 0\nRF 2 0",
        {"V1": 120, "R1": 3, "R2": 6.6, "RF": 1500},
        {"leak": ({"RF": 1}, "V1*R2/(R1 + R2)/(RF + R1*R2/(R1 + R2))")},
    ),
    "leak along a 240 V element": (
        "V1 1 0\nV2 2 0\nR1 1 3\nR2 3 2\nRF 3 0",
        {"V1": 120, "V2": -120, "R1": 11, "R2": 17, "RF": 700},
        {"leak": ({"RF": 1}, "(V1*R2 + V2*R1)/(R1 + R2)/(RF + R1*R2/(R1 + R2))")},
    ),
    "winding capacitance to the shore's ground": (
        "V1 1 0\nC 1 2\nR 2 0",
        {"V1": 120, "C": 20e-9, "R": 500},
        {"crossing": ({"C": 1}, "V1*s*C/(1 + s*R*C)")},
    ),
    "R and C in quadrature": (
        "V1 1 0\nR 1 0\nC 1 0",
        {"V1": 120, "R": 6000, "C": 442e-9},
        {"leakage": ({"R": 1, "C": 1}, "V1*(1/R + s*C)")},
    ),
    "filters on opposite legs": (
        "V1 1 0\nV2 2 0\nC1 1 3\nC2 2 3\nRG 3 0",
        {"V1": 120, "V2": -120, "C1": 33e-9, "C2": 21e-9, "RG": 0.3},
        {"residual": ({"C1": 1, "C2": 1}, "s*(C1*V1 + C2*V2)/(1 + s*RG*(C1 + C2))")},
    ),
    "Thevenin pair of a port": (
        "V1 1 0\nR1 1 2\nR2 2 0\nR3 2 3\nRP 3 0",
        {"V1": 32, "R1": 4, "R2": 12, "R3": 1, "RP": 6},
        {"through": ({"RP": 1}, "V1*R2/(R1 + R2)/(R3 + R1*R2/(R1 + R2) + RP)")},
    ),
    "ladder": (
        "V1 1 0\nR1 1 2\nR2 2 0\nR3 2 3\nR4 3 0",
        {"V1": 10, "R1": 1, "R2": 2, "R3": 3, "R4": 4},
        {"last": ({"R4": 1}, "I_R1*R2/(R2 + R3 + R4)")},
    ),
    "open ground, the hull in the water": (
        "V1 1 0\nRF 1 2\nRW 2 0",
        {"V1": 120, "RF": 800, "RW": 16},
        {"water": ({"RW": 1}, "V1/(RF + RW)")},
    ),
}


def ours(name: str) -> Network:
    """The same circuit as a network."""
    netlist, values, _ = CIRCUITS[name]
    branches = []
    for line in netlist.split("\n"):
        part, a, b = line.split()
        if part[0] == "V":
            branches.append(Branch(part, b, a, 0j, "source", "x", complex(values[part])))
        else:
            impedance = values[part] if part[0] == "R" else -1j / (2 * math.pi * HERTZ * values[part])
            branches.append(Branch(part, a, b, complex(impedance), "load", "x"))
    return Network(HERTZ, "0", tuple(branches))


@pytest.fixture(scope="module")
def symbolic(referees: Path) -> dict[str, dict[str, dict[str, object]]]:
    """What lcapy says of every circuit, in one child."""
    asked = [
        {
            "netlist": "\n".join(f"{line} s {{{line.split()[0]}}}" if line[0] == "V" else line for line in netlist.split("\n")),
            "values": {symbol: [complex(value).real, complex(value).imag] for symbol, value in values.items()},
            "asked": {what: "+".join(f"({sign})*I_{part}" for part, sign in signed.items()) for what, (signed, _) in wanted.items()},
            "formulas": {what: formula for what, (_, formula) in wanted.items()},
        }
        for netlist, values, wanted in CIRCUITS.values()
    ]
    done = subprocess.run(
        [referees, HERE / "lcapy_referee.py"], input=json.dumps(asked), capture_output=True, text=True, check=False, timeout=170
    )
    assert done.returncode == 0, done.stderr
    return dict(zip(CIRCUITS, json.loads(done.stdout), strict=True))


@pytest.mark.full
@pytest.mark.timeout(900)  # the first of them may have to make the environment
@pytest.mark.parametrize("name", CIRCUITS)
def test_symbols_and_numbers_agree(name: str, symbolic: dict[str, dict[str, dict[str, object]]]) -> None:
    """The formula is proved from the circuit by symbols, and our numeric solve of that circuit gives its value to 1e-12 A."""
    solution = solve(ours(name))
    for what, (signed, _) in CIRCUITS[name][2].items():
        said = symbolic[name][what]
        assert said["proved"], f"{what} is not the formula"
        mine = sum(sign * solution.current(part) for part, sign in signed.items())
        assert abs(mine - complex(*said["number"])) < 1e-12 * max(1.0, abs(mine))  # type: ignore[misc]


def test_there_are_a_dozen() -> None:
    """At least twelve circuits are asked about, and each has something flowing in what is asked."""
    assert len(CIRCUITS) >= 12
    for name, (_, _, wanted) in CIRCUITS.items():
        solution = solve(ours(name))
        for signed, _ in wanted.values():
            assert abs(sum(sign * solution.current(part) for part, sign in signed.items())) > 1e-6
