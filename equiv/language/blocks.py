"""Blocks: pieces of a network that are written once and used under several names."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from typing import NamedTuple

from equiv.elements import Element
from equiv.language.amounts import Amount, Later, Written
from equiv.language.drafts import Draft, renamed
from equiv.language.limits import MOST_ELEMENTS, MOST_NAME, MOST_NESTING
from equiv.language.mistakes import AlreadyReported, Mistake
from equiv.language.scope import Definition, Parameter, Scope
from equiv.language.words import Statement, Words

Place = tuple[int, int]


class Use(NamedTuple):
    """An instance of a block."""

    block: str
    name: str
    nodes: tuple[str, ...]
    arguments: dict[str, tuple[Written, Place]]
    statement: Statement
    block_place: Place
    pins_place: Place


class Body:
    """What stands at the top of a network, or between `block` and `end`."""

    def __init__(self, outer: Body | None = None) -> None:
        self.outer = outer
        self.definitions: dict[str, Definition] = {}
        self.blocks: dict[str, Block] = {}
        self.entries: list[Element | Draft | Use] = []

    def block(self, use: Use) -> tuple[Block, Body]:
        """The block that is used, and the body in which it is written."""
        body: Body | None = self
        known: list[str] = []
        while body is not None:
            if use.block in body.blocks:
                return body.blocks[use.block], body
            known.extend(body.blocks)
            body = body.outer
        raise Mistake(
            "unknown-block",
            f"there is no block called {use.block}",
            use.block_place,
            near=(use.block, known),
        )


class Block(Body):
    """A reusable piece: its pins, and its parameters with the values they have by default."""

    def __init__(self, name: str, statement: Statement, outer: Body) -> None:
        super().__init__(outer)
        self.name = name
        self.statement = statement
        self.pins: tuple[str, ...] = ()
        self.parameters: dict[str, Definition | None] = {}
        self._names: dict[str, Statement] = {}

    def claim(self) -> None:
        """The entry that was added last must have a name of its own."""
        if len(self.entries) == len(self._names):
            return
        entry = self.entries[-1]
        assert isinstance(entry, Draft | Use)
        first = self._names.setdefault(entry.name, entry.statement)
        if first is not entry.statement:
            self.entries.pop()
            raise Mistake(
                "name-taken",
                f"there is already an element called {entry.name} in this block",
                Words(entry.statement).place_of(entry.name),
                related=((first.span(Words(first).place_of(entry.name)), "first used here"),),
            )


class Frame(NamedTuple):
    """A body with the parameters of one of its instances, inside those around it."""

    body: Body
    scope: Scope
    outer: Frame | None = None

    def of(self, body: Body) -> Frame:
        """The frame of a body that is this one's, or around it."""
        frame = self
        while frame.body is not body and frame.outer is not None:
            frame = frame.outer
        return frame


Report = Callable[[Mistake, Statement], None]


class Measured(NamedTuple):
    """How many elements and instances come out of a block, and how deep they are nested."""

    size: int
    height: int
    sound: bool = True


class Sizes:
    """Measures blocks before anything is made of them, and finds those that use themselves."""

    def __init__(self, report: Report) -> None:
        self._report = report
        self._known: dict[Block, Measured] = {}

    def check(self, body: Body) -> None:
        """Measure every block that is written in a body, whether it is used or not."""
        for block in body.blocks.values():
            self.measure(block)
            self.check(block)

    def measure(self, block: Block, inside: tuple[Block, ...] = ()) -> Measured:
        """The size and height of a block."""
        if block in self._known:
            return self._known[block]
        size, height, sound = 0, 1, True
        for entry in block.entries:
            size += 1
            if isinstance(entry, Use):
                inner = self._inner(entry, block, (*inside, block))
                size, height = size + inner.size, max(height, 1 + inner.height)
                sound &= inner.sound
        self._known[block] = Measured(size, height, sound)
        return self._known[block]

    def _inner(self, use: Use, body: Body, inside: tuple[Block, ...]) -> Measured:
        try:
            block, _ = body.block(use)
            if block in inside:
                raise Mistake("circular-block", f"block {block.name} uses itself", use.block_place)
            measured = self.measure(block, inside) if len(inside) <= MOST_NESTING else None
            if measured is None or measured.height >= MOST_NESTING:
                raise Mistake(
                    "nested-too-deep",
                    f"blocks are nested more than {MOST_NESTING} deep",
                    use.block_place,
                )
        except Mistake as mistake:
            self._report(mistake, use.statement)
            return Measured(0, 1, False)
        return measured


class Expansion:
    """Turns the instances of blocks into elements."""

    def __init__(self, ground: str, top: Body, report: Report) -> None:
        self._ground = ground
        self._report = report
        self._left = MOST_ELEMENTS
        self._sizes = Sizes(report)
        self._sizes.check(top)
        self.broken: set[str] = set()
        """Names of instances that could not be made."""

    def expand(self, use: Use, frame: Frame) -> Iterator[tuple[Element, Draft]]:
        """The elements of an instance, each with the statement it comes from."""
        try:
            measured = self._sizes.measure(frame.body.block(use)[0])
            if not measured.sound:
                self._fail(use.name, use.statement)
                return
            self._left -= measured.size
            if self._left < 0:
                raise Mistake(
                    "too-many-elements",
                    f"the blocks come to more than {MOST_ELEMENTS} elements",
                    use.block_place,
                )
        except Mistake as mistake:
            self._fail(use.name, use.statement, mistake)
            return
        yield from self._instance(use, frame, use.name, use.nodes)

    def _fail(self, name: str, statement: Statement, mistake: Mistake | None = None) -> None:
        if mistake is not None:
            self._report(mistake, statement)
        self.broken.add(name)

    def _instance(
        self, use: Use, frame: Frame, name: str, nodes: tuple[str, ...]
    ) -> Iterator[tuple[Element, Draft]]:
        try:
            block, body = frame.body.block(use)
            home = frame.of(body)
            self._check(use, block, name)
            scope = self._scope(use, block, frame, home)
        except Mistake as mistake:
            self._fail(name, use.statement, mistake)
            return
        except AlreadyReported:
            self._fail(name, use.statement)
            return
        inner = Frame(block, scope, home)
        kept = {self._ground: self._ground, **dict(zip(block.pins, nodes, strict=True))}
        names = frozenset(e.name for e in block.entries if isinstance(e, Draft))
        for entry in block.entries:
            if isinstance(entry, Use):
                ends = tuple(kept.get(node) or f"{name}.{node}" for node in entry.nodes)
                yield from self._instance(entry, inner, f"{name}.{entry.name}", ends)
            elif isinstance(entry, Draft):
                yield from self._element(entry, name, kept, names, scope)

    def _element(
        self,
        draft: Draft,
        prefix: str,
        kept: dict[str, str],
        names: frozenset[str],
        scope: Scope,
    ) -> Iterator[tuple[Element, Draft]]:
        try:
            local = renamed(draft, prefix, kept, names)
            yield local.realise(scope), local
        except Mistake as mistake:
            self._fail(f"{prefix}.{draft.name}", draft.statement, mistake)
        except AlreadyReported:
            self._fail(f"{prefix}.{draft.name}", draft.statement)

    def _check(self, use: Use, block: Block, name: str) -> None:
        if len(name) > MOST_NAME:
            raise Mistake(
                "name-too-long",
                f"the instance's name has {len(name)} characters; at most {MOST_NAME} are read",
                use.block_place,
            )
        if self._ground in block.pins:
            raise Mistake(
                "ground-is-shared",
                f"block {block.name} has a pin called {self._ground}, the ground",
                use.block_place,
                hint="every block sees the ground; no pin is needed for it",
            )
        if len(use.nodes) != len(block.pins):
            raise Mistake(
                "wrong-pins",
                f"block {block.name} joins {len(block.pins)} nodes; found {len(use.nodes)}",
                use.pins_place,
                hint=f"its pins are ({' '.join(block.pins)})",
                related=((block.statement.span((0, len(block.statement.text))), "the block"),),
            )

    def _scope(self, use: Use, block: Block, frame: Frame, home: Frame) -> Scope:
        """The instance's own parameters: as given where it is used, else by default."""
        for name, (_, place) in use.arguments.items():
            if name not in block.parameters:
                raise Mistake(
                    "unknown-parameter",
                    f"block {block.name} has no parameter called {name}",
                    place,
                    near=(name, block.parameters),
                )
        definitions: dict[str, Definition] = {}
        known: dict[str, Parameter] = {}
        for name, default in block.parameters.items():
            if name in use.arguments:
                written, place = use.arguments[name]
                known[name] = local_parameter(written, frame.scope, place)
            elif default is not None:
                definitions[name] = default
            else:
                raise Mistake(
                    "missing-parameter",
                    f"block {block.name} needs a value for {name}",
                    use.block_place,
                    hint=f"add {name}=VALUE",
                )
        scope = Scope({**definitions, **block.definitions}, home.scope)
        scope.known.update(known)
        scope.settle(self._report)
        return scope


def local_parameter(written: Written, scope: Scope, place: Place, top: bool = False) -> Parameter:
    """The parameter that a written value comes to."""
    amount: Amount = written.evaluate(scope) if isinstance(written, Later) else written
    if amount.value == ():
        raise Mistake("parameter-without-number", "a parameter must have a number", place)
    return Parameter(amount.value, amount.unit or "", top)
