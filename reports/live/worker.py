"""The engine in a process of its own, so that a run past its time can be ended without the server noticing.

Run by `reports.live.engine` as ``python -P -m reports.live.worker FOLDER``: one JSON request a line on standard input,
one JSON answer a line on standard output, until the input ends.
"""

from __future__ import annotations

import json
import sys
import traceback
from collections.abc import Callable
from pathlib import Path
from typing import Any

from reports.live.answer import answer, fits, report, save

TASKS: dict[str, Callable[..., dict[str, Any]]] = {"answer": answer, "fits": fits, "save": save, "report": report}


def main() -> None:
    """Answer requests until the input ends."""
    folder = Path(sys.argv[1])
    out, sys.stdout = sys.stdout, sys.stderr  # nothing but answers goes to the server
    for line in sys.stdin:
        request = json.loads(line)
        try:
            found = TASKS[request.pop("task")](folder=folder, **request)
        except Exception:
            traceback.print_exc()
            found = {"failed": "the engine stopped on this input; the terminal says where."}
        out.write(json.dumps(found, ensure_ascii=True, allow_nan=False) + "\n")
        out.flush()


if __name__ == "__main__":
    main()
