"""The rules a network must keep, and its edits."""

from __future__ import annotations

import math
import pickle
from dataclasses import FrozenInstanceError, replace
from typing import TYPE_CHECKING

import pytest

from strayline.errors import NetworkError
from strayline.network import (
    RULES,
    Blade,
    Branch,
    Coupling,
    Isolator,
    Network,
    Sensor,
    check_couplings,
    check_finite,
    check_frequency,
    check_isolators,
    check_kinds,
    check_live_conductors,
    check_no_zero_ohms,
    check_passive,
    check_reference_exists,
    check_sensor_branches_exist,
    check_two_ends,
    check_unique_ids,
    check_windows_enter_zones,
    checked,
    nodes,
    replaced,
    with_branches,
    without_branches,
)

if TYPE_CHECKING:
    from collections.abc import Callable

GOOD = Network(
    60,
    "N",
    (
        Branch("supply", "N", "L", 0j, "source", "grid", 120),
        Branch("hot", "L", "b.L", 0.02, "line", "cord"),
        Branch("back", "N", "b.N", 0.02, "neutral", "cord"),
        Branch("ground", "N", "b.G", 0.03, "protective", "cord"),
        Branch("heater", "b.L", "b.N", 10, "load", "heater"),
    ),
    (Sensor("pedestal", ("hot", "back"), "gfpe_30", frozenset({"b.L", "b.N", "b.G"})),),
    (Blade("plug", "b.X"),),
    (("boat", "b.G"),),
)


def changed(branch_id: str, **facts: object) -> Network:
    """GOOD with some facts of one branch changed."""
    return replaced(GOOD, replace(GOOD.branch(branch_id), **facts))


def windowed(*branches: str) -> Network:
    """GOOD with another list of enclosed branches."""
    return replace(GOOD, sensors=(replace(GOOD.sensors[0], branches=branches),))


WOUND = replace(
    GOOD,
    branches=(
        *GOOD.branches,
        Branch("primary", "b.L", "b.N", 0.1 + 100j, "winding", "transformer"),
        Branch("secondary", "t.L", "t.N", 0.1 + 25j, "winding", "transformer"),
    ),
    couplings=(Coupling("primary", "secondary", 49j),),
    isolators=(Isolator("ground", 0.85, 0.02),),
)


def coupled(*couplings: Coupling) -> Network:
    """WOUND with other couplings."""
    return replace(WOUND, couplings=couplings)


BROKEN: list[tuple[Callable[[Network], None], Network, str]] = [
    (check_unique_ids, replace(GOOD, branches=(*GOOD.branches, GOOD.branches[1])), "hot"),
    (check_unique_ids, replace(GOOD, sensors=GOOD.sensors * 2), "pedestal"),
    (check_unique_ids, replace(GOOD, blades=GOOD.blades * 2), "plug"),
    (check_unique_ids, replace(GOOD, hulls=GOOD.hulls * 2), "boat"),
    (check_frequency, replace(GOOD, hertz=0), "hertz"),
    (check_frequency, replace(GOOD, hertz=math.inf), "hertz"),
    (check_kinds, changed("hot", kind="wire"), "hot"),
    (check_finite, changed("hot", impedance=complex(math.inf, 0)), "hot"),
    (check_finite, changed("supply", emf=complex(0, math.nan)), "supply"),
    (check_no_zero_ohms, changed("back", impedance=0j), "back"),
    (check_passive, changed("heater", impedance=-1 + 5j), "heater"),
    (check_couplings, coupled(Coupling("primary", "hot", 1j)), "hot"),
    (check_couplings, coupled(Coupling("ghost", "secondary", 1j)), "ghost"),
    (check_couplings, coupled(Coupling("primary", "primary", 1j)), "primary and primary"),
    (check_couplings, coupled(*WOUND.couplings, Coupling("secondary", "primary", 49j)), "secondary and primary"),
    (check_couplings, coupled(Coupling("primary", "secondary", 50j)), "primary and secondary"),
    (check_couplings, coupled(Coupling("primary", "secondary", 1 + 4j)), "primary and secondary"),
    (check_couplings, coupled(Coupling("primary", "secondary", -4j)), "primary and secondary"),
    (check_isolators, replace(WOUND, isolators=(Isolator("back", 0.85, 0.02),)), "back"),
    (check_isolators, replace(WOUND, isolators=(Isolator("ground", 0, 0.02),)), "ground"),
    (check_isolators, replace(WOUND, isolators=(Isolator("ground", 0.85, 0),)), "ground"),
    (check_two_ends, changed("heater", to_node="b.L"), "heater"),
    (check_reference_exists, replace(GOOD, reference="earth"), "earth"),
    (check_sensor_branches_exist, windowed("hot", "back", "third"), "pedestal"),
    (check_sensor_branches_exist, windowed("hot", "hot"), "pedestal"),
    (check_live_conductors, windowed("hot", "back", "ground"), "pedestal"),
    (check_windows_enter_zones, windowed("hot", "back", "heater"), "pedestal"),
    (check_windows_enter_zones, changed("hot", from_node="b.L", to_node="L"), "pedestal"),
    (check_windows_enter_zones, changed("hot", to_node="elsewhere"), "pedestal"),
]


@pytest.mark.parametrize(("rule", "network", "name"), BROKEN)
def test_each_rule_names_the_offender(rule: Callable[[Network], None], network: Network, name: str) -> None:
    """A broken rule raises with the name of what broke it, and `checked` raises it too."""
    with pytest.raises(NetworkError) as caught:
        rule(network)
    assert caught.value.details["name"] == name
    assert caught.value.message.startswith(f"{name}: {caught.value.details['rule']}")
    with pytest.raises(NetworkError):
        checked(network)


def test_every_rule_is_broken_once() -> None:
    """Each rule that `checked` runs has an example here that breaks it."""
    assert {rule for rule, _, _ in BROKEN} == set(RULES)


def test_a_good_network_passes() -> None:
    """`checked` hands back the very network it was given."""
    assert checked(GOOD) is GOOD
    assert checked(WOUND) is WOUND


def test_zero_ohms_is_said_in_words() -> None:
    """Zero ohms in a conductor is told as that, while an ideal source is allowed."""
    with pytest.raises(NetworkError, match="back: zero ohms in a conductor"):
        checked(changed("back", impedance=0j))
    checked(changed("supply", impedance=0j))


def test_a_sensor_without_a_zone_may_lie_anywhere() -> None:
    """A sensor whose zone is not given is not held to it."""
    checked(replace(GOOD, sensors=(Sensor("dock", ("hot", "heater"), "gfpe_100", frozenset()),)))


def test_equal_networks_are_one_key() -> None:
    """Equal networks hash equal, unequal ones are unequal, and a pickled copy still finds its entry."""
    twin = replace(GOOD)
    assert twin is not GOOD
    assert twin == GOOD
    assert hash(twin) == hash(GOOD)
    assert {GOOD: 1}[pickle.loads(pickle.dumps(GOOD))] == 1
    assert changed("hot", impedance=0.03) != GOOD
    assert pickle.loads(pickle.dumps(WOUND)) == WOUND
    assert coupled() != WOUND


def test_nothing_can_be_changed_in_place() -> None:
    """Networks and branches are frozen."""
    with pytest.raises(FrozenInstanceError):
        GOOD.hertz = 50  # type: ignore[misc]
    with pytest.raises(FrozenInstanceError):
        GOOD.branches[0].emf = 0j  # type: ignore[misc]


def test_node_order() -> None:
    """Nodes come with the reference first, then as branches, hulls and blades first name them."""
    assert nodes(GOOD) == ("N", "L", "b.L", "b.N", "b.G", "b.X")


def test_opening_a_branch_opens_it_for_its_sensor() -> None:
    """A branch taken out is gone from the sensors that enclosed it, and nothing else changes."""
    by_id = without_branches(GOOD, ["back"])
    by_rule = without_branches(GOOD, lambda branch: branch.kind == "neutral")
    assert by_id == by_rule
    assert [branch.id for branch in by_id.branches] == ["supply", "hot", "ground", "heater"]
    assert by_id.sensors == (replace(GOOD.sensors[0], branches=("hot",)),)
    assert (by_id.blades, by_id.hulls, by_id.hertz, by_id.reference) == (GOOD.blades, GOOD.hulls, GOOD.hertz, GOOD.reference)


def test_a_coupling_goes_with_its_winding_and_an_isolator_with_its_conductor() -> None:
    """Opening a winding opens its couplings, opening a protective conductor its isolator; adding and replacing keep both."""
    assert without_branches(WOUND, ["primary"]).couplings == ()
    assert without_branches(WOUND, ["primary"]).isolators == WOUND.isolators
    assert without_branches(WOUND, ["ground"]).isolators == ()
    leak = Branch("leak", "b.L", "b.G", 1000, "leak", "heater")
    for edited in (with_branches(WOUND, leak), replaced(WOUND, replace(WOUND.branch("hot"), impedance=0.05))):
        assert (edited.couplings, edited.isolators) == (WOUND.couplings, WOUND.isolators)


def test_opening_nothing_is_the_same_network() -> None:
    """A rule that no branch meets leaves the network itself."""
    assert without_branches(GOOD, lambda branch: branch.owner == "nobody") is GOOD


def test_adding_and_opening_again() -> None:
    """A branch that is added and opened again leaves the network as it was."""
    leak = Branch("leak", "b.L", "b.G", 1000, "leak", "heater")
    more = with_branches(GOOD, leak)
    assert more.branches[-1] == leak
    assert more.sensors == GOOD.sensors
    assert without_branches(more, {"leak"}) == GOOD


def test_edits_name_what_is_missing() -> None:
    """Opening, replacing or asking for what is not there names it."""
    for edit in (
        lambda: without_branches(GOOD, ["ghost"]),
        lambda: replaced(GOOD, Branch("ghost", "a", "b", 1, "load", "x")),
        lambda: GOOD.branch("ghost"),
        lambda: GOOD.sensor("ghost"),
    ):
        with pytest.raises(NetworkError, match="ghost: no such"):
            edit()
