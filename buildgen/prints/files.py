"""Printed parts onto disk, in a process of their own beside the flat work."""

from __future__ import annotations

import pickle
import subprocess
import sys
import tempfile
import time
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from pathlib import Path

from buildgen.part import Kit, Part, Printed
from buildgen.prints.assembly import Piece, pieces_of
from buildgen.prints.brep import KernelMissing
from buildgen.prints.make import Job, Report
from buildgen.problems import DesignError, Problem

POLL_S = 0.02


@dataclass(frozen=True, eq=False)
class Work:
    """What the solids' process is to make: prints, and the whole aircraft where it is wanted.

    Both in one pickle: a recipe that serves a print and the aircraft is built once.
    """

    jobs: Sequence[Job]
    name: str = ""
    pieces: Sequence[Piece] = ()
    assembly: str | None = None


@dataclass(frozen=True, eq=False)
class Running:
    """The process that builds the solids."""

    process: subprocess.Popen[bytes] | None
    room: tempfile.TemporaryDirectory[str] | None

    def finish(self) -> tuple[Report, ...]:
        """Wait for the prints; the whole aircraft may still be in the making, see ``end``.

        Raises:
            DesignError: the CAD kernel cannot be loaded.
            RuntimeError: a solid could not be built; with the other process's own words.
        """
        if self.process is None or self.room is None:
            return ()
        result = Path(self.room.name) / "result"
        while self.process.poll() is None and not result.exists():
            time.sleep(POLL_S)
        if not result.exists():
            _, errors = self.process.communicate()
            raise RuntimeError(errors.decode("utf-8", "replace").strip())
        reports = pickle.loads(result.read_bytes())
        if isinstance(reports, KernelMissing):
            raise DesignError(Problem("", str(reports)))
        if isinstance(reports, Exception):
            raise RuntimeError(f"a printed part could not be built: {reports}")
        return tuple(reports)

    def end(self) -> None:
        """Wait for all of it.

        Raises:
            RuntimeError: the whole aircraft could not be built; with the other process's own words.
        """
        if self.process is None or self.room is None:
            return
        _, errors = self.process.communicate()
        self.room.cleanup()
        if self.process.returncode:
            raise RuntimeError(errors.decode("utf-8", "replace").strip())

    def stop(self) -> None:
        """End it: the packet is not to be finished."""
        if self.process is not None and self.process.poll() is None:
            self.process.kill()
            self.process.wait()
        if self.room is not None:
            self.room.cleanup()


def jobs_of(parts: Iterable[Part]) -> list[Job]:
    """One job for each distinct solid."""
    jobs: dict[str, Job] = {}
    for part in parts:
        if isinstance(part.form, Printed) and part.files_key not in jobs:
            form = part.form
            jobs[part.files_key] = Job(part.files_key, form.shape, form.print_up,
                                       form.settings.bed_mm)
    return list(jobs.values())


def start(parts: Iterable[Part], folder: Path) -> Running:
    """Begin to build every distinct printed solid into `folder`: STEP, STL and 3MF."""
    jobs = jobs_of(parts)
    return _begin(Work(jobs), folder) if jobs else Running(None, None)


def start_all(kit: Kit, folder: Path, assembly: Path) -> Running:
    """Begin to build the prints into `folder` and the whole aircraft into the STEP file."""
    work = Work(jobs_of(kit.of("print")), kit.title.name, pieces_of(kit.flying),
                str(assembly.resolve()))
    return _begin(work, folder)


def _begin(work: Work, folder: Path) -> Running:
    room = tempfile.TemporaryDirectory(prefix="buildgen-")
    (Path(room.name) / "jobs").write_bytes(pickle.dumps(work))
    process = subprocess.Popen(
        [sys.executable, "-m", "buildgen.prints", room.name, str(folder.resolve())],
        stdout=subprocess.DEVNULL, stderr=subprocess.PIPE,
        env=_environment(),
    )
    return Running(process, room)


def _environment() -> dict[str, str]:
    """This process's, with this very package on the path."""
    import os

    home = str(Path(__file__).resolve().parents[2])
    path = os.environ.get("PYTHONPATH", "")
    return {**os.environ, "PYTHONPATH": f"{home}{os.pathsep}{path}" if path else home}
