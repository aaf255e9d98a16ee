"""How a section is written: one spelling for the many that are in use."""

import re

_NUMBER = re.compile(r"\d+\.\d+")
_SPACES = re.compile(r"[\s_]+")
_TIMES = re.compile(r"[×*✕]")
_WIDE_FLANGE = re.compile(r"HE-?(\d+)-?(AA|A|B|M)")
_IPE_VARIANT = re.compile(r"IPE-?(\d+)-?([AO])")
_SERIES_LAST = re.compile(r"([\d.X/]+)(UB|UC|PFC|UPN|UPE|CHS|SHS|RHS|IPE|HE[AB])")
_OLD_CHANNEL = re.compile(r"U(\d+)")
_SERIES_HYPHEN = re.compile(r"^([A-Z]+)-(?=\d)")
_EQUAL_ANGLE = re.compile(r"L(\d[\d.]*)X([\d.]+)")
_SQUARE_HOLLOW = re.compile(r"([RS]HS)(\d[\d.]*)X(\d[\d.]*)(?:X(\d[\d.]*))?(COLD)?")


def _shorter(match: re.Match[str]) -> str:
    return match.group().rstrip("0").rstrip(".")


def normal_form(designation: str) -> str:
    """Spelling under which a designation is looked up.

    Capitals, no spaces, ``X`` for any multiplication sign, a point for a decimal comma, no trailing
    zeros, the series in front (``HE 200 A`` is ``HEA200``), an equal angle with both legs
    (``L 100x10`` is ``L100X100X10``), a square hollow section with its side once.

    Parameters
    ----------
    designation : str
        As a drawing has it.

    Examples
    --------
    >>> normal_form("ipe 300"), normal_form("CHS 168,3 × 6.30"), normal_form("HE 200 B")
    ('IPE300', 'CHS168.3X6.3', 'HEB200')
    >>> normal_form("L 100x10"), normal_form("SHS 100x100x5.0 hot")
    ('L100X100X10', 'SHS100X5')
    """
    text = _TIMES.sub("X", _SPACES.sub("", designation)).upper().replace(",", ".")
    text = _NUMBER.sub(_shorter, text)
    text = _SERIES_HYPHEN.sub(r"\1", text)
    if match := _SERIES_LAST.fullmatch(text):
        text = match[2] + match[1]
    if match := _WIDE_FLANGE.fullmatch(text):
        return f"HE{match[2]}{match[1]}"
    if match := _IPE_VARIANT.fullmatch(text):
        return f"IPE{match[2]}{match[1]}"
    if match := _OLD_CHANNEL.fullmatch(text):
        return f"UPN{match[1]}"
    if match := _EQUAL_ANGLE.fullmatch(text):
        return f"L{match[1]}X{match[1]}X{match[2]}"
    if text[:3] in ("SHS", "RHS"):
        return _hollow(text.removesuffix("HOT"))
    return text.removesuffix("HOT").removesuffix("COLD") if text.startswith("CHS") else text


def _hollow(text: str) -> str:
    """One spelling of a square or rectangular hollow section."""
    match = _SQUARE_HOLLOW.fullmatch(text)
    if match is None:
        return text
    series, first, second, third, cold = match.groups()
    if series == "SHS" and third == second:
        return text
    if third is not None and first == second:
        return f"SHS{first}X{third}{cold or ''}"
    return text


def series_of(designation: str) -> str:
    """Letters in front of a designation in its normal form: ``"IPE"`` of ``"IPE300"``; may be empty.

    Parameters
    ----------
    designation : str
        In its normal form, see `normal_form`.
    """
    match = re.match(r"[A-Z]*", designation)
    return match.group() if match else ""
