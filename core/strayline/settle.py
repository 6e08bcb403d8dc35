"""Galvanic isolators, which block or conduct: the state in which every one of them does what its own voltage asks for.

An isolator stands in a protective conductor. As built it blocks; above its threshold it conducts. Blocking and conducting are each a
linear circuit, so the state is guessed, solved, checked, and solved again: whoever is furthest past its threshold changes first. An
isolator that conducts drops next to nothing, so whether it should is judged by the voltage that would stand across it if it blocked.
"""

from __future__ import annotations

import dataclasses
from typing import TYPE_CHECKING

from strayline.errors import NetworkError
from strayline.network import replaced
from strayline.solve import factor

if TYPE_CHECKING:
    from strayline.network import Isolator, Network


def settled(network: Network) -> Network:
    """The network in the self-consistent state of its isolators; one without isolators is returned as it is.

    A conducting isolator's branch has its conducting ohms, a blocking one's stays as built. Raises NetworkError where no state is
    found in which all agree.
    """
    conducting: frozenset[str] = frozenset()
    seen = {conducting}
    while True:
        worst = _worst(network, conducting)
        if worst is None:
            return _in_state(network, conducting)
        conducting = conducting ^ {worst}
        if conducting in seen:
            rule = "no state in which every galvanic isolator agrees with its own voltage"
            raise NetworkError(f"{worst}: {rule}", name=worst, rule=rule, value=None)
        seen.add(conducting)


def _in_state(network: Network, conducting: frozenset[str]) -> Network:
    for isolator in network.isolators:
        if isolator.branch in conducting:
            branch = network.branch(isolator.branch)
            network = replaced(network, dataclasses.replace(branch, impedance=complex(isolator.conducting)))
    return network


def _worst(network: Network, conducting: frozenset[str]) -> str | None:
    """The isolator furthest past its threshold on the wrong side of it, None when all agree."""
    excess = {each.branch: _excess(network, conducting, each) for each in network.isolators}
    wrong = {name: value for name, value in excess.items() if (value > 1) != (name in conducting)}
    return max(wrong, key=lambda name: max(wrong[name], 1 / max(wrong[name], 1e-12)), default=None)


def _excess(network: Network, conducting: frozenset[str], isolator: Isolator) -> float:
    """Volts across an isolator when it blocks and the others do as told, as a share of its threshold."""
    branch = network.branch(isolator.branch)
    state = factor(_in_state(network, conducting - {isolator.branch}))
    return abs(state.value(state.between(branch.from_node, branch.to_node))) / isolator.volts
