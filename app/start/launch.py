"""What `python app` does: its options, a free port, the environment, and then the server."""

import argparse
import os
import socket
import sys
from collections.abc import Sequence

from app.start import environment
from app.start.problems import SetupProblem

HOST = "127.0.0.1"
FIRST_PORT = 8600
PORTS_TRIED = 50
# What the renderer of pictures brings along to fetch a browser of its own, which it then finds by itself.
FETCH = "from choreographer.cli._cli_utils import get_chrome_cli; get_chrome_cli()"


def main(arguments: Sequence[str]) -> int:
    """Set up what is missing and become the server; return the status where that cannot be."""
    options = parse(arguments)
    try:
        port = asked_port(options.port) if options.port is not None else free_port()
        python = environment.prepare([environment.APP_PINS])
    except SetupProblem as problem:
        sys.stderr.write(f"{problem}\n")
        return 1
    except KeyboardInterrupt:
        sys.stderr.write("\nStopped; the next start sets up afresh.\n")
        return 130
    if options.fetch:
        return environment.become(python, "-c", FETCH)
    wish = [] if options.browser else ["--no-browser"]
    return environment.become(python, "-m", "app.start.serve", "--port", str(port), *wish)


def parse(arguments: Sequence[str]) -> argparse.Namespace:
    """Return the options `port` (None for a free one), `browser` and `fetch`."""
    parser = argparse.ArgumentParser(prog="python app", description="Set up what is missing and open Crossgrain in the browser.")
    parser.add_argument("--port", type=int, metavar="N", help=f"the port to serve at (default: the first free one from {FIRST_PORT} on)")
    parser.add_argument("--no-browser", dest="browser", action="store_false", help="serve without opening the browser")
    parser.add_argument(
        "--fetch-browser", dest="fetch", action="store_true", help="fetch a browser that draws pictures, and do nothing else"
    )
    return parser.parse_args(arguments)


def asked_port(port: int) -> int:
    """Return the port that was asked for; raises SetupProblem when it cannot be had."""
    if not 1 <= port <= 65535:
        raise SetupProblem(f"{port} is not a port: --port takes a number from 1 to 65535, such as {FIRST_PORT}.")
    if not is_free(port):
        raise SetupProblem(f"Port {port} is taken or not allowed: choose another with --port, or leave --port out to get a free one.")
    return port


def free_port() -> int:
    """Return the first free port from FIRST_PORT on; raises SetupProblem when a long run of them is taken."""
    for port in range(FIRST_PORT, FIRST_PORT + PORTS_TRIED):
        if is_free(port):
            return port
    raise SetupProblem(f"Ports {FIRST_PORT} to {FIRST_PORT + PORTS_TRIED - 1} are all taken: name a free one with --port.")


def is_free(port: int) -> bool:
    """Whether a server could listen at the port of this machine's own address now."""
    with socket.socket(socket.AF_INET, socket.SOCK_STREAM) as probe:
        if os.name != "nt":  # a port whose last server has just ended counts as free; on Windows the option would mean something else
            probe.setsockopt(socket.SOL_SOCKET, socket.SO_REUSEADDR, 1)
        try:
            probe.bind((HOST, port))
        except OSError:
            return False
    return True
