"""The browser that draws figures: started when the first is asked for and kept, so that later ones come at once."""

import asyncio
import atexit
import json
import logging
from collections.abc import Coroutine, Sequence
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

    def _done(self, work: Coroutine[Any, Any, Any], patience: float | None = None) -> Any:
        return asyncio.run_coroutine_threadsafe(work, self._loop).result(patience)

    def close(self) -> None:
        """Close the browser; one that is gone already, or will not go, is left to the system."""
        atexit.unregister(self.close)
        try:
            self._done(self._browser.close(), PARTING)
        except Exception:  # whatever closing fails with, the browser is not needed any longer, and nobody waits for it
            logging.getLogger(__name__).info("The browser for pictures did not close by itself.", exc_info=True)
        finally:
            self._loop.call_soon_threadsafe(self._loop.stop)


_one_at_a_time = Lock()


@lru_cache(maxsize=1)
def _kept(path: str) -> Renderer:
    return Renderer(path)


def draw(asked: Sequence[Asked], path: str) -> tuple[bytes, ...]:
    """Draw figures by the browser at this path, in a new one where the one that was kept has gone since."""
    with _one_at_a_time:
        fresh = not _kept.cache_info().currsize
        try:
            return _kept(path).draw(asked)
        except Exception:
            if fresh:
                raise
            _kept(path).close()
            _kept.cache_clear()
            return _kept(path).draw(asked)
