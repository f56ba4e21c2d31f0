"""What does the work of a batch: the processors of this computer, or a cluster that is there already."""

import os
import signal
from collections.abc import Iterator
from concurrent.futures import ProcessPoolExecutor, as_completed
from concurrent.futures.process import BrokenProcessPool
from contextlib import contextmanager
from functools import partial
from importlib import import_module
from multiprocessing import get_context
from typing import Any

from curvelab.errors import InputError
from curvelab.reading.batch import Engine, Job, Outcome, Work

ONE_THREAD = ("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "MKL_NUM_THREADS")
"""Every processor has a page of its own: threads within a page would only be in each other's way."""
PATIENCE = "15s"
"""How long a cluster may take to answer."""


def processes(count: int | None = None) -> Engine:
    """The processors of this computer, all of them where ``count`` is not given."""
    return partial(_over_processes, count or os.cpu_count() or 1)


def _over_processes(count: int, work: Work, jobs: list[Job]) -> Iterator[tuple[Job, Outcome | None]]:
    """A page that kills its process is asked again alone, so that the others are not blamed for it."""
    waiting = list(jobs)
    while waiting:
        done: set[Job] = set()
        for job, outcome in _until_broken(count, work, waiting):
            done.add(job)
            yield job, outcome
        waiting = [job for job in waiting if job not in done]
        # The pool is filled in order, a few ahead: whoever broke it is among the first that are left.
        suspects, waiting = waiting[: 2 * count + 1], waiting[2 * count + 1 :]
        for job in suspects:
            yield job, next((outcome for _, outcome in _until_broken(1, work, [job])), None)


def _until_broken(count: int, work: Work, jobs: list[Job]) -> Iterator[tuple[Job, Outcome]]:
    """The outcomes until all are done or a process is killed."""
    with _single_threaded(), _pool(min(count, len(jobs))) as pool:
        try:
            futures = {pool.submit(work, job): job for job in jobs}
            for future in as_completed(list(futures)):
                yield futures.pop(future), future.result()
        except BrokenProcessPool:
            return
        finally:
            pool.shutdown(wait=False, cancel_futures=True)


def _pool(count: int) -> ProcessPoolExecutor:
    # Started afresh: the libraries of images have threads that do not survive being copied.
    return ProcessPoolExecutor(count, mp_context=get_context("spawn"), initializer=_leave_stopping_to_the_parent)


def _leave_stopping_to_the_parent() -> None:
    signal.signal(signal.SIGINT, signal.SIG_IGN)


@contextmanager
def _single_threaded() -> Iterator[None]:
    """Processes that are started within have one thread each."""
    before = {name: os.environ.get(name) for name in ONE_THREAD}
    os.environ.update(dict.fromkeys(ONE_THREAD, "1"))
    try:
        yield
    finally:
        for name, value in before.items():
            if value is None:
                del os.environ[name]
            else:
                os.environ[name] = value


def cluster(address: str) -> Engine:
    """A running cluster by the address of its scheduler; its workers see the same folders.

    Raises
    ------
    InputError
        The library for it is not installed, or nothing answers at the address.
    """
    try:
        distributed: Any = import_module("distributed")  # an extra that few need
    except ImportError:
        raise InputError(
            "Reading over a cluster needs the extra 'cluster'", "", "pip install 'curvelab[cluster]'"
        ) from None
    try:
        client: Any = distributed.Client(address, timeout=PATIENCE, set_as_default=False)
    except (OSError, ValueError) as error:
        raise InputError(
            f"No cluster answers at '{address}'", "The address of its scheduler, such as tcp://host:8786"
        ) from error
    return partial(_over_cluster, distributed, client)


def _over_cluster(distributed: Any, client: Any, work: Work, jobs: list[Job]) -> Iterator[tuple[Job, Outcome | None]]:
    with client, client.as_current():
        # Not kept by what they are called: a page is read anew when it is asked for anew.
        futures = dict(zip(client.map(work, jobs, pure=False), jobs, strict=True))
        for future in distributed.as_completed(list(futures)):
            try:
                outcome: Outcome | None = future.result()
            except distributed.KilledWorker:
                outcome = None
            yield futures.pop(future), outcome
