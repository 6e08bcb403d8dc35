"""A reliability diagram as a PNG (ISO/IEC 15948), written with the standard library: what is claimed across, what is so up."""

from __future__ import annotations

import itertools
import struct
import zlib
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence
    from pathlib import Path

SIDE, MARGIN, DOT = 480, 30, 4
WHITE, GREY, BLACK = (255, 255, 255), (200, 200, 200), (0, 0, 0)
COLOURS = ((31, 90, 160), (200, 90, 20), (30, 130, 60), (140, 50, 140))
Colour = tuple[int, int, int]


class Canvas:
    """A square of pixels; places are from 0 to 1 across and up."""

    def __init__(self) -> None:
        self.pixels = [[WHITE] * SIDE for _ in range(SIDE)]

    def _place(self, x: float, y: float) -> tuple[int, int]:
        span = SIDE - 2 * MARGIN
        return MARGIN + round(x * span), SIDE - MARGIN - round(y * span)

    def line(self, start: tuple[float, float], end: tuple[float, float], colour: Colour) -> None:
        """A straight line."""
        steps = SIDE
        for step in range(steps + 1):
            part = step / steps
            column, row = self._place(start[0] + part * (end[0] - start[0]), start[1] + part * (end[1] - start[1]))
            self.pixels[row][column] = colour

    def dot(self, x: float, y: float, colour: Colour) -> None:
        """A square dot."""
        column, row = self._place(x, y)
        for down in range(-DOT, DOT + 1):
            for right in range(-DOT, DOT + 1):
                self.pixels[row + down][column + right] = colour

    def png(self) -> bytes:
        """The picture's bytes: eight bits a colour, no filter."""
        rows = b"".join(b"\0" + bytes(value for pixel in row for value in pixel) for row in self.pixels)
        head = struct.pack(">IIBBBBB", SIDE, SIDE, 8, 2, 0, 0, 0)
        return b"\x89PNG\r\n\x1a\n" + _chunk(b"IHDR", head) + _chunk(b"IDAT", zlib.compress(rows, 9)) + _chunk(b"IEND", b"")


def _chunk(name: bytes, content: bytes) -> bytes:
    return struct.pack(">I", len(content)) + name + content + struct.pack(">I", zlib.crc32(name + content))


def reliability_plot(path: Path, curves: Mapping[str, Sequence[tuple[float, float, int]]]) -> dict[str, Colour]:
    """Write the diagram; each curve is (claimed, so, cases) a bin. Returns the colour of each, for the legend in words."""
    canvas = Canvas()
    for tenth in range(11):
        canvas.line((tenth / 10, 0), (tenth / 10, 1), GREY)
        canvas.line((0, tenth / 10), (1, tenth / 10), GREY)
    canvas.line((0, 0), (1, 1), BLACK)
    colours = dict(zip(curves, COLOURS * (1 + len(curves) // len(COLOURS)), strict=False))
    for name, bins in curves.items():
        for (x, y, _), (next_x, next_y, _) in itertools.pairwise(bins):
            canvas.line((x, y), (next_x, next_y), colours[name])
        for x, y, _ in bins:
            canvas.dot(x, y, colours[name])
    path.write_bytes(canvas.png())
    return colours
