"""Writing files whole or not at all: beside the target first, then renamed into place."""

from __future__ import annotations

import os
import tempfile
from pathlib import Path

from formcheck.trouble import trouble


def write_text(path: Path, text: str) -> None:
    """Write text to a file in one step; InputError when the place cannot be written to."""
    path = Path(path)
    beside = None
    try:
        handle, beside = tempfile.mkstemp(dir=path.parent, prefix=f".{path.name}.")
        with os.fdopen(handle, "w", encoding="utf-8", newline="\n") as file:
            file.write(text)
        os.chmod(beside, 0o666 & ~_umask())
        os.replace(beside, path)
    except OSError as error:
        if beside:
            Path(beside).unlink(missing_ok=True)
        raise trouble(str(path), f"a place that cannot be written to ({error.strerror})",
                      "a file name in a folder that exists and may be written to") from None


def _umask() -> int:
    mask = os.umask(0)
    os.umask(mask)
    return mask
