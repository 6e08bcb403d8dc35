"""What is really so in one case: every switching state solved anew by numpy, all equations at once, and what its devices then do.

The networks come from the core's builders (installation, causes, contexts); nothing of the core's solver, its sweeps or its
probabilities is used. Each device has thresholds of its own, drawn once for the whole case, and opens exactly when one is passed.
"""

from __future__ import annotations

import dataclasses
import itertools
import math
import random
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from strayline import contexts
from strayline.boat import own_parts
from strayline.causes import effect
from strayline.components import LINES
from strayline.devices import CURVES, DEVICES, EDGE_SHARE, WINDOW_OHM
from strayline.errors import StraylineError
from strayline.installation import build
from strayline.network import Branch, Network, nodes, replaced, with_branches
from strayline.openings import MINUTES_HELD, band_scale, by_itself, rating_scale, start_multiple
from strayline.parts import Installation, base, read
from strayline.predict import Watch, watches
from strayline.wiring import EARTH

if TYPE_CHECKING:
    from collections.abc import Sequence

    from cases import Case
    from strayline.faults import Fault

OPEN_OHMS = 1e12  # what a meter is asked to tell from nothing at all
GROUNDED = ("neutral", "protective", "bond")  # kinds of branches that lead home at ground's potential
TOUCH_VOLTS, BLADE_VOLTS = 50.0, 10.0  # IEC 60364-4-41; common practice for a bare blade
WATER_MA = 10.0  # let-go current of IEC 60479-1: above it in the water a swimmer may not get away


@dataclass(frozen=True, slots=True)
class Solved:
    """A network's voltages by node (within its own island), its currents by branch, and the loop admittance of each window in siemens."""

    network: Network
    volts: dict[str, complex]
    amperes: dict[str, complex]
    islands: dict[str, str]
    loops: dict[str, float]

    def residual_a(self, sensor_id: str) -> float:
        """Magnitude of the sum of the live conductors' currents in one window."""
        return abs(sum(self.amperes[branch] for branch in self.network.sensor(sensor_id).branches))

    def between(self, a: str, b: str) -> float:
        """Volts from a to b; 0 where either is missing or nothing joins them."""
        if a not in self.volts or b not in self.volts or self.islands[a] != self.islands[b]:
            return 0.0
        return abs(self.volts[a] - self.volts[b])


def solved(network: Network) -> Solved:
    """The network with its isolators in the first state, fewest conducting, in which every one agrees with its own voltage."""
    names = [each.branch for each in network.isolators]
    for count in range(len(names) + 1):
        for conducting in itertools.combinations(names, count):
            if all(_agrees(network, each.branch, conducting) for each in network.isolators):
                return dense(_bridged(network, conducting))
    raise ArithmeticError("no state of the isolators agrees with itself")


def _bridged(network: Network, conducting: Sequence[str]) -> Network:
    for each in network.isolators:
        if each.branch in conducting:
            network = replaced(network, dataclasses.replace(network.branch(each.branch), impedance=complex(each.conducting)))
    return network


def _agrees(network: Network, name: str, conducting: Sequence[str]) -> bool:
    """Whether an isolator should do what it does, judged by the volts across it if it blocked."""
    each = next(one for one in network.isolators if one.branch == name)
    branch = network.branch(name)
    blocked = dense(_bridged(network, [one for one in conducting if one != name]))
    return (blocked.between(branch.from_node, branch.to_node) > each.volts) == (name in conducting)


def dense(network: Network) -> Solved:
    """Every node's balance and every branch's law in one matrix; in each island one node's balance gives way to its zero."""
    names = {name: place for place, name in enumerate(nodes(network))}
    flows = {branch.id: place for place, branch in enumerate(network.branches, len(names))}
    islands = _islands(network, names)
    size = len(names) + len(flows)
    matrix, right = np.zeros((size, size), complex), np.zeros((size, 1 + len(network.sensors)), complex)
    couplings: dict[str, list[tuple[str, complex]]] = {}
    for each in network.couplings:
        couplings.setdefault(each.one, []).append((each.other, each.impedance))
        couplings.setdefault(each.other, []).append((each.one, each.impedance))
    for branch in network.branches:
        row, scale = flows[branch.id], max(1.0, abs(branch.impedance))
        for node, sign in ((branch.from_node, 1), (branch.to_node, -1)):
            matrix[names[node], row] = sign
            matrix[row, names[node]] = sign / scale
        matrix[row, row] = -branch.impedance / scale
        for other, impedance in couplings.get(branch.id, ()):
            matrix[row, flows[other]] = -impedance / scale
        right[row, 0] = -branch.emf / scale
        for place, sensor in enumerate(network.sensors, 1):
            if branch.id in sensor.branches:
                right[row, place] = -1.0 / scale  # a volt in series with each enclosed conductor, all sources dead
    zeros = {islands[network.reference]: network.reference}
    for name in names:
        zeros.setdefault(islands[name], name)
    for zero in zeros.values():
        matrix[names[zero]] = 0
        matrix[names[zero], names[zero]] = 1
    found = np.linalg.solve(matrix, right)
    loops = {
        sensor.id: float(abs(sum(found[flows[branch], place] for branch in sensor.branches)))
        for place, sensor in enumerate(network.sensors, 1)
    }
    volts = {name: complex(found[place, 0]) for name, place in names.items()}
    return Solved(network, volts, {name: complex(found[place, 0]) for name, place in flows.items()}, islands, loops)


def _islands(network: Network, names: dict[str, int]) -> dict[str, str]:
    """For each node the name of its island, by walking the branches."""
    near: dict[str, list[str]] = {name: [] for name in names}
    for branch in network.branches:
        near[branch.from_node].append(branch.to_node)
        near[branch.to_node].append(branch.from_node)
    island: dict[str, str] = {}
    for start in names:
        waiting = [] if start in island else [start]
        while waiting:
            node = waiting.pop()
            if node not in island:
                island[node] = start
                waiting += near[node]
    return island


@dataclass(frozen=True, slots=True)
class Temper:
    """What one device is like: whether it works, whether it detects a grounded neutral, and where in each band its thresholds lie.

    Places are logits: 0 is the middle of a band, and one in a hundred lies beyond either end (EDGE_SHARE).
    """

    works: bool
    detects: bool
    residual: float
    loop: float
    thermal: float
    magnetic: float


def threshold(low: float, high: float, place: float) -> float:
    """The threshold at a place of a band, geometrically: its middle at 0, an end where EDGE_SHARE of all lie beyond."""
    edge = math.log(1 / EDGE_SHARE - 1)
    return math.sqrt(low * high) * (high / low) ** (place / edge / 2)


class World:
    """Everything that would really happen in one case: states solved when first asked for, devices with fixed thresholds."""

    def __init__(self, case: Case) -> None:
        self.case = case
        self.installation = read(case.installation)
        self._states: dict[tuple[str, tuple[Fault, ...]], State | None] = {}
        self._tempers: dict[str, Temper] = {}

    def state(self, context: str, faults: tuple[Fault, ...]) -> State | None:
        """One switching state with these faults there; None where this boat cannot make it."""
        key = (context, faults)
        if key not in self._states:
            try:
                self._states[key] = self._solved(context, faults)
            except StraylineError:
                self._states[key] = None
        return self._states[key]

    def _solved(self, context: str, faults: tuple[Fault, ...]) -> State | None:
        made = contexts.setting(context, self.installation)
        if made is None:
            return None
        network = build(made)
        name = context.partition(":")[0]
        for number, fault in enumerate(faults):
            done = effect(made, network, fault)
            network = with_branches(done.network, *_there(done.shunts, name, f"fault{number}"))
        for latent in self.case.latents:
            network = with_branches(network, *_there(latent.shunts, name, latent.name))
        left = contexts.switched(context, made, network)
        return State(context, made, solved(left), () if name in contexts.DEAD else watches(made))

    def now(self, moment: random.Random) -> tuple[Fault, ...]:
        """The faults that are there at a moment: one that comes and goes is there for its share of the time."""
        return tuple(fault for fault in self.case.faults if fault.duty >= 1.0 or moment.random() < fault.duty)

    def opened(self, context: str, moment: random.Random, faults: tuple[Fault, ...] | None = None) -> list[Watch] | None:
        """The devices that would open in a state; None where it cannot be made. Without `faults`, those of the moment."""
        there = self.now(moment) if faults is None else faults
        state = self.state(context, there)
        if state is None:
            return None
        found = [watch for watch in state.watched if self._opens(watch, state, there, moment)]
        if not found and state.watched and moment.random() < self.case.wandering:
            found = [watch for watch in state.watched if watch.role == "pedestal"][:1]
        return found

    def trips(self, context: str, moment: random.Random) -> bool | None:
        """Whether anything opens in a state."""
        found = self.opened(context, moment)
        return None if found is None else bool(found)

    def singles(self, moment: random.Random) -> list[tuple[str, bool]]:
        """Every own load alone: its state, and whether anything opens in it."""
        states = contexts.expand("one_load", self.installation)
        return [(state, bool(opened)) for state in states if (opened := self.opened(state, moment)) is not None]

    def temper(self, watch: Watch) -> Temper:
        """What one device is like, by its id: the same in every state of the case."""
        if watch.id not in self._tempers:
            draw = random.Random(f"{self.case.key}/{watch.id}")
            dead, detects = draw.random() < self.case.dead_share, draw.random()
            places = [math.log(share / (1 - share)) for share in (draw.uniform(1e-6, 1 - 1e-6) for _ in range(4))]
            device = DEVICES[watch.device]
            self._tempers[watch.id] = Temper(bool(device.rated_ma) and not dead, detects < device.grounded_neutral, *places)
        return self._tempers[watch.id]

    def _opens(self, watch: Watch, state: State, faults: tuple[Fault, ...], moment: random.Random) -> bool:
        temper, (name, _, alone) = self.temper(watch), state.context.partition(":")
        if temper.works:
            if self.pull(watch, state, faults) >= 1.0:
                return True
            if temper.detects:
                nearly_every, nearly_none = WINDOW_OHM
                if state.solved.loops[watch.id] >= threshold(1 / nearly_none, 1 / nearly_every, temper.loop):
                    return True
            if any(moment.random() < by_itself(fault, watch.id, name) for fault in faults):
                return True
        return self._overcurrent(watch, state, faults, name, alone)

    def pull(self, watch: Watch, state: State, faults: tuple[Fault, ...]) -> float:
        """A device's residual as a share of its own threshold; 0 where nothing watches."""
        device, temper = DEVICES[watch.device], self.temper(watch)
        if not temper.works:
            return 0.0
        low = watch.non_operating_ma or device.non_operating_ma
        high = watch.operating_ma or device.operating_ma
        own = threshold(low, high, temper.residual) * self.case.threshold_shift
        own *= math.prod(band_scale(fault, watch.id, fault.at in watch.loads, watch.waveform) for fault in faults)
        return state.solved.residual_a(watch.id) * 1e3 / own

    def _overcurrent(self, watch: Watch, state: State, faults: tuple[Fault, ...], name: str, alone: str) -> bool:
        if not watch.rated_a:
            return False
        temper, curve = self.temper(watch), CURVES[watch.curve]
        rated = watch.rated_a * math.prod(rating_scale(fault, watch.id) for fault in faults) * self.case.threshold_shift
        line_a = state.line_a(watch)
        quick = curve.minutes[rated > curve.large_a]
        tau = -quick / math.log(1 - (curve.thermal[1] / curve.quick) ** 2)  # at the quick multiple the slowest is just warm in time
        warm = 1 - math.exp(-MINUTES_HELD.get(name, 1.0) / tau)
        if line_a / rated * math.sqrt(warm) >= threshold(*curve.thermal, temper.thermal):
            return True
        starting = watch.loads if name == contexts.AS_FOUND else [alone] if name == "one_load" and alone in watch.loads else []
        extra = 0.0
        for load in starting:
            running, stated = watch.loads[load]
            multiple = max([start_multiple(fault, load, stated) for fault in faults] or [stated])
            extra = max(extra, (multiple - 1) * running)
        return extra > 0 and (line_a + extra) / rated >= threshold(*curve.at_once, temper.magnetic)

    @cached_property
    def peril(self) -> frozenset[str]:
        """What is deadly as found, out of the solve and the wiring: live metal, current in the water, broken conductors, bare blades."""
        state = self.state(contexts.AS_FOUND, self.case.faults)
        if state is None:
            return frozenset()
        one, found = state.solved, set()
        if any(one.between(node, EARTH) > TOUCH_VOLTS for _, node in one.network.hulls[:1]):
            found.add("live metal")
        mine = {part.id for part in own_parts(self.installation)}
        wet = [branch.id for branch in one.network.branches if branch.kind == "water" and base(branch.owner) in mine]
        if sum(abs(one.amperes[name]) for name in wet) * 1e3 > WATER_MA:
            found.add("leak to water")
        if any(one.between(blade.node, one.network.reference) > BLADE_VOLTS for blade in one.network.blades):
            found.add("live blades")
        found |= {f"open {kind}" for kind in ("ground", "neutral") if self._broken(one.network, kind[0].upper())}
        return frozenset(found)

    def _broken(self, network: Network, conductor: str) -> bool:
        """Whether copper no longer joins the boat's neutral or ground bus to the dock's, where in the healthy boat it does."""
        panel = next((part.id for part in own_parts(self.installation) if part.kind == "panel"), None)
        if panel is None:
            return False
        healthy = build(self.installation)
        dock = self.installation.of_kind("supply")[0].id
        pair = (f"{panel}.{conductor}", f"{dock}.{'star' if conductor == 'N' else 'G'}")
        return _joined(healthy, *pair) and not _joined(network, *pair)


def _joined(network: Network, a: str, b: str) -> bool:
    """Whether grounded conductors make a way of copper from a to b: one that landed in another's place still does."""
    seen, waiting = set(), [a]
    while waiting:
        node = waiting.pop()
        if node in seen:
            continue
        seen.add(node)
        for branch in network.branches:
            if branch.kind in GROUNDED:
                waiting += [other for one, other in _both_ways(branch) if one == node]
    return b in seen


def _both_ways(branch: Branch) -> tuple[tuple[str, str], tuple[str, str]]:
    return (branch.from_node, branch.to_node), (branch.to_node, branch.from_node)


def _there(shunts: Sequence[object], context: str, name: str) -> list[Branch]:
    """The shunts that exist in a context, as branches of their own."""
    return [
        dataclasses.replace(shunt.branch(), id=f"{name}.{shunt.id}")  # type: ignore[attr-defined]
        for shunt in shunts
        if context not in shunt.absent_in  # type: ignore[attr-defined]
    ]


@dataclass(frozen=True, slots=True)
class State:
    """One solved switching state with its devices, and what instruments would truly find in it."""

    context: str
    installation: Installation
    solved: Solved
    watched: tuple[Watch, ...]

    def line_a(self, watch: Watch) -> float:
        """The largest line current through one device."""
        return max((abs(self.solved.amperes.get(f"{watch.id}.{line}", 0j)) for line in LINES), default=0.0)

    def reading(self, name: str) -> float | None:
        """What an ideal instrument would show for a test's reading, in A or ohm; None where this state has no such place."""
        mine = own_parts(self.installation)
        if name in ("cord_sum_a", "live_sum_a", "ground_a"):
            cord = next((part.id for part in mine if part.kind == "cord"), None)
            live = [f"{cord}.{conductor}" for conductor in (*LINES, "N")]
            around = {"cord_sum_a": [*live, f"{cord}.G"], "live_sum_a": live, "ground_a": [f"{cord}.G"]}[name]
            return None if cord is None else abs(sum(self.solved.amperes.get(branch, 0j) for branch in around))
        if name in ("neutral_ground_ohm", "insulation_ohm"):
            meter = next((branch for branch in self.solved.network.branches if branch.id == contexts.METER), None)
            return None if meter is None else _ohms(meter, self.solved)
        return None

    def ohms_through(self) -> dict[str, float] | None:
        """The cord in the hand, end to end: neutral to far neutral, neutral and line to far ground, ground to ground."""
        mine = [part for part in own_parts(self.installation) if part.kind in ("cord", "adapter")]
        if not mine:
            return None
        near = base(mine[0].parents[0]) or f"{mine[0].id}.plug"
        far = [part.id for part in mine if part.kind == "cord"][-1]
        pairs = {"neutral": ("N", "N"), "crossed neutral": ("N", "G"), "crossed line": ("L1", "G"), "ground": ("G", "G")}
        return {name: self._probed(f"{near}.{start}", f"{far}.{end}") for name, (start, end) in pairs.items()}

    def _probed(self, a: str, b: str) -> float:
        present = nodes(self.solved.network)
        if a not in present or b not in present:
            return OPEN_OHMS
        meter = Branch("probe", a, b, 1000 + 0j, "source", "probe", 1 + 0j)
        return _ohms(meter, dense(with_branches(self.solved.network, meter)))


def _ohms(meter: Branch, one: Solved) -> float:
    """What an ohmmeter shows: its emf over its current, less its own resistance."""
    current = abs(one.amperes[meter.id])
    return OPEN_OHMS if current < 1e-12 else max(abs(meter.emf) / current - abs(meter.impedance), 0.0)
