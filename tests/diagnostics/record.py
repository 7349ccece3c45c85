"""Writes every case's message anew. Read the difference before believing it."""

from diagnostics import cases, systems
from pytest import MonkeyPatch

if __name__ == "__main__":
    for module, package in ((cases, "equiv.language"), (systems, "equiv.threephase.language")):
        for name in module.names():
            with MonkeyPatch.context() as patch:
                if name in module.SMALLER_LIMITS:
                    limit, value = module.SMALLER_LIMITS[name]
                    patch.setattr(f"{package}.{limit}", value)
                path = module.CASES / f"{name}.txt"
                path.write_text(module.message(name), encoding="utf-8")
