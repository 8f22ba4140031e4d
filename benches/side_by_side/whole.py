#!/usr/bin/env python3
"""Whole labelled points against SciPy's eigh alone, and whole processes, in one run.

    python3 benches/side_by_side/whole.py FOLDER

FOLDER holds the release builds `orbend` and `orbend-probe`:
    cargo build --release -p orbend -p orbend-probe

SciPy is called as a user calls it, eigh(H, S), on the H and S of the same sweep, one thread; it
makes no matrices, labels nothing and follows nothing. In every round all contenders run one after
the other, the order reversed each round; ratios are medians of the ratios of each round, the spread
is (largest - smallest)/median over the rounds.
"""

import os
import statistics
import struct
import subprocess
import sys
import tempfile
import time

os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")
os.environ.setdefault("OMP_NUM_THREADS", "1")

import numpy as np  # noqa: E402
import scipy.linalg  # noqa: E402

ROUNDS = 15
# name, what it is, functions, target ratio to SciPy, gain of the blocks alone (AVX-512, with vectors)
CASES = [
    ("ah2", "H2S bend, C2v", 512, 20, 2.2),
    ("ab2", "SiF2 bend, C2v", 512, 10, 3.5),
    ("ab3", "PF3 pyramid, C3v", 256, None, None),
    ("benzene", "benzene C-H stretch, D6h", 128, 5, 25.0),
]
COMMANDS = [
    ("formula to SVG", ["sweep", "SiF2", "--bend", "2-1-3=80..180:2", "--out", "a.svg"]),
    ("formula to JSON", ["sweep", "SiF2", "--bend", "2-1-3=80..180:2", "--json"]),
    ("one geometry", ["levels", "PF3"]),
    ("shape", ["shape", "SiF2"]),
    ("values in use", ["params", "Si", "F"]),
]


def spread(times):
    return 100 * (max(times) - min(times)) / statistics.median(times)


class Worker:
    def __init__(self, probe, case, threads):
        self.process = subprocess.Popen(
            [probe, "serve", case, str(threads)], stdin=subprocess.PIPE, stdout=subprocess.PIPE, text=True
        )

    def __call__(self, what):
        self.process.stdin.write(what + "\n")
        self.process.stdin.flush()
        return float(self.process.stdout.readline())

    def close(self):
        self.process.stdin.close()
        self.process.wait()


def points(probe, directory):
    print(f"whole labelled points, {ROUNDS} rounds, one thread; us per point, median (spread)")
    for name, words, count, target, blocks in CASES:
        path = os.path.join(directory, name)
        subprocess.run([probe, "matrices", name, str(count), path], check=True)
        with open(path, "rb") as file:
            n, found = struct.unpack("<QQ", file.read(16))
            numbers = np.fromfile(file).reshape(found, 2, n, n)
        one, two = Worker(probe, name, 1), Worker(probe, name, 2)

        def eigh():
            start = time.perf_counter()
            for h, s in numbers:
                scipy.linalg.eigh(h, s)
            return (time.perf_counter() - start) / found

        contenders = {
            "scipy": eigh,
            "labelled": lambda: one("blocked"),
            "whole": lambda: one("unblocked"),
            "two": lambda: two("blocked"),
        }
        times = {key: [] for key in contenders}
        for k in range(ROUNDS + 1):
            for key in list(contenders)[:: 1 if k % 2 else -1]:
                once = 1e6 * contenders[key]()
                if k:  # the first round warms up
                    times[key].append(once)
        one.close()
        two.close()
        ratio = lambda a, b: statistics.median([x / y for x, y in zip(times[a], times[b])])
        text = lambda key: f"{statistics.median(times[key]):8.2f} ({spread(times[key]):3.0f} %)"
        wanted = f" (wanted {target})" if target else ""
        print(f"  {words}, n = {n}")
        print(f"    SciPy eigh alone {text('scipy')}   labelled point {text('labelled')}   {ratio('scipy', 'labelled'):6.1f}x{wanted}")
        gain = f" (0.7 of {blocks} is {0.7 * blocks:.1f})" if blocks else ""
        print(f"    whole matrices, no labels {text('whole')}   gain of the blocks {ratio('whole', 'labelled'):5.2f}x{gain}")
        print(f"    two threads {text('two')}   {ratio('labelled', 'two'):5.2f}x (wanted 1.8)")
        sys.stdout.flush()


def run(words, directory):
    """Seconds, and the highest resident memory in MiB."""
    start = time.perf_counter()
    process = subprocess.Popen(words, cwd=directory, stdout=subprocess.DEVNULL)
    _, status, usage = os.wait4(process.pid, 0)
    seconds = time.perf_counter() - start
    process.returncode = os.waitstatus_to_exitcode(status)
    assert process.returncode == 0, words
    return seconds, usage.ru_maxrss / 1024


def processes(orbend, directory):
    print(f"whole processes, 21 runs each; ms, median (least, spread); the program is {os.path.getsize(orbend) / 1e6:.1f} MB")
    for name, words in COMMANDS:
        times = [1e3 * run([orbend, *words], directory)[0] for _ in range(21)]
        print(f"  {name:16s} {statistics.median(times):7.1f} ({min(times):.1f}, {spread(times):3.0f} %)   orbend {' '.join(words)}")
    print("a million points of H2S to CSV; s and MiB")
    for jobs in ("1", "2"):
        words = [orbend, "sweep", "H2S", "--bend", "2-1-3=90..180:0.00009", "--out", f"{jobs}.csv", "--jobs", jobs]
        found = [run(words, directory) for _ in range(3)]
        size = os.path.getsize(os.path.join(directory, f"{jobs}.csv")) / 1e6
        print(f"  --jobs {jobs}: {statistics.median(x for x, _ in found):6.2f} s (3 runs, spread {spread([x for x, _ in found]):.0f} %), {max(x for _, x in found):.0f} MiB, {size:.0f} MB written")
    same = open(os.path.join(directory, "1.csv"), "rb").read() == open(os.path.join(directory, "2.csv"), "rb").read()
    print(f"  the same bytes: {'yes' if same else 'NO'}")


def main():
    folder = os.path.abspath(sys.argv[1])
    with tempfile.TemporaryDirectory() as directory:
        points(os.path.join(folder, "orbend-probe"), directory)
        processes(os.path.join(folder, "orbend"), directory)


if __name__ == "__main__":
    main()
