"""The whole suite runs in two processes, one a core: each takes every other test.

Only `pytest` without paths is split; a test that is asked for by its path runs as it always does.
"""

import os
import subprocess
import sys
import tempfile
from typing import IO, Any

import pytest

PART = "EQUIV_TESTS_PART"
OTHER = pytest.StashKey[tuple[subprocess.Popen[bytes], IO[bytes]]]()


def pytest_configure(config: pytest.Config) -> None:
    """Start the other half."""
    whole = config.args_source is config.ArgsSource.TESTPATHS
    alone = (os.cpu_count() or 1) < 2 or config.option.collectonly or config.option.usepdb
    if PART in os.environ or not whole or alone:
        return
    output = tempfile.TemporaryFile()  # noqa: SIM115 (read and closed with the session)
    command = [sys.executable, "-m", "pytest", *config.invocation_params.args]
    child = subprocess.Popen(
        command, env={**os.environ, PART: "1"}, stdout=output, stderr=subprocess.STDOUT
    )
    config.stash[OTHER] = child, output


def pytest_collection_modifyitems(config: pytest.Config, items: list[Any]) -> None:
    """Keep every other test."""
    if PART in os.environ:
        own, other = items[1::2], items[::2]
    elif OTHER in config.stash:
        own, other = items[::2], items[1::2]
    else:
        return
    config.hook.pytest_deselected(items=other)
    items[:] = own


@pytest.hookimpl(tryfirst=True)
def pytest_sessionfinish(session: pytest.Session) -> None:
    """Fail where the other half failed."""
    if OTHER in session.config.stash:
        child, _ = session.config.stash[OTHER]
        if child.wait() and not session.exitstatus:
            session.exitstatus = child.returncode


def pytest_terminal_summary(terminalreporter: Any, config: pytest.Config) -> None:
    """Show what the other half said."""
    if OTHER in config.stash:
        _, output = config.stash[OTHER]
        output.seek(0)
        terminalreporter.section("the other half of the tests, in a process of its own")
        terminalreporter.write(output.read().decode("utf-8", "replace"))
        output.close()
