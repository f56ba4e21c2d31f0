"""What of a batch is done already: a line for each job, so that a batch that was stopped goes on where it stopped."""

import json
import os
from collections.abc import Iterator
from dataclasses import asdict
from pathlib import Path
from typing import Any, BinaryIO

from curvelab.errors import InputError
from curvelab.reading.batch import DONE, Entry, Job, Outcome


class Journal:
    """The lines of a folder of results.

    Parameters
    ----------
    folder : Path
        Made when the first line is written.
    library : str
        Where the devices are stored as well, empty for nowhere; what was done for another library is not done here.
    """

    def __init__(self, folder: Path, library: str = "") -> None:
        self._folder, self._library = folder, library
        self._done = dict(self._lines())

    def entries(self, job: Job) -> tuple[Entry, ...] | None:
        """What became of a job before; None where it has to be done: never done, changed since, or a file is gone."""
        entries = self._done.get((job.source, job.page, job.key)) if job.key else None
        if entries is None or any(not (self._folder / name).is_file() for each in entries for name in each.files):
            return None
        return entries

    def add(self, outcome: Outcome) -> None:
        """Write the files of a job, then its line, whole or not at all.

        Raises
        ------
        InputError
            The folder cannot be written.
        """
        job = outcome.job
        line = {"source": job.source, "page": job.page, "key": job.key, "library": self._library,
                "entries": [asdict(entry) for entry in outcome.entries]}  # fmt: skip
        try:
            for name, content in outcome.contents.items():
                self._write(self._folder / name, content)
            self._folder.mkdir(parents=True, exist_ok=True)
            with (self._folder / DONE).open("a+b") as file:
                file.write(b"\n" * self._is_cut_off(file) + json.dumps(line).encode("ascii") + b"\n")
        except OSError as error:
            raise InputError(
                f"Results cannot be written to '{self._folder}': {error.strerror}", "", "Choose another with --output"
            ) from error

    @staticmethod
    def _is_cut_off(file: BinaryIO) -> bool:
        """Whether the last line lacks its end, as when the batch was stopped while it was written."""
        if file.seek(0, os.SEEK_END) == 0:
            return False
        file.seek(-1, os.SEEK_END)
        return file.read(1) != b"\n"

    def _write(self, path: Path, content: bytes) -> None:
        path.parent.mkdir(parents=True, exist_ok=True)
        part = path.with_name(path.name + ".part")
        part.write_bytes(content)
        part.replace(path)

    def _lines(self) -> Iterator[tuple[tuple[str, int, str], tuple[Entry, ...]]]:
        """Lines of this library; one that was cut off when the batch was stopped is passed over."""
        try:
            lines = (self._folder / DONE).read_text(encoding="utf-8").splitlines()
        except OSError:
            return
        for line in lines:
            try:
                told = json.loads(line)
                entries = tuple(_entry(each) for each in told["entries"])
                if told["library"] == self._library:
                    yield (told["source"], told["page"], told["key"]), entries
            except (ValueError, KeyError, TypeError):
                continue


def _entry(told: dict[str, Any]) -> Entry:
    fields: dict[str, Any] = {name: tuple(value) if isinstance(value, list) else value for name, value in told.items()}
    return Entry(**fields)
