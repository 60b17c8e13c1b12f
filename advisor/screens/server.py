"""The pages behind a production server: loopback by default, nothing loaded from elsewhere."""

from __future__ import annotations

import errno
import gzip
import ipaddress
import threading
from collections.abc import Callable
from functools import lru_cache
from pathlib import Path
from typing import Any

from cheroot.wsgi import Server
from dash import Dash
from flask import Response, request

from advisor.errors import AdvisorError, FaultyInput
from advisor.screens.app import make_app
from advisor.screens.plant_source import PlantSource

HOST, PORT = "127.0.0.1", 8617
_THREADS = 8
_LOOPBACK_NAMES = ("localhost", "127.0.0.1", "[::1]")
_WORTH_PACKING = 2000  # bytes; a shorter answer fits into two packets as it is
_PACKED_KINDS = ("text/", "application/json", "application/javascript")


class PageServer:
    """A server of the pages of one plant folder; bound when made, serving once ``serve`` is called.

    Raises FaultyInput for a faulty folder, an address that is not this machine's, a port in use.
    """

    def __init__(self, plant: Path, host: str = HOST, port: int = PORT) -> None:
        self.source = PlantSource(plant)
        app = make_app(self.source)
        guard(app, host)
        self._server = Server((host, port), app.server, numthreads=_THREADS)
        try:
            self._server.prepare()
        except OSError as error:
            raise _refused(error, host, port) from None

    @property
    def address(self) -> str:
        """Address to open in a browser."""
        host, port = self._server.bind_addr[:2]
        return f"http://{f'[{host}]' if ':' in host else host}:{port}/"

    def serve(self) -> None:
        """Answer until ``stop`` is called or the program is interrupted."""
        threading.Thread(target=self._look_ahead, daemon=True).start()
        try:
            self._server.serve()
        finally:
            self._server.stop()

    def stop(self) -> None:
        """End ``serve``, from another thread."""
        self._server.stop()

    def _look_ahead(self) -> None:
        """Work out what the first visitor will ask for; what is refused is told on the page."""
        for ask in (
            lambda: self.source.current_advice(None, None),
            lambda: self.source.rest_of_shift(None, self.source.now()),
        ):
            try:
                ask()
            except AdvisorError:
                continue


def is_loopback(host: str) -> bool:
    """Whether only this machine can reach ``host``."""
    if host == "localhost":
        return True
    try:
        return ipaddress.ip_address(host).is_loopback
    except ValueError:
        return False


def guard(app: Dash, host: str) -> None:
    """Give ``app``, served at ``host``, its rules: load nothing from elsewhere, answer on loopback
    to loopback names alone, pack what goes to other machines.
    """
    policy = "; ".join(
        (
            "default-src 'self'",
            "script-src 'self' " + " ".join(app.csp_hashes()),
            "style-src 'self' 'unsafe-inline'",  # figures and the page set styles of their own
            "img-src 'self' data: blob:",
            "font-src 'self' data:",
            "object-src 'none'",
            "base-uri 'none'",
            "frame-ancestors 'none'",
            "form-action 'self'",
        )
    )

    def only_this_machine() -> Any:
        # A page elsewhere could point a name of its own here and read the answers.
        name = request.host.rsplit(":", 1)[0] if not request.host.endswith("]") else request.host
        if is_loopback(host) and name not in _LOOPBACK_NAMES:
            return Response("This address is for this machine only.", 403, mimetype="text/plain")
        return None

    def with_policy(response: Response) -> Response:
        response.headers["Content-Security-Policy"] = policy
        response.headers["X-Content-Type-Options"] = "nosniff"
        response.headers["Referrer-Policy"] = "no-referrer"
        return response

    def packed(response: Response) -> Response:
        # On this machine packing would cost more time than it saves.
        if is_loopback(host) or not request.accept_encodings["gzip"]:
            return response
        if response.status_code != 200 or "Content-Encoding" in response.headers:
            return response
        if not (response.mimetype or "").startswith(_PACKED_KINDS):
            return response
        response.direct_passthrough = False
        body = response.get_data()
        if len(body) >= _WORTH_PACKING:
            response.set_data(_gzip(body))
            response.headers["Content-Encoding"] = "gzip"
            response.vary.add("Accept-Encoding")
        return response

    before: Callable[..., Any] = app.server.before_request
    after: Callable[..., Any] = app.server.after_request
    before(only_this_machine)
    after(with_policy)
    after(packed)


@lru_cache(maxsize=64)  # the scripts of the pages are asked for by every reader
def _gzip(body: bytes) -> bytes:
    return gzip.compress(body, 6, mtime=0)


def _refused(error: OSError, host: str, port: int) -> AdvisorError:
    # The server passes the reason on in words only.
    if error.errno == errno.EADDRINUSE or f"[Errno {errno.EADDRINUSE}]" in str(error):
        return FaultyInput.of(
            "port-in-use",
            f"Port {port} is in use by another program, or by a dashboard that still runs.",
            f"Open http://{host}:{port}/ to see, or give another port with --port.",
            field="--port",
            value=str(port),
        )
    return FaultyInput.of(
        "no-address",
        f"The pages cannot be served at {host} port {port}: {error}.",
        "Give an address of this machine with --host and a port above 1023 with --port.",
        field="--host",
        value=host,
    )
