"""Writes the OpenAPI document: `python -m loopslack.api.document [FOLDER]`, by default into `openapi`.

With `--check` nothing is written; the exit code is 1 if the committed files are not what would be written.
"""

from __future__ import annotations

import argparse
import sys
from pathlib import Path

from loopslack.api.document.assemble import assembled, written
from loopslack.api.v1 import OPERATIONS


def main(arguments: list[str] | None = None) -> int:
    """Write or check the files of the document."""
    parser = argparse.ArgumentParser(prog="python -m loopslack.api.document", description=__doc__)
    parser.add_argument("folder", nargs="?", type=Path, default=Path("openapi"))
    parser.add_argument("--check", action="store_true", help="write nothing, only compare")
    asked = parser.parse_args(arguments)
    if not asked.folder.is_dir():
        parser.error(f"{asked.folder} is no folder; run this at the top of the repository or name the folder")
    stale = []
    for name, content in written(assembled(OPERATIONS, asked.folder / "examples")).items():
        path = asked.folder / name
        if not path.exists() or path.read_bytes() != content:
            stale.append(name)
            if not asked.check:
                path.write_bytes(content)
    sys.stdout.write(f"{'not current' if asked.check else 'rewritten'}: {', '.join(stale) or 'nothing'}\n")
    return int(bool(stale) and asked.check)


if __name__ == "__main__":
    sys.exit(main())
