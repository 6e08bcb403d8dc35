"""One line of the benchmark table."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Row:
    """What was measured. limit -- the most it may be, None for a line that is only told; unit -- "ms", or "x" for a ratio."""

    name: str
    value: float
    unit: str
    limit: float | None = None
    note: str = ""

    @property
    def missed(self) -> bool:
        """Whether the value is over its limit."""
        return self.limit is not None and self.value > self.limit

    def shown(self) -> str:
        """The value as the table prints it."""
        return self._written(self.value)

    def bound(self) -> str:
        """The limit as the table prints it."""
        return "" if self.limit is None else f"<= {self._written(self.limit)}"

    def _written(self, number: float) -> str:
        return f"{number:.2f} x" if self.unit == "x" else f"{number:.0f} {self.unit}"
