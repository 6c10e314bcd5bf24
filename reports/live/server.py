"""The server of the page: its files, its answers, and how it starts and ends."""

from __future__ import annotations

import json
import secrets
import socket
from collections.abc import AsyncIterator, Awaitable, Callable
from contextlib import asynccontextmanager
from importlib import resources
from pathlib import Path
from typing import Any

import uvicorn
from starlette.applications import Starlette
from starlette.middleware import Middleware
from starlette.middleware.base import BaseHTTPMiddleware, RequestResponseEndpoint
from starlette.requests import Request
from starlette.responses import JSONResponse, PlainTextResponse, Response
from starlette.routing import Route

from fatigue.case.reader import parse_toml, read_text
from fatigue.case.shipped import demo_case, demo_names
from reports.live.engine import Busy, Engine, Superseded
from reports.live.form import form
from reports.live.guard import HEADERS, LARGEST_BODY, Guard, Rates, TooLarge, bounded_body, page_of
from reports.live.places import BAD_NAME, case_names, inside, is_name
from spectra.faults import Fault, InputFaults

ANSWER_LIMIT, REPORT_LIMIT = 5.0, 60.0
"""Longest time of one answer and of a report [s]."""
TASKS = ("answer", "fits", "save", "report")
KINDS = {".html": "text/html", ".css": "text/css", ".js": "text/javascript", ".svg": "image/svg+xml"}
REPORT_POLICY = "sandbox allow-scripts; default-src 'none'; style-src 'unsafe-inline'; script-src 'unsafe-inline'"
"""A report runs its own sorting, as a page that belongs to nobody: it cannot ask this server for anything."""


def page_files() -> dict[str, tuple[bytes, str]]:
    """Return the page's own files with their types, by name."""
    folder = resources.files("reports.live.static")
    return {
        file.name: (file.read_bytes(), KINDS[suffix])
        for file in folder.iterdir()
        if (suffix := Path(file.name).suffix) in KINDS
    }


def opening_tables(case: Path | None) -> dict[str, Any]:
    """Return the tables of the case to begin with.

    Raises
    ------
    InputFaults
        If there is no such file or it is not TOML; other faults are shown on the page.
    """
    path = case or demo_case()
    tables = parse_toml(read_text(path), str(path))
    try:
        json.dumps(tables, allow_nan=False)
    except (TypeError, ValueError):
        raise InputFaults(str(path), [Fault("", "holds a date, NaN or infinity, which no key takes.")]) from None
    return tables


class Live:
    """Everything one server knows.

    Parameters
    ----------
    folder : Path
        Where it was started: cases are read from and written to here.
    opening : dict
        Tables of the case to begin with.
    guard : Guard
    answer_limit : float
        [s]
    """

    def __init__(self, folder: Path, opening: dict[str, Any], guard: Guard, answer_limit: float) -> None:
        self.folder, self.opening, self.guard = folder.resolve(), opening, guard
        self.files = page_files()
        # a curve of fits or a report takes longer than an answer, which need not wait for it
        self.quick, self.slow = Engine(self.folder, answer_limit), Engine(self.folder, REPORT_LIMIT)

    async def page(self, request: Request) -> Response:
        """Return the page."""
        body, kind = self.files["page.html"]
        return Response(body, media_type=kind)

    async def file(self, request: Request) -> Response:
        """Return one of the page's own files."""
        if request.path_params["name"] not in self.files:
            return PlainTextResponse("There is no such file.\n", 404)
        body, kind = self.files[request.path_params["name"]]
        return Response(body, media_type=kind)

    async def start(self, request: Request) -> Response:
        """Return the case to begin with, what a case may hold, and what can be opened."""
        return JSONResponse(
            {"document": self.opening, "form": form(), "demos": demo_names(), "cases": case_names(self.folder)}
        )

    async def open(self, request: Request) -> Response:
        """Return a shipped demo's or a case file's tables."""
        demo, name = request.query_params.get("demo"), request.query_params.get("case", "")
        try:
            if demo is not None:
                return JSONResponse({"document": opening_tables(demo_case(demo))})
            if name not in case_names(self.folder) or (self.folder / name).stat().st_size > LARGEST_BODY:
                return PlainTextResponse("There is no such case here.\n", 404)
            return JSONResponse({"document": opening_tables(self.folder / name)})
        except (KeyError, OSError):
            return PlainTextResponse("There is no such case here.\n", 404)
        except InputFaults as error:
            return PlainTextResponse(f"{error}\n", 422)

    async def ask(self, request: Request) -> Response:
        """Compute an answer or life against fit; write a case or a report."""
        task = request.url.path.removeprefix("/ask/")
        try:
            given = json.loads(await bounded_body(request), parse_constant=_no_constant)
            document = given["document"]
            if not isinstance(document, dict):
                raise ValueError
            wanted: dict[str, Any] = {"document": document}
            if task in ("save", "report"):
                wanted["name"] = given["name"]
            if task == "save":
                wanted["replace"] = given.get("replace") is True
        except TooLarge:
            return PlainTextResponse(f"More than {LARGEST_BODY} bytes.\n", 413, {"Connection": "close"})
        except (KeyError, TypeError, ValueError, RecursionError):
            return PlainTextResponse("This is no request of the page.\n", 400)
        if "name" in wanted and not is_name(wanted["name"]):
            return JSONResponse({"faults": [{"where": "name", "problem": BAD_NAME, "remedy": ""}]})
        engine = self.quick if task in ("answer", "save") else self.slow
        try:
            return JSONResponse(await engine.ask(f"{page_of(request)} {task}", task, **wanted))
        except Superseded:
            return PlainTextResponse("A newer change came in.\n", 409)
        except Busy:
            return PlainTextResponse("Too many pages are waiting.\n", 503, {"Retry-After": "1"})
        except TimeoutError:
            return PlainTextResponse("This case takes too long for the page; try `faying life`.\n", 504)

    async def written(self, request: Request) -> Response:
        """Return a report that was written here."""
        name = request.query_params.get("name", "")
        path = self.folder / f"{name} report" / "report.html"
        if not is_name(name) or not inside(self.folder, f"{name} report/report.html") or not path.is_file():
            return PlainTextResponse("There is no such report here.\n", 404)
        return Response(path.read_bytes(), media_type="text/html", headers={"Content-Security-Policy": REPORT_POLICY})

    async def check(self, request: Request, call_next: RequestResponseEndpoint) -> Response:
        """Refuse what does not come from the page; say on every answer what a browser may do with it."""
        refused = self.guard.refusal(request, open_file=request.url.path.startswith("/static/"))
        if refused is not None:
            return refused
        response = await call_next(request)
        for name, value in HEADERS.items():
            response.headers.setdefault(name, value)
        return response

    @asynccontextmanager
    async def running(self, app: Starlette) -> AsyncIterator[None]:
        """Keep the engines for as long as the server runs."""
        try:
            yield
        finally:
            await self.quick.stop()
            await self.slow.stop()

    def app(self) -> Starlette:
        """Return the application."""
        asked: Callable[[Request], Awaitable[Response]] = self.ask
        routes = [
            Route("/", self.page),
            Route("/static/{name}", self.file),
            Route("/start", self.start),
            Route("/open", self.open),
            Route("/report", self.written),
            *(Route(f"/ask/{task}", asked, methods=["POST"]) for task in TASKS),
        ]
        return Starlette(
            routes=routes, middleware=[Middleware(BaseHTTPMiddleware, dispatch=self.check)], lifespan=self.running
        )


def _no_constant(word: str) -> float:
    raise ValueError(word)


def listening(port: int) -> socket.socket:
    """Return a socket that hears this machine only; port 0 takes any free one."""
    own = socket.socket(socket.AF_INET, socket.SOCK_STREAM)
    own.setsockopt(socket.SOL_SOCKET, socket.SO_REUSEADDR, 1)
    try:
        own.bind(("127.0.0.1", port))
    except OSError:
        own.close()
        raise
    return own


def serve(
    folder: Path,
    opening: dict[str, Any],
    port: int,
    on_ready: Callable[[str], None],
    answer_limit: float = ANSWER_LIMIT,
) -> None:
    """Serve the page until interrupted.

    Parameters
    ----------
    folder : Path
    opening : dict
        Tables of the case to begin with.
    port : int
        0 takes any free one.
    on_ready : callable
        Called with the page's address once the server listens.
    answer_limit : float
        Longest time of one answer [s].
    """
    own = listening(port)
    with own:
        port = own.getsockname()[1]
        token = secrets.token_urlsafe(24)
        live = Live(folder, opening, Guard(token, port, Rates()), answer_limit)
        server = uvicorn.Server(
            uvicorn.Config(
                live.app(),
                log_level="warning",
                access_log=False,
                server_header=False,
                ws="none",
                timeout_keep_alive=20,
                timeout_graceful_shutdown=2,
                h11_max_incomplete_event_size=16_384,
                http="h11",
            )
        )
        own.listen(128)
        on_ready(f"http://127.0.0.1:{port}/?token={token}")
        server.run(sockets=[own])
