"""The server's side of the engine's process: one request at a time, the newest of each page, within a time limit."""

from __future__ import annotations

import asyncio
import json
import os
import sys
from itertools import count
from pathlib import Path
from typing import Any

LONGEST_ANSWER = 8_000_000
"""Bytes of one answer."""
MOST_WAITING = 16
"""Pages that may wait for their turn."""


class Superseded(Exception):
    """A newer request of the same page has come in."""


class Busy(Exception):
    """Too many pages are waiting."""


class Engine:
    """A process that computes; replaced by a new one when it takes too long.

    Parameters
    ----------
    folder : Path
        Paths in cases are taken from here.
    limit : float
        Longest time for one request [s].
    """

    def __init__(self, folder: Path, limit: float) -> None:
        self._folder, self._limit = folder, limit
        self._process: asyncio.subprocess.Process | None = None
        self._turn = asyncio.Lock()
        self._newest: dict[str, int] = {}
        self._number = count()

    async def ask(self, page: str, task: str, **request: Any) -> dict[str, Any]:
        """Run one task of `reports.live.worker`.

        Raises
        ------
        Superseded
            If the page asked again before this request's turn came.
        Busy
            If too many pages wait.
        TimeoutError
            If it took longer than the limit.
        """
        if page not in self._newest and len(self._newest) >= MOST_WAITING:
            raise Busy
        number = next(self._number)
        self._newest[page] = number
        try:
            async with self._turn:
                if self._newest.get(page) != number:
                    raise Superseded
                return await self._run(json.dumps({"task": task, **request}))
        finally:
            if self._newest.get(page) == number:
                del self._newest[page]

    async def _run(self, line: str) -> dict[str, Any]:
        done = False
        try:
            process = await self._started()
            assert process.stdin is not None
            assert process.stdout is not None
            process.stdin.write(line.encode() + b"\n")
            async with asyncio.timeout(self._limit):
                await process.stdin.drain()
                text = await process.stdout.readline()
            found: dict[str, Any] = json.loads(text) if text else {"failed": "the engine ended."}
            done = bool(text)
            return found
        finally:
            if not done:  # out of time, cancelled or broken: whatever it still says belongs to no one
                await self.stop()

    async def _started(self) -> asyncio.subprocess.Process:
        if self._process is None or self._process.returncode is not None:
            threads = dict.fromkeys(("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "MKL_NUM_THREADS"), "1")
            # -P: a file in the folder is never taken for a module; a session of its own: Ctrl+C is the server's to hear
            self._process = await asyncio.create_subprocess_exec(
                *(sys.executable, "-P", "-m", "reports.live.worker", str(self._folder)),
                stdin=asyncio.subprocess.PIPE,
                stdout=asyncio.subprocess.PIPE,
                env={**os.environ, **threads},
                limit=LONGEST_ANSWER,
                start_new_session=True,
            )
        return self._process

    async def stop(self) -> None:
        """End the process."""
        process, self._process = self._process, None
        if process is not None and process.returncode is None:
            process.kill()
            await process.wait()
