"""A result's JSON object as text."""

from __future__ import annotations

import json
from collections.abc import Mapping
from typing import Any


def draw(data: Mapping[str, Any]) -> str:
    """The object in ASCII at full double precision; a NaN or an infinity is a ValueError."""
    text = json.dumps(data, indent=2, ensure_ascii=True, allow_nan=False)
    return text.replace("\x7f", "\\u007f") + "\n"
