"""Which requests are answered, by rule."""

from __future__ import annotations

import socket
import time

import pytest

from sheetgen.galley.requests import BoundedReader, refusal, site_path


@pytest.mark.parametrize("host", ["127.0.0.1:8930", "localhost:8930", "LOCALHOST:8930", "[::1]:8930"])
def test_own_names(host):
    assert refusal({"Host": host}, 8930) is None
    assert refusal({"Host": host, "Origin": f"http://{host}", "Sec-Fetch-Site": "same-origin"}, 8930) is None


@pytest.mark.parametrize(
    "headers, status",
    [
        ({"Host": "localhost"}, 421),
        ({"Host": "localhost:8931"}, 421),
        ({"Host": "attacker.example:8930"}, 421),
        ({"Host": "127.0.0.1.attacker.example:8930"}, 421),
        ({"Host": "0.0.0.0:8930"}, 421),
        ({"Host": "127.0.0.1:8930@attacker.example"}, 421),
        ({}, 421),
        ({"Host": "localhost:8930", "Origin": "http://attacker.example"}, 403),
        ({"Host": "localhost:8930", "Origin": "null"}, 403),
        ({"Host": "localhost:8930", "Origin": "https://localhost:8930"}, 403),
        ({"Host": "localhost:8930", "Origin": "http://localhost:3000"}, 403),
        ({"Host": "localhost:8930", "Sec-Fetch-Site": "cross-site"}, 403),
        ({"Host": "localhost:8930", "Sec-Fetch-Site": "same-site"}, 403),
        ({"Host": "localhost:8930", "Content-Length": "5"}, 413),
        ({"Host": "localhost:8930", "Transfer-Encoding": "chunked"}, 413),
    ],
)
def test_forged_requests(headers, status):
    assert refusal(headers, 8930)[0] == status


def test_port_80_may_go_unsaid():
    assert refusal({"Host": "localhost"}, 80) is None


@pytest.mark.parametrize(
    "target, path",
    [
        ("/", "index.html"),
        ("/index.html", "index.html"),
        ("/materials/copper.html?x=/../..#top", "materials/copper.html"),
        ("/figures/copper/density-of-states.svg", "figures/copper/density-of-states.svg"),
        ("/a%20b.txt", "a b.txt"),
        ("/..", None),
        ("/../etc/passwd", None),
        ("/materials/../../etc/passwd", None),
        ("/%2e%2e/etc/passwd", None),
        ("/%2e%2e%2fetc%2fpasswd", None),
        ("/..%5c..%5cwindows", None),
        ("/..\\..\\windows", None),
        ("//etc/passwd", None),
        ("/materials//copper.html", None),
        ("/./index.html", None),
        ("/index.html%00.txt", None),
        ("/%ff%fe", None),
        ("/%0d%0aSet-Cookie:x", None),
        ("http://127.0.0.1:8930/index.html", None),
        ("*", None),
        ("", None),
    ],
)
def test_paths_stay_below_the_site(target, path):
    assert site_path(target) == path


def test_a_path_that_was_encoded_twice_is_decoded_once():
    assert site_path("/%252e%252e/x") == "%2e%2e/x"


def test_reading_ends_with_the_bytes_and_with_the_time():
    ours, theirs = socket.socketpair()
    with ours, theirs:
        theirs.sendall(b"x" * 100)
        reader = BoundedReader(ours, limit=64, seconds=0.2)
        buffer = bytearray(100)
        assert (reader.readinto(buffer), reader.exceeded) == (64, False)
        assert (reader.readinto(buffer), reader.exceeded) == (0, True)
        patient = BoundedReader(ours, limit=1000, seconds=0.2)
        began = time.monotonic()
        patient.readinto(buffer)
        with pytest.raises(TimeoutError):
            while True:
                theirs.send(b".")
                time.sleep(0.03)
                patient.readinto(bytearray(1))
        assert time.monotonic() - began < 2
