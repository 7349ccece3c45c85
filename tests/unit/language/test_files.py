"""Files: reading others, staying inside the folder, bytes that are no text."""

from hashlib import sha256
from pathlib import Path

import pytest

from equiv.errors import FileAccessError, NetworkFileError
from equiv.language import load, parse
from equiv.network import Origin


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    """A network in several files."""
    (tmp_path / "parts" / "deep").mkdir(parents=True)
    (tmp_path / "parts" / "amp.equiv").write_text(
        'read "deep/values.equiv"\nblock amp (p)\n  resistor R p gnd R0\nend\n'
    )
    (tmp_path / "parts" / "deep" / "values.equiv").write_text("given R0 = 5 ohm\nnote deep\n")
    (tmp_path / "main.equiv").write_text(
        'resistor R1 a gnd 1\nread "parts/amp.equiv"\nuse amp X (a)\n'
    )
    return tmp_path


def code(path: Path) -> list[str]:
    """The codes of a file's errors."""
    with pytest.raises(NetworkFileError) as caught:
        load(path)
    return [d.code for d in caught.value.diagnostics]


def test_files_that_read_files(folder: Path) -> None:
    network = load(folder / "main.equiv")
    assert list(network.elements) == ["R1", "X.R"]
    assert network.notes == ("deep",)
    assert network.places == (("main.equiv", 1), ("parts/amp.equiv", 3))
    data = (folder / "main.equiv").read_bytes()
    assert network.origin == Origin("main.equiv", sha256(data).hexdigest())
    assert parse((folder / "main.equiv").read_text(), folder=folder) == network


def test_a_mistake_in_another_file_names_it(folder: Path) -> None:
    (folder / "parts" / "amp.equiv").write_text("resistor R9 a gnd 5 V\nblock x (p)\n")
    with pytest.raises(NetworkFileError) as caught:
        load(folder / "main.equiv")
    places = [(d.span.file, d.span.line, d.code) for d in caught.value.diagnostics]
    assert places == [
        ("main.equiv", 3, "unknown-block"),
        ("parts/amp.equiv", 1, "wrong-unit"),
        ("parts/amp.equiv", 2, "unclosed-block"),
    ]


def test_never_outside_the_folder(folder: Path) -> None:
    outside = folder / "parts" / "outside.equiv"
    for name in ("../main.equiv", "../../etc/passwd", "deep/../../main.equiv"):
        outside.write_text(f'read "{name}"\n')
        assert code(outside) == ["outside-folder"]
    (folder / "parts" / "link.equiv").symlink_to(folder / "main.equiv")
    outside.write_text('read "link.equiv"\n')
    assert code(outside) == ["outside-folder"]
    (folder / "parts" / "inside.equiv").symlink_to(folder / "parts" / "deep" / "values.equiv")
    outside.write_text('read "inside.equiv"\nresistor R1 a gnd R0\n')
    assert load(outside).elements


def test_a_file_inside_may_look_up_within_the_folder(folder: Path) -> None:
    (folder / "values.equiv").write_text("given R0 = 7 ohm\n")
    (folder / "parts" / "amp.equiv").write_text(
        'read "../values.equiv"\nblock amp (p)\nresistor R p gnd R0\nend\n'
    )
    assert load(folder / "main.equiv").given["R0"].value == 7


def test_no_circles(folder: Path) -> None:
    (folder / "parts" / "deep" / "values.equiv").write_text('read "../../main.equiv"\n')
    assert code(folder / "main.equiv")[0] == "circular-read"


def test_only_plain_files_are_read(folder: Path) -> None:
    main = folder / "main.equiv"
    main.write_text('read "parts"\nread "none.equiv"\nread ""\n')
    assert code(main) == ["cannot-read", "cannot-read", "missing-text"]
    main.write_text(f'read "{"x" * 500}"\n')
    assert code(main) == ["cannot-read"]


@pytest.mark.parametrize("data", [b"\xff\xfeR\x00", b"title ok\nnote \xe9\n"])
def test_bytes_that_are_no_text(folder: Path, data: bytes) -> None:
    path = folder / "bytes.equiv"
    path.write_bytes(data)
    with pytest.raises(FileAccessError) as caught:
        load(path)
    assert [d.code for d in caught.value.diagnostics] == ["cannot-read"]
    (folder / "main.equiv").write_text('read "bytes.equiv"\n')
    assert code(folder / "main.equiv") == ["cannot-read"]


@pytest.mark.parametrize("name", ["none.equiv", "parts", "none/none.equiv", "a\0b"])
def test_files_that_cannot_be_read(folder: Path, name: str) -> None:
    with pytest.raises(FileAccessError) as caught:
        load(folder / name)
    assert [d.code for d in caught.value.diagnostics] == ["cannot-read"]
    assert str(folder) not in str(caught.value)


def test_bytes_of_all_files_count_together(folder: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("equiv.language.files.MOST_BYTES", 90)
    assert code(folder / "main.equiv")[0] == "file-too-large"


def test_a_text_by_itself_reads_nothing() -> None:
    with pytest.raises(NetworkFileError) as caught:
        parse('read "main.equiv"')
    assert [d.code for d in caught.value.diagnostics] == ["no-folder"]
    assert parse("").origin == Origin(None, sha256(b"").hexdigest())
    assert parse("", name="x").origin.name == "x"
