"""Touchstone files that elements take their parameters from; each is read once."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path
from typing import NamedTuple

from equiv.elements.tabulated import Tabulated
from equiv.language.drafts import Draft
from equiv.language.fields import FileName
from equiv.language.files import Text
from equiv.language.mistakes import AlreadyReported, Mistake
from equiv.language.reports import Reports
from equiv.language.touchstone import ports_of, read


class Files(NamedTuple):
    """How a file is found by its name and the name's place, and how what is in it is read."""

    find: Callable[[str, tuple[int, int]], Path]
    read: Callable[[Path, tuple[int, int]], Text]


class Tables:
    """The parameters of every file that was read."""

    def __init__(self, files: Files, reports: Reports) -> None:
        self._files, self._reports = files, reports
        self._known: dict[tuple[Path, int], Tabulated | None] = {}

    def attach(self, draft: Draft) -> Draft:
        """The draft with the parameters in place of the name of their file."""
        for field, (value, *_) in draft.values.items():
            if isinstance(value, FileName):
                table = self._table(value, len(draft.ends) // 2)
                return draft._replace(values={**draft.values, field: (table,)})
        return draft

    def _table(self, named: FileName, ports: int) -> Tabulated:
        path = self._files.find(named.name, named.place)
        told = ports_of(path.name)
        if told not in (None, ports):
            raise Mistake(
                "wrong-ports",
                f"{path.name} has {told} port{'s' if told != 1 else ''}; "
                f"found {ports} pair{'s' if ports != 1 else ''} of nodes",
                named.place,
                hint="each port of the file takes a pair: +a -b",
            )
        if (path, ports) not in self._known:
            text = self._files.read(path, named.place)
            self._reports.file(text.name)
            self._known[path, ports] = read(text, ports, self._reports.add)
        table = self._known[path, ports]
        if table is None:
            raise AlreadyReported
        return table
