"""The netlist's text: what each branch becomes, and what it refuses."""

from __future__ import annotations

import math
import re

import pytest

from strayline.errors import NetworkError
from strayline.netlist import netlist
from strayline.network import Branch, Network, Sensor

NETWORK = Network(
    50,
    "Earth",
    (
        Branch("supply", "Earth", "L", 0j, "source", "grid", 230j),
        Branch("hot", "L", "l", 0.5 + 2j, "line", "cord"),
        Branch("load", "l", "Earth", 3 - 4j, "load", "heater"),
        Branch("alternator", "g.2", "g.1", 1, "source", "generator", 100),
        Branch("toaster", "g.1", "g.2", 9, "load", "toaster"),
    ),
    (Sensor("pedestal", ("hot",), "rcd_30", frozenset()), Sensor("empty", (), "none", frozenset())),
    (),
    (("boat", "hull"),),
)


def elements(network: Network) -> dict[str, list[str]]:
    """The element lines of the netlist: fields after the name, by name."""
    lines = netlist(network, "a dock").split(".options", maxsplit=1)[0].splitlines()
    return {line.split()[0]: line.split()[1:] for line in lines if not line.startswith("*")}


def test_a_branch_is_a_chain_from_end_to_end() -> None:
    """An enclosed branch is a 0 V source, a resistance and an inductance in a row between the numbers of its two nodes."""
    found = elements(NETWORK)
    window, resistor, coil = found["vs2"], found["r2"], found["l2"]
    assert window[0] == "1"
    assert window[1] == resistor[0]
    assert resistor[1] == coil[0]
    assert coil[1] == "2"
    assert float(resistor[2]) == 0.5
    assert float(coil[2]) * 2 * math.pi * 50 == pytest.approx(2)


def test_a_negative_reactance_is_a_capacitor() -> None:
    """A capacitor of 4 ohms at the network's frequency is written in farads."""
    assert 1 / (2 * math.pi * 50 * float(elements(NETWORK)["c3"][2])) == pytest.approx(4)


def test_a_source_lifts_its_far_node() -> None:
    """An emf from the reference to a line names the line first, with magnitude and angle."""
    assert elements(NETWORK)["ve1"] == ["1", "0", "dc", "0", "ac", "230.0", "90.0"]


def test_islands_are_tied_by_a_source() -> None:
    """One node of each floating island, a lone hull too, is tied by a 0 V source, and no resistor is invented."""
    found = elements(NETWORK)
    assert [name for name in found if name.startswith("vtie")] == ["vtie3", "vtie5"]
    assert found["vtie3"] == ["3", "0", "dc", "0", "ac", "0"]
    assert sorted(name for name in found if name.startswith("r")) == ["r2", "r3", "r4", "r5"]


def test_names_differ_by_more_than_case() -> None:
    """Nodes are numbers, each explained once in the table, so that L and l stay apart."""
    text = netlist(NETWORK, "a dock")
    table = dict(re.findall(r"^\* (\d+) = (.+)$", text, re.MULTILINE))
    assert table["0"] == "Earth"
    assert (table["1"], table["2"]) == ("L", "l")


def test_the_title_is_one_comment_line() -> None:
    """A title with line breaks stays one comment and adds no element."""
    text = netlist(NETWORK, "a dock\nr99 1 0 1")
    assert text.splitlines()[0] == "* a dock r99 1 0 1"


def test_every_sensor_is_printed_at_sixteen_digits() -> None:
    """Each sensor has its line of print, an empty one too, after asking for sixteen digits."""
    text = netlist(NETWORK, "a dock")
    assert text.index("set numdgt=16") < text.index("print res_pedestal") < text.index("print res_empty")
    assert ".ac lin 1 50 50" in text


def test_an_id_that_cannot_be_printed() -> None:
    """A sensor whose id is no plain lower-case word is refused by name."""
    with pytest.raises(NetworkError, match="Pedestal 1"):
        netlist(Network(50, "Earth", NETWORK.branches, (Sensor("Pedestal 1", ("hot",), "none", frozenset()),)), "a dock")
