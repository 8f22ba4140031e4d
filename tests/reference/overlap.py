"""High-precision reference for two-centre overlaps of Slater functions.

Writes overlap.csv beside this file. Formula: the integral over prolate spheroidal coordinates is
expanded as a polynomial in (xi, eta) and integrated term by term,

    int_1^oo  xi^i  e^(-p xi)    = e^(-p) i!/p^(i+1) sum_k p^k/k!
    int_-1^1  eta^j e^(-b eta)   = closed form (b != 0) or 2/(j+1), 0 (b = 0),

with mpmath at 140 digits (for |b| < 2 the power series instead of the closed form, which would lose
more than that near b = 0); cancellation of the polynomial takes at most some 40, so that more than
50 are left. One point in a hundred is computed again at 300 digits and compared. A sample is
checked against two-dimensional Gauss-Legendre quadrature of the Slater functions themselves,
written in spherical coordinates about each centre and sharing nothing with the above. Both local z
axes point from A to B. Derivatives with respect to R are central differences of the closed form
with a step of 1e-35 R.

Usage: python3 overlap.py        (needs mpmath; a few minutes)
"""

import random
from math import comb, factorial
from pathlib import Path

import mpmath
from mpmath import mp, mpf

mp.dps = 140


def multiply(f, g):
    out = {}
    for (i, j), a in f.items():
        for (k, l), b in g.items():
            out[i + k, j + l] = out.get((i + k, j + l), 0) + a * b
    return out


def power(f, n):
    out = {(0, 0): 1}
    for _ in range(n):
        out = multiply(out, f)
    return out


def legendre_terms(l, m):
    """2^l d^m P_l/dx^m as {power of x: integer}."""
    out = {}
    for k in range(l // 2 + 1):
        if l - 2 * k >= m:
            c = (-1) ** k * comb(l, k) * comb(2 * l - 2 * k, l)
            out[l - 2 * k - m] = c * factorial(l - 2 * k) // factorial(l - 2 * k - m)
    return out


CACHE = {}


def polynomial(na, la, nb, lb, m):
    key = na, la, nb, lb, m
    if key not in CACHE:
        ra, rb = {(1, 0): 1, (0, 1): 1}, {(1, 0): 1, (0, 1): -1}
        za, zb = {(0, 0): 1, (1, 1): 1}, {(0, 0): -1, (1, 1): 1}
        total = {}
        for ka, ca in legendre_terms(la, m).items():
            for kb, cb in legendre_terms(lb, m).items():
                # r^(n-1) P(z/r) (rho/r)^m = r^(n-1-m-k) z^k rho^m
                term = {(0, 0): ca * cb}
                for factor, n in ((za, ka), (zb, kb), (ra, na - m - ka), (rb, nb - m - kb)):
                    term = multiply(term, power(factor, n))
                term = multiply(term, power({(2, 0): 1, (0, 0): -1}, m))
                term = multiply(term, power({(0, 0): 1, (0, 2): -1}, m))
                for k, v in term.items():
                    total[k] = total.get(k, 0) + v
        CACHE[key] = {k: v for k, v in total.items() if v}
    return CACHE[key]


def norm(n, l, m, zeta):
    return mpmath.sqrt(
        (2 * zeta) ** (2 * n + 1) / mpf(factorial(2 * n))
        * mpf(2 * l + 1) / 2 * factorial(l - m) / mpf(factorial(l + m))
    )


class Auxiliary:
    """A and B integrals for one (zeta_a, zeta_b, R)."""

    def __init__(self, za, zb, r):
        self.h = mpf(r) / 2
        p, b = self.h * (za + zb), self.h * (za - zb)
        self.a = [mpmath.exp(-p) / p]
        for i in range(1, 15):
            self.a.append((mpmath.exp(-p) + i * self.a[-1]) / p)
        if abs(b) < 2:
            self.b = [mpf(0)] * 15
            term, k = mpf(2), 0  # 2 (-b)^k / k!
            while abs(term) > mpf(10) ** (-mp.dps - 10):
                for j in range(k % 2, 15, 2):
                    self.b[j] += term / (j + k + 1)
                k += 1
                term *= -b / k
        else:
            plus, minus = mpmath.exp(b), mpmath.exp(-b)
            self.b = [(plus - minus) / b]
            for j in range(1, 15):
                self.b.append(((-1) ** j * plus - minus + j * self.b[-1]) / b)


def overlap(na, la, za, nb, lb, zb, m, r, aux=None):
    za, zb = mpf(za), mpf(zb)
    aux = aux or Auxiliary(za, zb, r)
    total = sum(v * aux.a[i] * aux.b[j] for (i, j), v in polynomial(na, la, nb, lb, m).items())
    scale = norm(na, la, m, za) * norm(nb, lb, m, zb) / mpf(2) ** (la + lb)
    return scale * aux.h ** (na + nb + 1) * total


# m-th derivative of P_l as such, for the quadrature.
LEGENDRE = {
    (0, 0): lambda x: 1, (1, 0): lambda x: x, (1, 1): lambda x: 1,
    (2, 0): lambda x: (3 * x * x - 1) / 2, (2, 1): lambda x: 3 * x, (2, 2): lambda x: 3,
    (3, 0): lambda x: (5 * x**3 - 3 * x) / 2, (3, 1): lambda x: (15 * x * x - 3) / 2,
    (3, 2): lambda x: 15 * x, (3, 3): lambda x: 15,
}


def gauss_legendre(count=40):
    out = []
    for k in range(count):
        x = mpmath.cos(mpmath.pi * (k + mpf(3) / 4) / (count + mpf(1) / 2))
        for _ in range(7):
            before, now = mpf(1), x
            for n in range(2, count + 1):
                before, now = now, ((2 * n - 1) * x * now - (n - 1) * before) / n
            slope = count * (x * now - before) / (x * x - 1)
            x -= now / slope
        out.append((x, 2 / ((1 - x * x) * slope**2)))
    return out


def quadrature(na, la, za, nb, lb, zb, m, r, rule):
    """The same by numerical integration in xi and eta of the functions as such."""
    p = r * (za + zb) / 2
    edges = [mpf(1)] + [1 + k / p for k in (8, 25, 60, 130)]
    value = mpf(0)
    for low, high in zip(edges, edges[1:]):
        for x, w in rule:
            xi = (low + high) / 2 + (high - low) / 2 * x
            for eta, v in rule:
                ra, rb = r * (xi + eta) / 2, r * (xi - eta) / 2
                ca, cb = (1 + xi * eta) / (xi + eta), (xi * eta - 1) / (xi - eta)
                left = ra ** (na - 1) * mpmath.exp(-za * ra) * LEGENDRE[la, m](ca)
                right = rb ** (nb - 1) * mpmath.exp(-zb * rb) * LEGENDRE[lb, m](cb)
                sines = ((1 - ca * ca) * (1 - cb * cb)) ** (mpf(m) / 2)
                weight = w * v * (high - low) / 2 * (r / 2) ** 3 * (xi * xi - eta * eta)
                value += weight * left * right * sines
    return value * norm(na, la, m, za) * norm(nb, lb, m, zb)


def check():
    rng = random.Random(7)
    worst = mpf(0)
    with mp.workdps(40):
        rule = gauss_legendre()
    for _ in range(12):
        na, nb = rng.randint(1, 5), rng.randint(1, 5)
        la, lb = rng.randint(0, min(3, na - 1)), rng.randint(0, min(3, nb - 1))
        m = rng.randint(0, min(la, lb))
        za, zb, r = (mpf(repr(round(x, 3))) for x in (
            rng.uniform(0.5, 4), rng.uniform(0.5, 4), rng.uniform(0.5, 5)))
        exact = overlap(na, la, za, nb, lb, zb, m, r)
        with mp.workdps(30):
            numerical = quadrature(na, la, za, nb, lb, zb, m, r, rule)
        worst = max(worst, abs(exact - numerical))
    print("closed form against two-dimensional quadrature, worst of 12:", mpmath.nstr(worst, 3))
    assert worst < mpf("1e-20")


def points(rng, count):
    """(zeta_a, zeta_b, R) over the domain; doubles, so that the table is exact."""
    log = lambda low, high: float(low * (high / low) ** rng.random())
    corners = [(x, y, r) for x in (0.4, 16.0) for y in (0.4, 16.0) for r in (0.05, 1.0, 40.0)]
    out = list(corners)
    while len(out) < count:
        za, zb, r = log(0.4, 16), log(0.4, 16), log(0.05, 40)
        kind = len(out) % 10
        if kind == 0:
            zb = za  # beta = 0
        elif kind == 1:  # beta between 1e-15 and 1e-1
            zb = za * (1 + float(10 ** rng.uniform(-14.5, -1)))
        elif kind in (2, 3):  # |beta| around the switch of branches
            zb = za + rng.choice((-1, 1)) * 2 * rng.uniform(2, 8) / r
        elif kind == 4:
            r = rng.uniform(0.05, 0.2)
        elif kind == 5:  # where molecules are
            za, zb, r = rng.uniform(0.8, 3), rng.uniform(0.8, 3), rng.uniform(1, 8)
        elif kind == 6:
            r = rng.uniform(0.3, 4)
        if 0.4 <= zb <= 16:
            out.append((za, zb, r))
    return out


def main():
    check()
    rng = random.Random(20240229)
    functions = [(n, l) for n in range(1, 8) for l in range(min(n, 4))]
    every = [
        (na, la, nb, lb, m)
        for na, la in functions for nb, lb in functions for m in range(min(la, lb) + 1)
    ]
    small = [q for q in every if q[0] <= 4 and q[2] <= 4]
    rows = []
    queue_small, queue_all = [], []
    for za, zb, r in points(rng, 3000):
        # Each point: two integrals with n up to 4, two with n up to 7, dealt from shuffled packs.
        picks = []
        for pack, queue in ((small, queue_small), (every, queue_all)):
            for _ in range(2):
                if not queue:
                    queue.extend(rng.sample(pack, len(pack)))
                picks.append(queue.pop())
        step = mpf(r) * mpf("1e-35")
        here, up, down = (Auxiliary(mpf(za), mpf(zb), mpf(r) + s) for s in (0, step, -step))
        for q in picks:
            na, la, nb, lb, m = q
            value, above, below = (
                overlap(na, la, za, nb, lb, zb, m, None, aux) for aux in (here, up, down))
            slope = (above - below) / (2 * step)
            if len(rows) % 400 == 0:
                with mp.workdps(300):
                    again = overlap(na, la, za, nb, lb, zb, m, r)
                assert abs(value - again) < mpf("1e-50") * max(1, abs(again)), (q, za, zb, r)
            rows.append((na, la, nb, lb, m, repr(za), repr(zb), repr(r),
                         mpmath.nstr(value, 20), mpmath.nstr(slope, 20)))
    target = Path(__file__).with_name("overlap.csv")
    with target.open("w") as file:
        file.write("n_a,l_a,n_b,l_b,m,zeta_a,zeta_b,distance_bohr,overlap,slope\n")
        for row in rows:
            file.write(",".join(map(str, row)) + "\n")
    print(len(rows), "rows,", target.stat().st_size, "bytes")


main()
