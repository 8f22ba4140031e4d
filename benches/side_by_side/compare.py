#!/usr/bin/env python3
"""This project's eigensolvers against LAPACK and SciPy, one thread, in one run.

    python3 benches/side_by_side/compare.py WORKER [n …]

WORKER is the program built by
    cargo build --release -p orbend-benches --features side-by-side --example side_by_side

Problems are written to a file that the worker reads. In every round all contenders take the same
problems one after the other, the order reversed each round. Each problem set is cut into chunks
short enough to run between two time slices (a round's time is the median over its chunks) or so
long that processor time is counted, so that other work on the machine disturbs little. Times are medians over the rounds, ratios are medians of
the ratios of each round. LAPACK is called directly (dsygv and dsygvd of the
OpenBLAS in SciPy's wheel, or of the library named by LAPACK_LIBRARY) from a loop compiled here
with `cc`, its workspace allocated once. SciPy is called as a user calls it: eigh(H, S).
"""

import ctypes
import glob
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
import scipy  # noqa: E402
import scipy.linalg  # noqa: E402

HERE = os.path.dirname(os.path.abspath(__file__))
DOUBLES = ctypes.POINTER(ctypes.c_double)


def problems(n, count, seed=1):
    """Like molecules: S from Gaussians at random places on a chain, H = 1.75 S (h_i + h_j)/2."""
    random = np.random.default_rng(seed)
    h, s = np.empty((count, n, n)), np.empty((count, n, n))
    for k in range(count):
        place = np.stack([np.arange(n) * 0.9, np.zeros(n), np.zeros(n)], axis=1)
        place += random.uniform(-1, 1, (n, 3)) * np.array([0.2, 1.0, 1.0])
        square = ((place[:, None, :] - place[None, :, :]) ** 2).sum(axis=2)
        s[k] = 0.95 * np.exp(-0.4 * square)
        np.fill_diagonal(s[k], 1.0)
        level = -15.0 - 5.0 * random.uniform(-1, 1, n)
        h[k] = 1.75 * s[k] * (level[:, None] + level[None, :]) / 2
        np.fill_diagonal(h[k], level)
    return h, s


def lapack(directory):
    """Addresses of dsygv and dsygvd, and the compiled loop."""
    name = os.environ.get("LAPACK_LIBRARY")
    found = [name] if name else glob.glob(os.path.join(os.path.dirname(scipy.__file__), "..", "scipy.libs", "libscipy_openblas*"))
    library = ctypes.CDLL(found[0])
    def routine(base):
        for pattern in ("scipy_{}_", "{}_"):
            try:
                return ctypes.cast(getattr(library, pattern.format(base)), ctypes.c_void_p)
            except AttributeError:
                continue
        raise SystemExit(f"{found[0]} has no {base}")
    loop = os.path.join(directory, "loop.so")
    subprocess.run(["cc", "-O2", "-shared", "-fPIC", "-o", loop, os.path.join(HERE, "loop.c")], check=True)
    many = ctypes.CDLL(loop).many
    many.restype = ctypes.c_int
    many.argtypes = [ctypes.c_void_p, ctypes.c_int, ctypes.c_int, ctypes.c_int, ctypes.c_char] + [ctypes.c_void_p] * 6 + [ctypes.c_int, ctypes.c_void_p, ctypes.c_int, ctypes.c_int, ctypes.c_void_p]
    return routine("dsygv"), routine("dsygvd"), many


def compare(worker_path, n, directory, kernels):
    count = 512 if n <= 12 else 256 if n <= 60 else 32 if n <= 200 else 4 if n <= 400 else 1
    chunk = 64 if n <= 6 else 32 if n <= 12 else 16 if n <= 30 else count
    rounds = 15 if n <= 60 else 9 if n <= 200 else 5
    h, s = problems(n, count)
    path = os.path.join(directory, f"problems_{n}")
    with open(path, "wb") as file:
        file.write(struct.pack("<QQ", n, count))
        for k in range(count):
            file.write(h[k].tobytes())
            file.write(s[k].tobytes())
    worker = subprocess.Popen([worker_path, path, str(chunk)], stdin=subprocess.PIPE, stdout=subprocess.PIPE, text=True)

    def ours(kernel):
        def run():
            worker.stdin.write(kernel + "\n")
            worker.stdin.flush()
            return statistics.median(float(x) for x in worker.stdout.readline().split()) / chunk
        return run

    gv, gvd, many = kernels
    lwork, liwork = 1 + 6 * n + 2 * n * n + 64 * n, 3 + 5 * n
    a, b, w = np.empty((n, n)), np.empty((n, n)), np.empty(n)
    seconds = np.empty(count // chunk)
    work, iwork = np.empty(lwork), np.empty(liwork, dtype=np.int32)

    pointers = [x.ctypes.data for x in (h, s, a, b, w, work)]

    def direct(routine, divide, job=b"V"):
        def run():
            failed = many(routine, divide, n, count, job, *pointers, lwork, iwork.ctypes.data, liwork, chunk, seconds.ctypes.data)
            assert not failed
            return statistics.median(seconds) / chunk
        return run

    def eigh():
        parts = []
        for part in range(count // chunk):
            start = time.thread_time()
            for k in range(part * chunk, (part + 1) * chunk):
                scipy.linalg.eigh(h[k], s[k])
            parts.append(time.thread_time() - start)
        return statistics.median(parts) / chunk

    contenders = {"scipy eigh": eigh, "dsygvd": direct(gvd, 1)}
    if n <= 200:
        contenders["dsygv"] = direct(gv, 0)
    if n <= 60:
        contenders["dsygvd 'N'"] = direct(gvd, 1, b"N")
    if count >= 8 and n <= 200:
        contenders["lanes"] = ours("lanes")
        contenders["lanes + smallest of S"] = ours("lanes-overlap")
        contenders["lanes, values only"] = ours("lanes-values")
    contenders["single"] = ours("single")
    contenders["single + smallest of S"] = ours("single-overlap")
    if n <= 200:
        contenders["single, checked"] = ours("checked")
    times = {name: [] for name in contenders}
    for k in range(rounds + 1):
        for name in list(contenders)[:: 1 if k % 2 else -1]:
            once = contenders[name]()
            if k:  # the first round warms up
                times[name].append(once * 1e6)
    worker.stdin.close()
    worker.wait()
    best = [min(x) for x in zip(*[times[x] for x in ("dsygv", "dsygvd") if x in times])]
    print(f"n = {n}: {count} problems, {rounds} rounds")
    for name, t in times.items():
        reference = statistics.median([x / y for x, y in zip(times["scipy eigh"], t)])
        against = statistics.median([x / y for x, y in zip(best, t)])
        values = statistics.median([x / y for x, y in zip(times.get("dsygvd 'N'", best), t)])
        spread = (max(t) - min(t)) / statistics.median(t)
        extra = f"  {values:6.2f}x dsygvd 'N'" if "values" in name and n <= 60 else ""
        print(f"  {name:24s} {statistics.median(t):12.3f} us (min {min(t):.3f}, spread {100 * spread:3.0f} %)  {reference:6.2f}x scipy  {against:6.2f}x best LAPACK{extra}")
    sys.stdout.flush()


def main():
    worker = sys.argv[1]
    sizes = [int(x) for x in sys.argv[2:]] or [6, 12, 18, 30, 60, 100, 200, 300, 1000, 2000]
    print(f"numpy {np.__version__}, scipy {scipy.__version__}")
    with tempfile.TemporaryDirectory() as directory:
        kernels = lapack(directory)
        for n in sizes:
            compare(worker, n, directory, kernels)


if __name__ == "__main__":
    main()
