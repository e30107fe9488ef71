"""A pocket calculator: works out the lines that a derivation prints, from what is printed and nothing else."""

import ast
import math
import operator
import re

_PREFIX = {"": 1.0, "f": 1e-15, "p": 1e-12, "n": 1e-9, "µ": 1e-6, "m": 1e-3, "k": 1e3, "M": 1e6, "G": 1e9, "T": 1e12}
_SPECIAL = {"V/ms": 1e3, "V/µs": 1e6, "V/ns": 1e9, "s²": 1.0, "V²": 1.0, "min": 60.0, "h": 3600.0, "%": 0.01}
_WHOLE = ("Hz", "V/s", "s/V")
_UNIT = r"[fpnµmkMGT]?(?:V/m?s|V/µs|V/ns|s/V|s²|V²|Hz|[ΩFVAsJCW])|min|h|%"
_NUMBER = re.compile(rf"(?<![\w.])(\d[\d.]*(?:e[+-]?\d+)?)(?: ?({_UNIT})(?![\w/]))?")
_OPERATORS = {
    ast.Add: operator.add,
    ast.Sub: operator.sub,
    ast.Mult: operator.mul,
    ast.Div: operator.truediv,
    ast.Pow: operator.pow,
}
_FUNCTIONS = {"exp": math.exp, "ln": math.log, "log": math.log, "sqrt": math.sqrt, "abs": abs, "min": min, "max": max}


def _scale(unit: str) -> float:
    if unit in _SPECIAL:
        return _SPECIAL[unit]
    whole = next((name for name in _WHOLE if unit.endswith(name)), unit[-1])
    return _PREFIX[unit.removesuffix(whole)]


def work_out(text: str) -> float:
    """The value of ``10 kΩ · 10 µF`` or ``9.9 V - (-1 µA)``; raises where a sign or a word is not known."""
    plain = _NUMBER.sub(lambda found: f"({float(found[1]) * (_scale(found[2]) if found[2] else 1.0)!r})", text)
    plain = plain.replace("·", "*").replace("^", "**").replace("never", "(1e999)").strip()
    return _value(ast.parse(plain, mode="eval").body)


def _value(node: ast.AST) -> float:
    if isinstance(node, ast.Constant):
        return float(node.value)  # type: ignore[arg-type]
    if isinstance(node, ast.BinOp):
        return float(_OPERATORS[type(node.op)](_value(node.left), _value(node.right)))
    if isinstance(node, ast.UnaryOp) and isinstance(node.op, ast.USub):
        return -_value(node.operand)
    if isinstance(node, ast.Call) and isinstance(node.func, ast.Name):
        return float(_FUNCTIONS[node.func.id](*(_value(item) for item in node.args)))  # type: ignore[operator]
    raise ValueError(ast.dump(node))
