"""Term-by-term superposition and port equivalents of networks with controlled sources.

    import equiv

    network = equiv.load("supply.equiv")
    print(equiv.superpose(network, "I:R3"))

What is named here is imported when it is first used, so that `import equiv` costs nothing.
"""

from importlib import import_module

TYPE_CHECKING = False
if TYPE_CHECKING:
    from equiv.analyses.check import check as check
    from equiv.analyses.isolate import isolate as isolate
    from equiv.analyses.kinds import kinds as kinds
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
    from equiv.language import load as load
    from equiv.language import load_curve as load_curve
    from equiv.language import parse as parse
    from equiv.language import quantity as quantity
    from equiv.language import write as write
    from equiv.network import Network as Network

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
        "check",
        "isolate",
        "kinds",
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
_LANGUAGE = frozenset({"Builder", "load", "load_curve", "parse", "quantity", "write"})


def __getattr__(name: str) -> object:
    """The named part of the library, imported now."""
    if name in _ANALYSES:
        import_module("equiv.rendering")  # so that the result can show itself
        # `load` reads a file; the command of that name is `load_port` here
        module = f"equiv.analyses.{name.removesuffix('_port')}"
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
