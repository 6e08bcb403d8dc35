"""A Network as SPICE text, so that an independent program can solve it: `ngspice -b FILE` prints every residual.

Each branch becomes a chain from its `from_node` to its `to_node`: a 0 V source where a sensor counts its current, then its emf, its
resistance and its inductance or capacitance, with numbered nodes between them. Node names are numbers, listed in a comment table,
because SPICE folds upper and lower case. The current of a 0 V source is positive into its first node: from supply to load.
"""

from __future__ import annotations

import math
import re
from typing import TYPE_CHECKING

from strayline.equations import Equations
from strayline.errors import NetworkError
from strayline.network import nodes
from strayline.phasor import angle_deg

if TYPE_CHECKING:
    from strayline.network import Branch, Network

_PLAIN_ID = re.compile(r"[a-z][a-z0-9_]*")


def netlist(network: Network, title: str) -> str:
    """SPICE text of the network, for one run at its one frequency.

    It prints `res_<sensor id> = real,imaginary` in amperes RMS at 16 digits for every sensor; a sensor without branches prints zero.
    """
    names = nodes(network)
    numbers = {name: place for place, name in enumerate(names)}
    enclosed = {branch_id for sensor in network.sensors for branch_id in sensor.branches}
    places = {branch.id: place for place, branch in enumerate(network.branches, 1)}
    # Plain ASCII: SPICE knows no encodings, and a title from a JSON file may hold half a character.
    lines = [f"* {' '.join(title.split()).encode('ascii', 'replace').decode()}", "*", "* node table"]
    lines += [f"* {number} = {name}" for name, number in numbers.items()]
    inner = len(names)
    for branch in network.branches:
        elements = _elements(branch, places[branch.id], network.hertz, sensed=branch.id in enclosed)
        lines.append(f"* {branch.id} ({branch.kind})")
        near = numbers[branch.from_node]
        for element in elements[:-1]:
            lines.append(element.format(near=near, far=inner))
            near, inner = inner, inner + 1
        lines.append(elements[-1].format(near=near, far=numbers[branch.to_node]))
    for number, each in enumerate(network.couplings, 1):
        one, other = places[each.one], places[each.other]
        perfect = math.sqrt(network.branch(each.one).impedance.imag * network.branch(each.other).impedance.imag)
        lines.append(f"k{number} l{one} l{other} {each.impedance.imag / perfect!r}")
    ties = Equations(network).ties
    if ties:
        lines.append("* one node of each floating island is tied to the reference; the tie carries no current")
        lines += [f"vtie{numbers[name]} {numbers[name]} 0 dc 0 ac 0" for name in ties]
    lines += [
        "* a linear circuit needs no operating point, and capacitors would leave it without one",
        ".options noopac",
        f".ac lin 1 {network.hertz!r} {network.hertz!r}",
        ".control",
        "set numdgt=16",
        "run",
    ]
    for sensor in network.sensors:
        if not _PLAIN_ID.fullmatch(sensor.id):
            rule = "a sensor's id must be lower-case letters, digits and underscores to be printed"
            raise NetworkError(f"{sensor.id}: {rule}", name=sensor.id, rule=rule, value=sensor.id)
        counted = "+".join(f"i(vs{places[branch_id]})" for branch_id in sensor.branches)
        lines += [f"let res_{sensor.id} = {counted or '(0,0)'}", f"print res_{sensor.id}"]
    lines += ["quit 0", ".endc", ".end"]
    return "\n".join(lines) + "\n"


def _elements(branch: Branch, place: int, hertz: float, *, sensed: bool) -> list[str]:
    """The chain of elements of one branch, each with its two nodes left open as {near} and {far}."""
    chain = []
    if sensed:
        chain.append(f"vs{place} {{near}} {{far}} dc 0 ac 0")
    if branch.emf or (branch.impedance == 0 and not sensed):
        # The emf lifts the far node above the near one, and SPICE names the higher node of a source first.
        chain.append(f"ve{place} {{far}} {{near}} dc 0 ac {abs(branch.emf)!r} {angle_deg(branch.emf)!r}")
    resistance, reactance = branch.impedance.real, branch.impedance.imag
    if resistance:
        chain.append(f"r{place} {{near}} {{far}} {resistance!r}")
    if reactance > 0:
        chain.append(f"l{place} {{near}} {{far}} {reactance / (2 * math.pi * hertz)!r}")
    elif reactance < 0:
        chain.append(f"c{place} {{near}} {{far}} {-1 / (2 * math.pi * hertz * reactance)!r}")
    return chain
