"""Run by another Python, the one that has lcapy: circuits from standard input, currents to standard output, both JSON.

A circuit is {"netlist": text, "values": {symbol: [re, im]}, "asked": {name: expression in I_<part>}, "formulas": {name: expression}}. For
each asked name the reply holds its number at s = j 2 pi 60, and whether lcapy's symbolic answer is the formula, exactly.
"""

from __future__ import annotations

import json
import math
import sys

import sympy
from lcapy import Circuit, s  # type: ignore[import-not-found]

HERTZ = 60.0


def answer(circuit: dict[str, object]) -> dict[str, object]:
    """What lcapy says of one circuit."""
    netlist = str(circuit["netlist"])
    solved = Circuit(netlist)
    symbols: dict[str, sympy.Symbol] = {}
    currents = {}
    for line in netlist.split("\n"):
        name = line.split()[0]
        if name[0] in "RC":
            expression = getattr(solved, name).I(s).sympy
            symbols |= {str(symbol): symbol for symbol in expression.free_symbols}
            currents[f"I_{name}"] = expression
    values = {symbols[name]: complex(*pair) for name, pair in circuit["values"].items() if name in symbols}  # type: ignore[attr-defined]
    if "s" in symbols:
        values[symbols["s"]] = 2j * math.pi * HERTZ
    found = {}
    for name, asked in circuit["asked"].items():  # type: ignore[attr-defined]
        expression = sympy.sympify(asked, locals={**symbols, **currents})
        formula = sympy.sympify(circuit["formulas"][name], locals={**symbols, **currents})  # type: ignore[index]
        number = complex(expression.subs(values).evalf(30))
        found[name] = {"number": [number.real, number.imag], "proved": sympy.simplify(expression - formula) == 0}
    return found


if __name__ == "__main__":
    print(json.dumps([answer(circuit) for circuit in json.load(sys.stdin)]))
