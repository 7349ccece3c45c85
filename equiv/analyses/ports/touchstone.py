"""Parameters of ports for a Touchstone file, and the sources that such a file cannot carry."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from equiv.analyses.ports.form_tables import equation, form_data
from equiv.analyses.ports.forms import PortForm
from equiv.analyses.ports.proof import Equivalent
from equiv.analyses.result import PROGRAM
from equiv.elements.tabulated import Tabulated
from equiv.errors import Diagnostic, UsageError
from equiv.language.touchstone_writer import write_touchstone
from equiv.network import Network

TOUCHSTONE_FORMS = ("s", "z", "y")


def touchstone_text(
    network: Network, equivalents: Sequence[Equivalent], forms: Sequence[PortForm]
) -> str:
    """The file's text; the reference of z and y, by which they are normalised, is that of s.

    Errors: UsageError for a form that is not written, or for references that differ.
    """
    form = forms[0].form if forms else None
    if form not in TOUCHSTONE_FORMS:
        raise UsageError(
            Diagnostic(
                "not-for-touchstone",
                f"a Touchstone file is written with s, z or y; found {form or 'no form'}",
                hint="add: --form s",
            )
        )
    references = set(forms[0].references)
    if len(references) > 1:
        raise UsageError(
            Diagnostic(
                "one-reference",
                "a Touchstone file of version 1.1 has one reference for all its ports",
                hint="give one --reference",
            )
        )
    table = Tabulated("", form, references.pop(), *_points(equivalents, forms))
    return write_touchstone(table, _comments(network, equivalents[0], forms[0]))


def _points(
    equivalents: Sequence[Equivalent], forms: Sequence[PortForm]
) -> tuple[tuple[float, ...], tuple[tuple[complex, ...], ...]]:
    hertz = tuple(e.frequency.hertz for e in equivalents)
    matrices = []
    for form in forms:
        assert form.parameters is not None
        matrices.append(tuple(complex(x) for x in form.parameters.ravel()))
    return hertz, tuple(matrices)


def _comments(network: Network, e: Equivalent, form: PortForm) -> list[str]:
    ports = [
        f"port {number}: {p.name}, {p.plus} over {p.minus}" for number, p in enumerate(e.ports, 1)
    ]
    return [network.title or "port parameters", *ports, "currents into the ports"]


def touchstone_sources(
    network: Network, equivalents: Sequence[Equivalent], forms: Sequence[PortForm]
) -> dict[str, Any]:
    """The source vector at each frequency in SI units (not normalised), with its terms."""
    kept = ("hertz", "sources", "source_terms")
    points = []
    for e, form in zip(equivalents, forms, strict=True):
        data = {"hertz": e.frequency.hertz, **form_data(e, form)}
        points.append({key: data[key] for key in kept})
    e, form = equivalents[0], forms[0]
    data = form_data(e, form)
    return {
        "schema": "equiv/touchstone-sources/1",
        "program": PROGRAM,
        "title": network.title,
        "file": {"name": network.origin.name, "sha256": network.origin.sha256},
        "phasors": "rms",
        "form": form.form,
        "reference": list(form.references),
        "equation": equation(form),
        "currents": data["currents"],
        "ports": [{"name": p.name, "plus": p.plus, "minus": p.minus} for p in e.ports],
        "source_units": data["source_units"],
        "frequencies": points,
    }
