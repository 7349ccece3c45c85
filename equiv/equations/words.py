"""Why a network has no unique solution, in words: elements and nodes by name."""

from __future__ import annotations

from equiv.equations.graph import Finding
from equiv.equations.layout import Layout, Numbers
from equiv.units import say, write_value

_MOST_NAMES = 8


def listed(names: list[str]) -> str:
    """Names in a row: `V1, V2 and V3`; a long list is cut and counted."""
    if len(names) > _MOST_NAMES:
        return f"{', '.join(names[:_MOST_NAMES])} and {len(names) - _MOST_NAMES} more"
    return " and ".join(filter(None, [", ".join(names[:-1]), names[-1]]))


def of_finding(finding: Finding, layout: Layout, u: Numbers) -> str:
    """A fault of shape in words, with the disagreement of the sources where there is one."""
    names = _names(list(finding.branches), layout)
    if finding.sort == "loop":
        return _loop(names, _disagreement(finding, layout, u, "V"), layout)
    nodes = listed([layout.network.nodes[i] for i in finding.nodes])
    many = "s" if len(finding.nodes) > 1 else ""
    if not names:
        return f"node{many} {nodes}: nothing ties this part to {layout.network.ground}"
    off = _disagreement(finding, layout, u, "I")
    if _all(names, layout, ("current",)):
        forms = "form" if len(names) > 1 else "alone forms"
        what = f"{listed(names)} {forms} a cut-set of current sources around node{many} {nodes}"
        return what + (f" whose currents disagree by {_amount(off, 'A')}" if off else "")
    if not any(layout.network.elements[name].role == "source" for name in names):
        return (
            f"node{many} {nodes}: nothing ties this part to {layout.network.ground} "
            f"(only {listed(names)}, which {'carry' if len(names) > 1 else 'carries'} no current)"
        )
    rest = f", whose currents disagree by {_amount(off, 'A')}" if off else ""
    return f"{listed(names)} cut node{many} {nodes} off from {layout.network.ground}{rest}"


def _loop(names: list[str], off: float, layout: Layout) -> str:
    sources = [n for n in names if layout.network.elements[n].kind == "voltage"]
    if len(names) == 1:
        what = f"{names[0]} joins a node to itself"
        return what + (f" with a voltage of {_amount(off, 'V')}" if off else "")
    if len(sources) == len(names):
        what = f"{listed(names)} form a loop of voltage sources"
    elif sources:
        what = f"{listed(names)} form a loop of voltage sources and shorts"
    else:
        what = f"{listed(names)} form a loop of shorts"
    if off:
        return f"{what} whose voltages disagree by {_amount(off, 'V')}"
    return f"{what}: how the current divides between them is not determined"


def of_nodes(nodes: list[int], layout: Layout) -> str:
    """Nodes whose voltage nothing fixes, and what meets there."""
    network = layout.network
    free = {network.nodes[i] for i in nodes}
    meeting = [
        e.name
        for e in network.elements.values()
        # a name with a blank in it is a test source of ours, not the user's
        if free & set(e.nodes) and not free >= set(e.nodes) and " " not in e.name
    ]
    many = "s" if len(nodes) > 1 else ""
    return (
        f"nothing fixes the voltage of node{many} {listed(sorted(free))}: "
        f"only {listed(meeting or ['nothing'])} meet{'s' if len(meeting) < 2 else ''} there"
    )


def of_branches(branches: list[int], layout: Layout) -> str:
    """The elements that a null vector names, and what among them can be at fault."""
    names = _names(branches, layout)
    if not names:
        return "the network's equations are singular"
    gains = [layout.network.elements[n] for n in names]
    gains = [e for e in gains if e.role == "controlled"]
    if gains:
        parts = []
        for element in gains:
            field = element.fields[0]
            value = write_value(element.value, field.units[0])  # type: ignore[arg-type]
            parts.append(f"{element.name} ({field.keyword} = {value})")
        verb = "makes" if len(gains) == 1 else "together make"
        return f"the gain of {listed(parts)} {verb} the network singular; involved: {listed(names)}"
    if _all(names, layout, ("voltage", "short")):
        return _loop(names, 0.0, layout)
    kinds = {layout.network.elements[n].kind for n in names}
    if {"inductor", "capacitor"} <= kinds:
        return f"{listed(names)} are in resonance without loss at this frequency"
    return f"{listed(names)} leave the network without a unique solution"


def _names(branches: list[int], layout: Layout) -> list[str]:
    numbers = dict.fromkeys(layout.element_of_branch[branches].tolist())
    return [layout.elements[i].name for i in sorted(numbers)]


def _all(names: list[str], layout: Layout, kinds: tuple[str, ...]) -> bool:
    return all(layout.network.elements[name].kind in kinds for name in names)


def _disagreement(finding: Finding, layout: Layout, u: Numbers, output: str) -> float:
    """How far the sources of a loop or cut-set are from agreeing (0 where they agree)."""
    total, size = 0.0 + 0.0j, 0.0
    for branch, sign in zip(finding.branches, finding.signs, strict=True):
        element = layout.elements[int(layout.element_of_branch[branch])]
        if element.role == "source" and element.output == output:
            value = complex(u[layout.source_number[element.name]])
            total, size = total + sign * value, size + abs(value)
    return abs(total) if abs(total) > 1e-9 * size else 0.0


def _amount(value: float, unit: str) -> str:
    """A disagreement: `2 V`, `1.333 uA`."""
    number, _, rest = say(value, unit, 4).partition(" ")
    return f"{number.rstrip('0').rstrip('.') if '.' in number else number} {rest}"
