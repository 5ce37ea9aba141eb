"""How Streamlit is told to serve: this machine only, nothing asked of the outside, no words of its own."""

import os
import signal
import socket
import sys
import threading
import time
import webbrowser
from collections.abc import Sequence

if __name__ == "__main__":  # until Streamlit minds Ctrl-C itself, Ctrl-C ends the process at once and without a traceback
    signal.signal(signal.SIGINT, signal.SIG_DFL)

from streamlit import net_util
from streamlit.web import cli

from app.start import launch
from app.start.environment import ROOT

FIXED = {
    "server.address": launch.HOST,
    "server.headless": "true",  # the browser is opened from here, without the questions that Streamlit asks at a first start
    "server.fileWatcherType": "none",  # nobody edits the program while using it
    "server.runOnSave": "false",
    "server.enableXsrfProtection": "true",
    "server.enableCORS": "true",
    "browser.gatherUsageStats": "false",
    "client.toolbarMode": "minimal",
    "client.showErrorLinks": "false",
    "logger.hideWelcomeMessage": "true",
    "logger.level": "warning",
    "global.developmentMode": "false",
}
ALLOWED_HOSTS = (launch.HOST, "localhost")  # another name in a request means that some web page speaks through the browser


def main(arguments: Sequence[str]) -> None:
    """Serve the dashboard until it is stopped."""
    options = launch.parse(arguments)
    keep_to_this_machine()
    threading.Thread(target=announce, args=(options.port, options.browser), daemon=True).start()
    cli.main(args=command(options.port), prog_name="python app")


def keep_to_this_machine() -> None:
    """Stop Streamlit from finding out this machine's addresses: for one it asks a server outside, for the other it points a socket there.

    It does so when a page of another origin knocks, to see whether the origin is the machine itself. Without them the page is refused.
    """
    net_util.get_external_ip = net_util.get_internal_ip = lambda: None


def command(port: int) -> list[str]:
    """Return the words for Streamlit's own command line."""
    flags = [f"--{name}={value}" for name, value in FIXED.items()]
    hosts = [f"--server.allowedHosts={host}" for host in ALLOWED_HOSTS]
    return ["run", str(ROOT / "app" / "main.py"), f"--server.port={port}", *flags, *hosts]


def announce(port: int, open_browser: bool) -> None:
    """Say where the dashboard is as soon as it answers, and open it."""
    while not answers(port):
        time.sleep(0.05)
    address = f"http://{launch.HOST}:{port}"
    sys.stdout.write(f"Crossgrain is open at {address} (Ctrl-C closes it).\n")
    sys.stdout.flush()
    if open_browser and has_screen():
        webbrowser.open(address)


def answers(port: int) -> bool:
    """Whether somebody listens at the port."""
    with socket.socket(socket.AF_INET, socket.SOCK_STREAM) as probe:
        return probe.connect_ex((launch.HOST, port)) == 0


def has_screen() -> bool:
    """Whether a browser window can be shown; on a remote Linux terminal a text browser would take over the terminal."""
    return not sys.platform.startswith("linux") or bool(os.environ.get("DISPLAY") or os.environ.get("WAYLAND_DISPLAY"))


if __name__ == "__main__":
    main(sys.argv[1:])
