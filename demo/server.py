"""A small static server on loopback, with the headers and compressed files that the app is made for.

Used by demo/start.py, by the browser tests and by the benchmark. It serves only this machine.
"""

from __future__ import annotations

import hashlib
import http.server
import json
import socket
import subprocess
import sys
import threading
from collections.abc import Callable
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any
from urllib.parse import unquote, urlsplit

ROOT = Path(__file__).resolve().parents[1]
DIST = ROOT / "web" / "dist"
LOOPBACK = "127.0.0.1"

MEDIA = {
    ".html": "text/html; charset=utf-8",
    ".js": "text/javascript; charset=utf-8",
    ".mjs": "text/javascript; charset=utf-8",
    ".css": "text/css; charset=utf-8",
    ".json": "application/json; charset=utf-8",
    ".webmanifest": "application/manifest+json; charset=utf-8",
    ".svg": "image/svg+xml",
    ".png": "image/png",
    ".wasm": "application/wasm",
    ".zip": "application/zip",
    ".whl": "application/zip",
    ".gz": "application/gzip",
    ".txt": "text/plain; charset=utf-8",
}
# These names carry a hash of their content and never change.
FOREVER_FOLDERS = ("py/", "packages/", "snapshot/")
POLICY = (ROOT / "web" / "build" / "csp.txt").read_text("utf-8").strip() + "; frame-ancestors 'none'"


@dataclass
class Reply:
    """What a test puts in place of a file: another body, another status, or a body cut short."""

    body: bytes = b""
    status: int = 200
    cut_at: int | None = None


@dataclass
class Served:
    """One answered request, for counting bytes."""

    path: str
    status: int
    body_bytes: int
    encoding: str


def _is_forever(name: str) -> bool:
    stem, _, extension = name.rpartition(".")
    mark = stem.rpartition("-")[2]
    is_hashed = len(mark) == 8 and all(letter in "0123456789abcdef" for letter in mark)
    return name.startswith(FOREVER_FOLDERS) or (is_hashed and extension in ("js", "css"))


@dataclass
class Site:
    """One folder served on one loopback port; `port=0` takes a free one."""

    dist: Path = DIST
    port: int = 0
    is_developer: bool = False
    intercept: Callable[[str], Reply | None] | None = None
    served: list[Served] = field(default_factory=list)
    _server: http.server.ThreadingHTTPServer | None = None
    _open: set[socket.socket] = field(default_factory=set)

    @property
    def url(self) -> str:
        return f"http://{LOOPBACK}:{self.port}/"

    def start(self) -> Site:
        site = self

        class Handler(_Handler):
            owner = site

        self._server = _Server((LOOPBACK, self.port), Handler)
        self.port = self._server.server_address[1]
        threading.Thread(target=self._server.serve_forever, kwargs={"poll_interval": 0.05}, daemon=True).start()
        return self

    def stop(self) -> None:
        """Stop listening and cut every open connection, as a pulled plug would."""
        if self._server is None:
            return
        self._server.shutdown()
        self._server.server_close()
        self._server = None
        for connection in list(self._open):
            try:
                connection.shutdown(socket.SHUT_RDWR)
            except OSError:
                pass

    def serve_until_interrupted(self) -> None:
        try:
            threading.Event().wait()
        except KeyboardInterrupt:
            self.stop()

    def file(self, name: str) -> Path | None:
        """The file of a request path, or None; nothing outside the folder is ever reached."""
        if self.is_developer and name.startswith("__dev/"):
            return _developer_file(name.removeprefix("__dev/"))
        path = (self.dist / (name or "index.html")).resolve()
        return path if path.is_relative_to(self.dist.resolve()) and path.is_file() else None


class _Server(http.server.ThreadingHTTPServer):
    daemon_threads = True
    request_queue_size = 64

    def handle_error(self, request: Any, client_address: Any) -> None:
        """A browser that closes a connection early is no news."""
        if not isinstance(sys.exception() if hasattr(sys, "exception") else sys.exc_info()[1], OSError):
            super().handle_error(request, client_address)


class _Handler(http.server.BaseHTTPRequestHandler):
    owner: Site
    protocol_version = "HTTP/1.1"
    timeout = 60

    def setup(self) -> None:
        super().setup()
        self.connection.setsockopt(socket.IPPROTO_TCP, socket.TCP_NODELAY, 1)
        self.owner._open.add(self.connection)

    def finish(self) -> None:
        self.owner._open.discard(self.connection)
        super().finish()

    def do_GET(self) -> None:
        self._answer(with_body=True)

    def do_HEAD(self) -> None:
        self._answer(with_body=False)

    def _answer(self, with_body: bool) -> None:
        name = unquote(urlsplit(self.path).path).lstrip("/")
        reply = self.owner.intercept(name) if self.owner.intercept else None
        if reply is not None:
            self._send(name, reply.status, reply.body, "", with_body, cut_at=reply.cut_at)
            return
        if self.owner.is_developer and name == "__dev/index.json":
            self._send(name, 200, json.dumps(_developer_index()).encode(), "", with_body)
            return
        path = self.owner.file(name)
        if path is None:
            self._send(name, 404, b"not found", "", with_body)
            return
        accepted = self.headers.get("Accept-Encoding", "")
        for encoding, ending in (("br", ".br"), ("gzip", ".gz")):
            packed = path.with_name(path.name + ending)
            if encoding in accepted and packed.is_file():
                self._send(name, 200, packed.read_bytes(), encoding, with_body)
                return
        self._send(name, 200, path.read_bytes(), "", with_body)

    def _send(self, name: str, status: int, body: bytes, encoding: str, with_body: bool, cut_at: int | None = None) -> None:
        tag = f'"{hashlib.sha256(body).hexdigest()[:20]}"'
        if status == 200 and self.headers.get("If-None-Match") == tag:
            status, body = 304, b""
        shown = Path(name or "index.html")
        self.send_response(status)
        self.send_header("Content-Type", MEDIA.get(shown.suffix, "application/octet-stream"))
        self.send_header("Content-Length", str(len(body)))
        if encoding:
            self.send_header("Content-Encoding", encoding)
        self.send_header("Vary", "Accept-Encoding")
        self.send_header("ETag", tag)
        self.send_header("Cache-Control", "public, max-age=31536000, immutable" if status in (200, 304) and _is_forever(name) else "no-cache")
        self.send_header("Content-Security-Policy", POLICY)
        self.send_header("X-Content-Type-Options", "nosniff")
        self.send_header("Referrer-Policy", "no-referrer")
        self.send_header("Cross-Origin-Opener-Policy", "same-origin")
        self.end_headers()
        sent = body if cut_at is None else body[:cut_at]
        if with_body:
            self.wfile.write(sent)
        self.owner.served.append(Served(name, status, len(sent) if with_body else 0, encoding))
        if cut_at is not None:
            self.close_connection = True

    def log_message(self, format: str, *args: Any) -> None:
        """Quiet: the address is printed once, and a test counts in `served`."""


# ---- the developer way: Pyodide as npm ships it, wheels as they are, our wheel made fresh -------------


def _wheel_folders() -> list[Path]:
    return [*sorted((ROOT / "web" / ".cache").glob("wheels-*")), ROOT / "web" / "vendor" / "numpy"]


def _wheel(prefix: str) -> Path | None:
    for folder in _wheel_folders():
        for path in sorted(folder.glob("*.whl")):
            if path.name.startswith(prefix):
                return path
    return None


def _own_wheel() -> Path:
    out = ROOT / "web" / ".cache" / "developer"
    script = ROOT / "web" / "build" / "python" / "own_wheel.py"
    made = subprocess.run([sys.executable, str(script), str(out)], check=True, capture_output=True, text=True)
    return out / made.stdout.strip()


def _developer_index() -> dict[str, Any]:
    names = ["flexcache", "flexparser", "platformdirs", "typing_extensions", "attrs", "cattrs", "pint"]
    found = [path.name for path in map(_wheel, (f"{name}-" for name in names)) if path]
    loader = [path.name for path in map(_wheel, ("packaging-", "micropip-")) if path]
    return {"loader": loader, "wheels": found, "own": _own_wheel().name, "numpy": (_wheel("numpy-") or Path()).name}


def _developer_file(name: str) -> Path | None:
    folder, _, base = name.partition("/")
    if "/" in base or base.startswith("."):
        return None
    if folder == "pyodide":
        path = ROOT / "web" / "node_modules" / "pyodide" / base
        return path if path.is_file() else None
    if folder == "wheels" and base.startswith("beadwright-"):
        path = ROOT / "web" / ".cache" / "developer" / base
        return path if path.is_file() else None
    return _wheel(base) if folder == "wheels" else None
