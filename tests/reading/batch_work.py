"""Work for batches that is done at once, in a module of its own so that other processes find it."""

import os
import signal

from curvelab.reading.batch import Entry, Job, Outcome


def quick(job: Job) -> Outcome:
    entry = Entry(source=job.source, page=job.page, plot=1, outcome="read", curves=2, files=(f"{job.stem}.json",))
    return Outcome(job=job, entries=(entry,), contents={f"{job.stem}.json": b"{}"})


def deadly(job: Job) -> Outcome:
    """Kills its own process on the page called so, as the system does when memory runs out."""
    if "deadly" in job.source:
        os.kill(os.getpid(), signal.SIGKILL)
    return quick(job)
