"""The browser that draws figures: started when the first is asked for and kept, so that later ones come at once."""

import asyncio
import atexit
import json
from collections.abc import Coroutine, Sequence
from concurrent.futures import wait
from functools import lru_cache
from threading import Lock, Thread
from typing import Any

import kaleido

NOWHERE = "http://127.0.0.1:9"  # the discard port of this machine: whatever the browser asks of the network ends here
PARTING = 5  # seconds that the browser gets to close

Asked = tuple[str, tuple[tuple[str, str | float], ...]]  # a figure as text, and format and size as the renderer wants them


class Renderer:
    """One browser with a loop of events in a thread of its own, since the caller's may already run one."""

    def __init__(self, path: str) -> None:
        """Start the browser at this path."""
        self._loop = asyncio.new_event_loop()
        Thread(target=self._loop.run_forever, name="pictures", daemon=True).start()
        # Neither formulas nor fonts come from elsewhere: no MathJax, and a proxy that leads nowhere.
        self._browser = kaleido.Kaleido(path=path, mathjax=False, proxy_server=NOWHERE)
        self._done(self._browser.open())
        atexit.register(self.close)

    def draw(self, asked: Sequence[Asked]) -> tuple[bytes, ...]:
        """Draw figures, one after the other."""
        return self._done(self._draw(asked))

    async def _draw(self, asked: Sequence[Asked]) -> tuple[bytes, ...]:
        return tuple([await self._browser.calc_fig(json.loads(figure), dict(options)) for figure, options in asked])

    def _done(self, work: Coroutine[Any, Any, Any]) -> Any:
        return asyncio.run_coroutine_threadsafe(work, self._loop).result()

    @property
    def alive(self) -> bool:
        """Whether the browser still runs."""
        return bool(self._browser.subprocess.poll() is None)

    def close(self) -> None:
        """Close the browser; one that will not go within a few seconds is left to the system."""
        wait([asyncio.run_coroutine_threadsafe(self._browser.close(), self._loop)], PARTING)
        self._loop.call_soon_threadsafe(self._loop.stop)


_one_at_a_time = Lock()


@lru_cache(maxsize=1)
def _kept(path: str) -> Renderer:
    return Renderer(path)


def draw(asked: Sequence[Asked], path: str) -> tuple[bytes, ...]:
    """Draw figures by the browser at this path, by a new one where the one that was kept has gone since."""
    with _one_at_a_time:
        if not _kept(path).alive:
            _kept.cache_clear()
        return _kept(path).draw(asked)
