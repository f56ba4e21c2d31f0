"""Lets requests wait, without a thread each, for what a thread does."""

import asyncio
import threading
from collections.abc import Callable


class Bell:
    """Rung by any thread; wakes every coroutine that waits."""

    def __init__(self) -> None:
        self._waiting: set[tuple[asyncio.AbstractEventLoop, asyncio.Event]] = set()
        # Also rung by a signal's handler, which may interrupt the thread that holds it.
        self._lock = threading.RLock()

    def ring(self) -> None:
        """Wake all that wait now."""
        with self._lock:
            for loop, event in self._waiting:
                if not loop.is_closed():
                    loop.call_soon_threadsafe(event.set)

    async def heard(self, changed: Callable[[], bool], seconds: float) -> None:
        """Wait until ``changed`` says yes, looking again at each ring, at most so many seconds."""
        waiter = asyncio.get_running_loop(), asyncio.Event()
        with self._lock:
            self._waiting.add(waiter)
        try:
            async with asyncio.timeout(seconds):
                while not changed():
                    await waiter[1].wait()
                    waiter[1].clear()
        except TimeoutError:
            return
        finally:
            with self._lock:
                self._waiting.discard(waiter)
