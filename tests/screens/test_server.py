"""The rules every answer of the server follows, asked without a network."""

from __future__ import annotations

import gzip

import pytest

from advisor.screens.app import make_app
from advisor.screens.server import guard, is_loopback
from screens.made_up import MadeUpPlant, advice

PACKED = {"Accept-Encoding": "gzip", "Host": "127.0.0.1"}


def client(host):
    app = make_app(MadeUpPlant(advice()))
    guard(app, host)
    return app.server.test_client()


def test_answers_to_other_machines_are_packed_and_say_the_same():
    path = "/_dash-dependencies"
    far = client("192.0.2.7").get(path, headers=PACKED)
    near = client("127.0.0.1").get(path, headers=PACKED)
    assert far.headers["Content-Encoding"] == "gzip" and "Content-Encoding" not in near.headers
    assert len(far.data) < len(near.data) / 3
    assert gzip.decompress(far.data) == near.data
    plain = client("192.0.2.7").get(path, headers={"Accept-Encoding": "identity"})
    assert plain.data == near.data


def test_every_answer_forbids_what_comes_from_elsewhere():
    for host in ("127.0.0.1", "192.0.2.7"):
        for path in ("/", "/review", "/_dash-dependencies", "/nowhere"):
            policy = client(host).get(path, headers=PACKED).headers["Content-Security-Policy"]
            assert "default-src 'self'" in policy and "unsafe-eval" not in policy


@pytest.mark.parametrize("name", ["plant.example", "127.0.0.1.plant.example", "192.0.2.7"])
def test_on_loopback_a_foreign_name_is_refused(name):
    assert client("127.0.0.1").get("/", headers={"Host": name}).status_code == 403
    assert client("127.0.0.1").get("/", headers={"Host": "localhost:8617"}).status_code == 200


@pytest.mark.parametrize(
    ("host", "own"),
    [("127.0.0.1", True), ("localhost", True), ("::1", True), ("0.0.0.0", False),  # noqa: S104
     ("192.0.2.7", False), ("plant.example", False)],
)  # fmt: skip
def test_loopback_is_known_from_other_addresses(host, own):
    assert is_loopback(host) is own
