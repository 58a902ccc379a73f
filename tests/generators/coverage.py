"""Makes studies from seeds, runs each, and counts how often its intervals cover the truth.

    python tests/generators/coverage.py --seeds 1000-1059 --out DIR --jobs 2
    python tests/generators/coverage.py --seeds 1000-1059 --out DIR --jobs 2 --halve-gauges

The second is the negative control: the same readings, but every gauge's error stated at half its size.
"""

from __future__ import annotations

import argparse
import json
import os
import subprocess
import sys
import time
from concurrent.futures import ThreadPoolExecutor
from pathlib import Path

if __name__ == "__main__":
    sys.path[0] = str(Path(__file__).parents[1])

from generators.campaign import write_study
from generators.score import Score, score, table

THREADS = ("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "MKL_NUM_THREADS", "NUMBA_NUM_THREADS")


def arguments(given: list[str] | None = None) -> argparse.Namespace:
    """The command line."""
    parser = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    parser.add_argument("--seeds", default="1000-1059", help="first-last, or a comma-separated list")
    parser.add_argument("--out", type=Path, required=True, help="folder for the studies and the table")
    parser.add_argument("--jobs", type=int, default=2, help="studies run side by side")
    parser.add_argument("--halve-gauges", action="store_true", help="state every gauge's error at half its size")
    parser.add_argument("--law", help="one law for all studies, instead of every law in turn")
    parser.add_argument("--quick", action="store_true", help="Laplace approximation instead of sampling")
    parser.add_argument("--again", action="store_true", help="run studies that have results already")
    return parser.parse_args(given)


def seeds(text: str) -> list[int]:
    """The seeds named by "1000-1059" or "1000,1003"."""
    found: list[int] = []
    for part in text.split(","):
        first, _, last = part.partition("-")
        found += range(int(first), int(last or first) + 1)
    return found


def one(seed: int, options: argparse.Namespace) -> tuple[Score | None, str]:
    """Write, run and score the study of one seed; without a score where it gave no results."""
    folder = options.out / f"s{seed}{'-halved' if options.halve_gauges else ''}"
    if options.again or not (folder / "truth.json").exists():
        write_study(folder, seed, options.law, 0.5 if options.halve_gauges else 1.0)
    path, start = folder / "results" / "results.json", time.perf_counter()
    said = ""
    if options.again or not path.exists():
        said = _run(folder, options.quick)
    took = time.perf_counter() - start
    if not path.exists():
        return None, f"{seed}: no results. {said[-2000:]}"
    results, true = (json.loads(p.read_text(encoding="utf-8")) for p in (path, folder / "truth.json"))
    found = score(results, true)
    missed = [f"{name} ({found.position.get(name, 1.0):.2f})" for name, c in found.covers.items() if not c]
    ratio = "none" if found.ratio is None else f"{found.ratio:.3f}"
    line = f"{seed} {true['law']}: {found.state}, ratio {ratio}, {took:.0f} s, missed: {', '.join(missed) or '-'}"
    return found, line


def _run(folder: Path, quick: bool) -> str:
    command = [sys.executable, "-m", "pullback", "run", str(folder), *(["--quick"] if quick else [])]
    environment = os.environ | dict.fromkeys(THREADS, "1")
    done = subprocess.run(command, capture_output=True, text=True, env=environment, check=False)
    (folder / "run.log").write_text(f"exit {done.returncode}\n{done.stdout}\n{done.stderr}", encoding="utf-8")
    return f"exit {done.returncode}: {done.stdout} {done.stderr}"


def main() -> int:
    """Run all, print the table; exit 1 where a study failed or a count is too low."""
    options = arguments()
    options.out.mkdir(parents=True, exist_ok=True)
    scores, failed = [], 0
    with ThreadPoolExecutor(options.jobs) as pool:
        for found, line in pool.map(lambda s: one(s, options), seeds(options.seeds)):
            print(line, flush=True)
            failed += found is None
            scores += [found] if found else []
    summary = table(scores) | {"without_results": failed, "halved": options.halve_gauges}
    name = "coverage-halved.json" if options.halve_gauges else "coverage.json"
    (options.out / name).write_text(json.dumps(summary, indent=1) + "\n", encoding="utf-8")
    return 0 if report(summary) and not failed else 1


def report(summary: dict) -> bool:
    """Print the table; whether every count is high enough."""
    for row, c in summary["rows"].items():
        remark = "" if c["enough"] else "  TOO FEW"
        print(f"{row:32s} {c['covered']:3d} of {c['of']:3d}, needed {c['needed']:3d}{remark}")
    print(f"median ratio of the 90/95 load to the true quantile: {summary['median_ratio']}")
    print(f"verdicts {summary['states']}, without results {summary['without_results']}")
    return all(c["enough"] for c in summary["rows"].values()) and (summary["median_ratio"] or 0.0) >= 0.7


if __name__ == "__main__":
    sys.exit(main())
