"""Symbols in labels: `*E*_{F} / eV` becomes italics and a subscript in SVG, and `E_F / eV` in a CSV header."""

from __future__ import annotations

import re
from functools import lru_cache
from xml.sax.saxutils import escape

_PIECE = re.compile(r"\*([^*]+)\*|_\{([^}]*)\}|\^\{([^}]*)\}")


_COMMANDS = {
    "alpha": "α", "beta": "β", "gamma": "γ", "delta": "δ", "varepsilon": "ε", "kappa": "κ", "lambda": "λ", "mu": "µ",
    "rho": "ρ", "sigma": "σ", "tau": "τ", "phi": "φ", "varphi": "φ", "chi": "χ", "omega": "ω", "Omega": "Ω",
    "hbar": "ħ", "langle": "⟨", "rangle": "⟩", "cdot": "·", "times": "×", ",": "\u202f", "%": "%",
}  # fmt: skip
_TOKEN = re.compile(r"\\mathrm\{([^{}]*)\}|\\([A-Za-z]+|[,%])\s*|([_^])|([{}])|(.)", re.DOTALL)


def from_latex(symbol: str) -> str | None:
    """A symbol of the few LaTeX forms that declarations use, in our mark-up; None where it needs more than that.

    Letters are italic, what stands in \\mathrm is upright; one level of sub- and superscripts.
    """
    out, raised, depth = [], "", 0
    for upright, command, shift, brace, letter in _TOKEN.findall(symbol):
        if shift and not raised:
            raised = shift
            continue
        if brace:
            depth += 1 if brace == "{" else -1
            out.append({"{": f"{raised}{{", "}": "}"}[brace] if raised or brace == "}" else "")
            raised = "" if brace == "{" else raised
            continue
        if letter == " ":
            continue
        known = upright or _COMMANDS.get(command, "") or letter
        if not known or shift:
            return None
        if raised or depth:
            out.append(f"{raised}{{{known}}}" if raised else known)
            raised = ""
        else:
            out.append(f"*{known}*" if known.isalpha() and not upright else known)
    return "".join(out)


def plain(text: str) -> str:
    """The label as one line of text without mark-up."""
    return _PIECE.sub(lambda m: m[1] or (f"_{m[2]}" if m[2] is not None else f"^{m[3]}"), text)


def visible(text: str) -> str:
    """The characters that take up room, for measuring."""
    return _PIECE.sub(lambda m: m[1] or m[2] or m[3] or "", text)


@lru_cache(maxsize=4096)
def spans(text: str, size: float) -> str:
    """The label as the content of an SVG text element; `size` is the font size in user units.

    Sub- and superscripts are shifted with dy, which every renderer knows; the next piece shifts back.
    """
    out, position, shift = [], 0, 0
    for match in _PIECE.finditer(text):
        out.append(_span(text[position : match.start()], "", -shift))
        shift = 0 if match.start() > position else shift
        classes, wanted = ("i", 0) if match[1] else ("s", round(size * (0.22 if match[2] is not None else -0.36)))
        out.append(_span(match[1] or match[2] or match[3] or "", classes, wanted - shift))
        shift, position = wanted, match.end()
    out.append(_span(text[position:], "", -shift))
    return "".join(out)


def _span(text: str, classes: str, shift: int) -> str:
    if not text:
        return ""
    attributes = (f' class="{classes}"' if classes else "") + (f' dy="{shift}"' if shift else "")
    return f"<tspan{attributes}>{escape(text)}</tspan>" if attributes else escape(text)
