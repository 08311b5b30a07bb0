"""Single-stroke lettering for engraving.

Capitals and figures stand on a grid 4 wide and 6 high; small letters are drawn as small capitals.
Accented Latin letters are their base letter with the accent above. What the alphabet does not hold
becomes a box with a stroke through it, so that it is seen to be missing and never vanishes.
"""

from __future__ import annotations

import unicodedata
from functools import lru_cache

Stroke = tuple[tuple[float, float], ...]

WIDE, HIGH = 4.0, 6.0
GAP = 1.6
SMALL = 0.72

# Each letter: strokes parted by blanks, points as two digits (x 0-4, y 0-6 and beyond).
GLYPHS = {
    "A": "002640 1232", "B": "00063645443303 3342413000", "C": "4536160501103041",
    "D": "00062645412000", "E": "46060040 0333", "F": "460600 0333", "G": "45361605011030414323",
    "H": "0006 4046 0343", "I": "1030 2026 1636", "J": "0110304146", "K": "0006 4603 1340",
    "L": "060040", "M": "0006234640", "N": "00064046", "O": "103041453616050110",
    "P": "00063645443303", "Q": "103041453616050110 2240", "R": "00063645443303 2340",
    "S": "4536160504133342413010 1001", "T": "0646 2026", "U": "060110304146", "V": "062046",
    "W": "0610233046", "X": "0046 0640", "Y": "062346 2023", "Z": "06460040",
    "0": "103041453616050110 1135", "1": "052620 1030", "2": "05163645440040",
    "3": "05163645443313 3342413010 1001", "4": "303602 0242", "5": "4606033342413010 1001",
    "6": "453616050110304142331302", "7": "064620", "8": "133344453616050413 1302011030414233",
    "9": "0110304145361605041343", "-": "1333", "_": "0040", ".": "2021", ",": "2110",
    ":": "2021 2425", ";": "2110 2425", "/": "0046", "\\": "0640", "(": "36151130",
    ")": "16353110", "[": "36161030", "]": "16363010", "+": "2125 0343", "=": "0242 0444",
    "'": "2426", '"': "1416 3436", "!": "2021 2226", "?": "05163645442322 2021", 
    "#": "1016 3036 0242 0444",
    "%": "0046 0516 3041", "&": "400516263501103042", "*": "2125 0442 0244", "<": "450341",
    ">": "054301", " ": "", "`": "1625", "^": "042644", "~": "02133243", "|": "2026",
    "$": "4536160504133342413010 1001 2026", "@": "34241312213234 324245361605011040",
    "{": "36252413222130", "}": "16252433222110",
}
ACCENTS = {
    "\u0300": "1827", "\u0301": "2738", "\u0302": "172837", "\u0303": "17283738",
    "\u0308": "1718 3738", "\u030a": "17283717", "\u030c": "182738", "\u0327": "2010",
    "\u0304": "1737", "\u0328": "3041",
}
JOINED = {"ß": "SS", "Æ": "AE", "æ": "ae", "Œ": "OE", "œ": "oe", "Ø": "O", "ø": "o", "Ł": "L",
          "ł": "l", "Đ": "D", "đ": "d", "–": "-", "—": "-", "×": "x", "°": "'", "±": "+"}
MISSING = "0006464000 0046"


def _read(code: str) -> tuple[Stroke, ...]:
    strokes = []
    for word in code.split():
        digits = word[: len(word) // 2 * 2]
        points = tuple(
            (float(digits[i]), float(digits[i + 1])) for i in range(0, len(digits), 2)
        )
        if len(points) > 1:
            strokes.append(points)
    return tuple(strokes)


@lru_cache(maxsize=512)
def glyph(letter: str) -> tuple[tuple[Stroke, ...], float]:
    """Strokes of one letter on the grid, and its scale (small capitals are smaller)."""
    spread = unicodedata.normalize("NFD", letter)
    base, marks = spread[0], spread[1:]
    scale = SMALL if base.islower() else 1.0
    code = GLYPHS.get(base.upper(), MISSING)
    strokes = list(_read(code))
    for mark in marks:
        strokes += _read(ACCENTS.get(mark, ""))
    return tuple(strokes), scale


def write(
    text: str, height_mm: float, at: tuple[float, float] = (0.0, 0.0), anchor: str = "middle"
) -> list[Stroke]:
    """Strokes of a line of text, in mm.

    Args:
        text: one line.
        height_mm: of a capital.
        at: middle of the line, or the left end of its baseline (anchor "start").
        anchor: "middle" or "start".
    """
    shown = "".join(JOINED.get(c, c) for c in text)
    unit = height_mm / HIGH
    strokes: list[Stroke] = []
    x = 0.0
    for letter in shown:
        lines, scale = glyph(letter)
        strokes += [tuple((x + px * scale, py * scale) for px, py in line) for line in lines]
        x += WIDE * scale + GAP
    width = max(0.0, x - GAP)
    dx, dy = (-width / 2, -HIGH / 2) if anchor == "middle" else (0.0, 0.0)
    return [
        tuple((at[0] + (px + dx) * unit, at[1] + (py + dy) * unit) for px, py in line)
        for line in strokes
    ]


def width_mm(text: str, height_mm: float) -> float:
    """Width of a line of text."""
    shown = "".join(JOINED.get(c, c) for c in text)
    total = sum(WIDE * glyph(c)[1] + GAP for c in shown) - GAP
    return max(0.0, total) * height_mm / HIGH
