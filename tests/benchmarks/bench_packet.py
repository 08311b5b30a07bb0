"""Wall time of the demo packet as a multiple of importing the CAD kernel, in the same run.

    python tests/benchmarks/bench_packet.py [DESIGN]
"""

from __future__ import annotations

import subprocess
import sys
import tempfile
import time


def wall(*command: str) -> float:
    """Seconds of one command."""
    start = time.perf_counter()
    subprocess.run(command, check=True, stdout=subprocess.DEVNULL)
    return time.perf_counter() - start


def main() -> None:
    """Print the ratio; the first run of each warms the disk and compiled code."""
    design = sys.argv[1] if len(sys.argv) > 1 else "marram"
    reference = (sys.executable, "-c", "import cadquery")
    with tempfile.TemporaryDirectory() as room:
        packet = (sys.executable, "-m", "buildgen", "packet", design, "-o", room)
        wall(*reference)
        wall(*packet)
        references = [wall(*reference) for _ in range(3)]
        packets = [wall(*packet) for _ in range(3)]
    base, made = min(references), min(packets)
    print(f"import of the CAD kernel {base:.2f} s; packet of {design} {made:.2f} s;"
          f" ratio {made / base:.2f}")


if __name__ == "__main__":
    main()
