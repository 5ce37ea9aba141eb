"""The server as it runs: at this machine's own address only, and without a word to the outside."""

import os
import signal
import socket
import subprocess
import sys
import urllib.request
from collections.abc import Iterator
from contextlib import contextmanager

import pytest

from app.start import environment, launch, serve
from tests.sources import ROOT

# The server with an ear at every connection that this process or its threads begin, and every name that they look up.
WATCHED = """
import sys
def outside(event, args):
    if event in ("socket.connect", "socket.sendto", "socket.getaddrinfo"):
        asked = args[1] if event != "socket.getaddrinfo" else args
        host = asked[0] if isinstance(asked, tuple) else asked
        if host not in ("127.0.0.1", "localhost", "::1", None):
            print("OUTSIDE", event, asked, file=sys.stderr, flush=True)
sys.addaudithook(outside)
from app.start import serve
serve.main(sys.argv[1:])
"""

STRANGER = (
    "GET /_stcore/stream HTTP/1.1\r\nHost: {host}\r\nUpgrade: websocket\r\nConnection: Upgrade\r\n"
    "Sec-WebSocket-Key: dGhlIHNhbXBsZSBub25jZQ==\r\nSec-WebSocket-Version: 13\r\nOrigin: http://{origin}\r\n\r\n"
)


@contextmanager
def running(*words: str) -> Iterator[tuple[int, subprocess.Popen[str]]]:
    """Run a command until the block ends; yield its port once it has said where it is."""
    port = launch.free_port()
    process = subprocess.Popen(
        [sys.executable, *words, "--no-browser", "--port", str(port)],
        cwd=ROOT,
        env=environment.variables(),
        stdin=subprocess.DEVNULL,
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        text=True,
    )
    try:
        assert process.stdout is not None
        assert f"http://127.0.0.1:{port}" in process.stdout.readline()
        yield port, process
    finally:
        process.kill()
        process.communicate()


def answer(port: int, path: str) -> bytes:
    """Return what the server sends for a path."""
    with urllib.request.urlopen(f"http://127.0.0.1:{port}{path}", timeout=30) as response:
        return response.read()


def knock(port: int, host: str, origin: str) -> str:
    """Return the first line with which the server answers a page that wants to talk to it."""
    with socket.create_connection(("127.0.0.1", port), timeout=30) as line:
        line.sendall(STRANGER.format(host=host, origin=origin).encode())
        return line.recv(200).decode("latin-1").partition("\r\n")[0]


def test_nothing_is_asked_of_the_outside() -> None:
    with running("-c", WATCHED) as (port, process):
        assert answer(port, "/_stcore/health") == b"ok"
        assert b"<html" in answer(port, "/")
        assert " 101 " in knock(port, f"127.0.0.1:{port}", f"127.0.0.1:{port}")
        assert " 403 " in knock(port, f"127.0.0.1:{port}", "stranger.example")
        assert " 403 " in knock(port, "stranger.example", "stranger.example")
        process.terminate()
        _, complaints = process.communicate(timeout=60)
    assert not [line for line in complaints.splitlines() if line.startswith("OUTSIDE")]


@pytest.mark.skipif(sys.platform != "linux", reason="only Linux gives this machine a second address of its own, 127.0.0.2")
def test_no_other_address_is_served() -> None:
    with running("-m", "app.start.serve") as (port, _), pytest.raises(ConnectionRefusedError):
        socket.create_connection(("127.0.0.2", port), timeout=30)


@pytest.mark.skipif(os.name == "nt", reason="Windows sends Ctrl-C to whole consoles")
@pytest.mark.skipif(not environment.PRIVATE.holds([environment.APP_PINS]), reason="`python app` has not set up this checkout")
def test_ctrl_c_ends_the_command_quietly() -> None:
    with running("app") as (_, process):
        process.send_signal(signal.SIGINT)
        _, complaints = process.communicate(timeout=60)
    assert process.returncode in (0, -signal.SIGINT)  # ended by Streamlit, or by the system where Streamlit was not ready yet
    assert not complaints


def test_what_the_safety_rests_on_is_said_on_the_command_line() -> None:
    words = serve.command(8600)
    assert {"--server.address=127.0.0.1", "--browser.gatherUsageStats=false", "--server.allowedHosts=127.0.0.1"} <= set(words)
