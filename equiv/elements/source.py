"""What independent and controlled sources share: what they become when they give nothing."""

from __future__ import annotations

from equiv.elements.element import KINDS, Element


class Source(Element):
    """An element that imposes a voltage or a current."""

    __slots__ = ()

    def switched_off(self) -> Element:
        """A short in place of an imposed voltage, an open in place of an imposed current."""
        kind = KINDS["short" if self.output == "V" else "open"]
        return kind(self.name, self.nodes, options=self.options._replace(group=None, at=None))
