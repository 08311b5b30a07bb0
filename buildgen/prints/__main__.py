"""The solids' own process: python -m buildgen.prints ROOM FOLDER"""

import pickle
import sys
from pathlib import Path

from buildgen.prints.assembly import assembly_text
from buildgen.prints.brep import KernelMissing, kernel
from buildgen.prints.make import make


def main(room: Path, folder: Path) -> None:
    """Build every job of the room into the folder; leave the reports, or what went wrong."""
    work = pickle.loads((room / "jobs").read_bytes())
    built: dict[int, object] = {}
    result: object
    try:
        result = [make(job, folder, built) for job in work.jobs]
        if work.assembly is not None:
            kernel()
    except (KernelMissing, ValueError) as error:
        result = error
    # Whole or not at all: the other process looks for this file.
    (room / "writing").write_bytes(pickle.dumps(result))
    (room / "writing").rename(room / "result")
    if work.assembly is not None and not isinstance(result, Exception):
        text = assembly_text(work.name, work.pieces, built)
        Path(work.assembly).write_text(text, "utf-8", newline="\n")


if __name__ == "__main__":
    main(Path(sys.argv[1]), Path(sys.argv[2]))
