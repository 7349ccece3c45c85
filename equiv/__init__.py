"""Term-by-term superposition and port equivalents of networks with controlled sources.

    import equiv

    network = equiv.load("supply.equiv")
    print(equiv.superpose(network, "I:R3"))

What is named here is imported when it is first used, so that `import equiv` costs nothing.
"""

from importlib import import_module

TYPE_CHECKING = False
if TYPE_CHECKING:
    from equiv.analyses.load import load_port as load_port
    from equiv.analyses.loadtest import loadtest as loadtest
    from equiv.analyses.match import match as match
    from equiv.analyses.port import port as port
    from equiv.analyses.sample import sample as sample
    from equiv.analyses.solve import solve as solve
    from equiv.analyses.superpose import superpose as superpose
    from equiv.analyses.sweep import sweep as sweep
    from equiv.errors import DoesNotExistError as DoesNotExistError
    from equiv.errors import EquivError as EquivError
    from equiv.errors import FileAccessError as FileAccessError
    from equiv.errors import NetworkFileError as NetworkFileError
    from equiv.errors import NoUniqueSolutionError as NoUniqueSolutionError
    from equiv.errors import UsageError as UsageError
    from equiv.language import Builder as Builder
    from equiv.language import load_curve as load_curve
    from equiv.language import quantity as quantity
    from equiv.network import Network as Network
    from equiv.threephase.check import check as check
    from equiv.threephase.fault import fault as fault
    from equiv.threephase.isolate import isolate as isolate
    from equiv.threephase.kinds_page import kinds as kinds
    from equiv.threephase.loading import load as load
    from equiv.threephase.loading import parse as parse
    from equiv.threephase.loading import write as write

__version__ = "0.1.0"
__all__ = [
    "Builder",
    "DoesNotExistError",
    "EquivError",
    "FileAccessError",
    "Network",
    "NetworkFileError",
    "NoUniqueSolutionError",
    "UsageError",
    "__version__",
    "check",
    "fault",
    "isolate",
    "kinds",
    "load",
    "load_curve",
    "load_port",
    "loadtest",
    "match",
    "parse",
    "port",
    "quantity",
    "sample",
    "solve",
    "superpose",
    "sweep",
    "write",
]

_ANALYSES = frozenset(
    {
        "load_port",
        "loadtest",
        "match",
        "port",
        "sample",
        "solve",
        "superpose",
        "sweep",
    }
)
_LANGUAGE = frozenset({"Builder", "load_curve", "quantity"})
_EITHER = {
    "check": "check",
    "fault": "fault",
    "isolate": "isolate",
    "kinds": "kinds_page",
    "load": "loading",
    "parse": "loading",
    "write": "loading",
}
"""What is for networks and three-phase systems alike, and its module."""


def __getattr__(name: str) -> object:
    """The named part of the library, imported now."""
    if name in _ANALYSES:
        import_module("equiv.rendering")  # so that the result can show itself
        # `load` reads a file; the command of that name is `load_port` here
        module = f"equiv.analyses.{name.removesuffix('_port')}"
    elif name in _EITHER:
        if name in ("check", "fault", "isolate", "kinds"):
            import_module("equiv.rendering")
        module = f"equiv.threephase.{_EITHER[name]}"
    elif name in _LANGUAGE:
        module = "equiv.language"
    elif name == "Network":
        module = "equiv.network"
    elif name in __all__:
        module = "equiv.errors"
    else:
        raise AttributeError(f"module 'equiv' has no attribute {name!r}")
    value: object = getattr(import_module(module), name)
    globals()[name] = value
    return value


def __dir__() -> list[str]:
    return __all__
