"""The few signs beyond ASCII that tables use, and what stands for them where there is no Unicode."""

from __future__ import annotations

from typing import NamedTuple

from equiv.errors import printable

_SPELT = str.maketrans({"±": "+-", "·": "*", "²": "^2", "√": "sqrt "})


class Marks(NamedTuple):
    """The signs of one way of writing."""

    angle: str
    degree: str
    missing: str
    rule: str
    ohm: str
    micro: str
    cut: str
    """In the place of what is too long."""

    def unit(self, prefix: str, unit: str) -> str:
        """A unit with its prefix: `mA`, `kΩ`."""
        sign = self.ohm if unit == "ohm" else self.text(unit)
        return (self.micro if prefix == "u" else prefix) + sign

    def text(self, text: str) -> str:
        """A text made harmless, and plain where the signs are."""
        safe = printable(text)
        if self is PLAIN and not safe.isascii():
            safe = safe.replace("µ", self.micro).replace("Ω", self.ohm).translate(_SPELT)
            return safe.encode("ascii", "backslashreplace").decode("ascii")
        return safe


UNICODE = Marks(angle="∠", degree="°", missing="–", rule="─", ohm="Ω", micro="µ", cut="…")
PLAIN = Marks(angle="@", degree=" deg", missing="-", rule="-", ohm="ohm", micro="u", cut="...")
