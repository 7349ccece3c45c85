"""Words of the trade that are no keywords here, and the keyword that stands for each."""

from __future__ import annotations

from collections.abc import Iterable
from typing import NamedTuple


class _Keyword(NamedTuple):
    name: str
    meaning: str
    words: str
    """What else it is called, in small letters without quotation marks."""


_KINDS = (
    _Keyword("bus", "", "busbar bar node board switchboard switchgear"),
    _Keyword("infeed", "a supply from outside", "grid utility source supply network"),
    _Keyword("line", "a cable or an overhead line", "cable feeder overhead-line conductor"),
    _Keyword("transformer", "", "trafo xfmr"),
    _Keyword("generator", "", "alternator genset"),
    _Keyword("motor", "", "induction-motor asynchronous-motor"),
    _Keyword("capacitor-bank", "", "capacitor capacitors"),
)
_FIELDS = (
    _Keyword("x1", 'the subtransient reactance x"d', "x xd xd'' x''d x'd xd' xdpp xdss x1d"),
    _Keyword("z", "the short-circuit impedance", "uk ukr uk% vk ek z1 zk usc impedance"),
    _Keyword("z1", "resistance and reactance, as in 0.12+0.1j", "r x r1 x1 z zl impedance"),
    _Keyword("z0", "resistance and reactance, as in 0.4+0.3j", "r0 x0 z00"),
    _Keyword("b1", "the susceptance ωC, as in 80 uS/km", "b c c1 bc"),
    _Keyword("b0", "the susceptance ωC0, as in 60 uS/km", "c0"),
    _Keyword("x/r", "the ratio of reactance to resistance", "xr x_r x-r r/x rx"),
    _Keyword("level", "the short-circuit level", "sk s''k sk'' ik i''k ik'' scl mva mvasc isc psc"),
    _Keyword("level1", "the line-to-earth level", "ik1 i''k1 ik1'' sk1 isc1"),
    _Keyword("cosphi", "the power factor", "pf cos cosfi cosφ powerfactor power-factor φ"),
    _Keyword("start", "starting current over rated current", "lrc lra ilr ilr/in ia/in istart"),
    _Keyword("efficiency", "as in 95%", "eff eta η"),
    _Keyword("vector", "the vector group", "group vectorgroup vector-group connection"),
    _Keyword("neutral", "the star point's earthing", "earthing grounding star starpoint ground"),
    _Keyword("neutral1", "the star point's earthing", "neutral earthing grounding neutralhv"),
    _Keyword("voltage", "the EMF", "emf e eq u v"),
    _Keyword("count", "of the same in parallel", "parallel n number circuits"),
)
_EARTHINGS = (
    _Keyword("open", "", "isolated unearthed ungrounded floating insulated none"),
    _Keyword("solid", "", "earthed grounded solidly direct directly"),
)


def kind_meant(word: str) -> str | None:
    """A hint at the kind that a word of the trade stands for."""
    return _meant(word, _KINDS)


def field_meant(word: str, keywords: Iterable[str]) -> str | None:
    """A hint at the keyword, among those of a kind, that a word of the trade stands for."""
    return _meant(word, [field for field in _FIELDS if field.name in keywords])


def earthing_meant(word: str) -> str | None:
    """A hint at `solid` or `open`."""
    return _meant(word, _EARTHINGS)


def _meant(word: str, known: Iterable[_Keyword]) -> str | None:
    bare = word.casefold().replace('"', "''")
    for keyword in known:
        if bare in keyword.words.split():
            meaning = f", {keyword.meaning}" if keyword.meaning else ""
            return f"did you mean {keyword.name}{meaning}?"
    return None
