"""Whose boat it is: the parts of one boat, and of what it is plugged into."""

from __future__ import annotations

from typing import TYPE_CHECKING

from strayline.installation import zone_parts
from strayline.parts import base

if TYPE_CHECKING:
    from strayline.parts import Installation, Part


def own_parts(installation: Installation, panel_id: str | None = None) -> tuple[Part, ...]:
    """The parts of one boat and of what it is plugged into, receptacles included: of the stated panel's, else the first panel's."""
    panels = installation.of_kind("panel")
    if not panels:
        return ()
    panel = installation.part(panel_id) if panel_id else panels[0]
    found = {panel.id}
    for receptacle in installation.of_kind("receptacle"):
        zone = zone_parts(installation, receptacle)
        if panel.id in zone:
            found |= zone
    if len(found) == 1:  # nothing plugged in
        found |= set(installation.downstream(panel.id))
    return tuple(part for part in installation.parts if part.id in found)


def panel_of(installation: Installation, load: Part) -> Part:
    """The panel a load hangs on, through its breaker or directly."""
    parent = installation.part(base(load.parents[0]))
    return parent if parent.kind == "panel" else installation.part(base(parent.parents[0]))


def main_of(installation: Installation, load: Part) -> Part:
    """The boat main a load hangs behind (its panel's first)."""
    return installation.part(base(panel_of(installation, load).parents[0]))
