"""What a kind of item declares about itself: from it follow reading, writing and the manual."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import TYPE_CHECKING, Any, ClassVar, NamedTuple

from equiv.analyses.kinds import sections

if TYPE_CHECKING:
    from equiv.threephase.model import Item

IMPEDANCE = ("%", "pu", "ohm")


class Field(NamedTuple):
    """A value that a kind takes: the attribute, the keyword before it, and the units it may have.

    A field without a keyword stands behind the buses, before the keywords. `form` is `number`,
    `voltages` (two, as in 33/6.6 kV), `earthing`, `factor` or `group` (a vector group).
    """

    name: str
    units: tuple[str, ...] = ("",)
    keyword: str = ""
    form: str = "number"
    complex: bool = False
    needed: bool = False
    bounds: str = "positive"
    """`positive`, `any`, `not negative` or `up to one` (over zero)"""

    @property
    def shown(self) -> str:
        """The field in messages: its keyword, or its name in words."""
        return self.keyword or self.name.replace("_", " ")


class Problem(NamedTuple):
    """Something that makes an item impossible; `field` says which value is to be pointed at."""

    code: str
    message: str
    field: str = ""
    hint: str | None = None


KINDS: dict[str, type[Kind]] = {}
"""The registry of kinds, by the word that begins a statement."""


class Kind:
    """What all kinds of item declare; each is a frozen dataclass below this and a model class."""

    kind: ClassVar[str] = ""
    connection: ClassVar[str] = "BUS"
    """`BUS`, or `A > B`"""
    fields: ClassVar[tuple[Field, ...]] = ()
    grouped: ClassVar[bool] = False
    """Whether it may be in a group: it is a source."""

    words: ClassVar[tuple[str, ...]] = ()
    """The keywords that may stand behind the positional values (of the declaration)."""
    positional: ClassVar[tuple[Field, ...]] = ()
    """The values that stand behind the buses."""
    by_keyword: ClassVar[Mapping[str, Field]] = {}
    written_as: ClassVar[str] = ""
    """How it is written, as a hint."""

    def __init_subclass__(cls) -> None:
        super().__init_subclass__()
        if not cls.__dict__.get("kind"):
            return
        KINDS[cls.kind] = cls
        cls.positional = tuple(field for field in cls.fields if not field.keyword)
        cls.by_keyword = {field.keyword: field for field in cls.fields if field.keyword}
        cls.words = (*cls.by_keyword, "count", *(["group"] if cls.grouped else []), "label")
        cls.written_as = f"write it as: {sections(cls)['Written']}"

    def problems(self) -> Iterator[Problem]:
        """What is impossible about the values together."""
        return iter(())


def make(kind: type[Kind], **values: Any) -> Item:
    """An item of a kind."""
    item: Item = kind(**values)  # type: ignore[assignment]
    return item
