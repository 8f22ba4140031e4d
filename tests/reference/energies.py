"""Writes energies.json: level energies from an independent engine.

    pip install numpy scipy mpmath ase
    python tests/reference/energies.py

Nothing here is shared with the crates: two-centre overlaps are three-dimensional quadratures in prolate spheroidal
coordinates, with the real harmonics evaluated as Cartesian polynomials at the grid points in the laboratory frame (no
closed form, no recursion, no rotation matrix); the eigenproblem is LAPACK's dsygvd through scipy.

The quadrature: with mu, nu, phi about the line A-B (distance R), an overlap is a polynomial in mu and nu times
exp(-alpha mu) exp(-beta nu), so Gauss-Laguerre in mu - 1 is exact, Gauss-Legendre in nu converges exponentially and equal
steps in phi are exact. Nodes come from mpmath, sums are in extended precision. The script checks itself: the largest change
of an overlap on enlarging the grid, and of an eigenvalue on repeating the problem with 40 digits, are written to the file.

Formulas: H_ij = K' S_ij (H_ii + H_jj)/2 between atoms, zero between different functions of one atom; `constant` K' = K
(Hoffmann, J. Chem. Phys. 39, 1397 (1963)), `weighted` K' = K + D^2 + D^4 (1 - K), D = (H_ii - H_jj)/(H_ii + H_jj)
(Ammeter, Buergi, Thibeault, Hoffmann, J. Am. Chem. Soc. 100, 3686 (1978)). Further forms, on the smaller s,p molecules:
`geometric-mean` H_ij = -K S_ij sqrt(H_ii H_jj) (Ballhausen, Gray, Inorg. Chem. 1, 111 (1962)); `cusachs` S (2 - |S|)
(H_ii + H_jj)/2 on the sigma and pi overlaps of each pair (Cusachs, J. Chem. Phys. 43, S157 (1965)); `distance-dependent`
K(R) = 1 + (K - 1 + D^2 - D^4 (K - 1)) exp(-delta (R - d0)), d0 = n/zeta + n'/zeta', delta = 0.35 per angstrom (Calzaferri,
Forss, Kamber, J. Phys. Chem. 93, 5366 (1989)); `anderson` K = 2.25 exp(-0.13 R/angstrom) (J. Chem. Phys. 62, 1187 (1975)).
"""

import json
import math
from functools import lru_cache
from pathlib import Path

import mpmath
import numpy as np
import scipy.linalg
from ase.build import molecule as g2_molecule

BOHR = 0.529177210903  # angstrom, CODATA 2018
LD = np.longdouble

# Published values (main group: Hoffmann group papers; double-zeta d: Richardson, Nieuwpoort, Powell, Edgell, J. Chem. Phys.
# 36, 1057 (1962) and Basch, Gray, Theor. Chim. Acta 4, 367 (1966)). All from memory: this file only needs both engines to be
# given the same numbers. Shell: (n, l, H_ii in eV, [(zeta in 1/bohr, coefficient), ...]); d coefficients are renormalised.
PARAMETERS = {
    "H": [(1, 0, -13.6, [(1.3, 1.0)])],
    "B": [(2, 0, -15.2, [(1.3, 1.0)]), (2, 1, -8.5, [(1.3, 1.0)])],
    "C": [(2, 0, -21.4, [(1.625, 1.0)]), (2, 1, -11.4, [(1.625, 1.0)])],
    "N": [(2, 0, -26.0, [(1.95, 1.0)]), (2, 1, -13.4, [(1.95, 1.0)])],
    "O": [(2, 0, -32.3, [(2.275, 1.0)]), (2, 1, -14.8, [(2.275, 1.0)])],
    "F": [(2, 0, -40.0, [(2.425, 1.0)]), (2, 1, -18.1, [(2.425, 1.0)])],
    "Si": [(3, 0, -17.3, [(1.383, 1.0)]), (3, 1, -9.2, [(1.383, 1.0)])],
    "P": [(3, 0, -18.6, [(1.75, 1.0)]), (3, 1, -14.0, [(1.3, 1.0)])],
    "S": [(3, 0, -20.0, [(2.122, 1.0)]), (3, 1, -13.3, [(1.827, 1.0)])],
    "Cl": [(3, 0, -26.3, [(2.183, 1.0)]), (3, 1, -14.2, [(1.733, 1.0)])],
    "Br": [(4, 0, -22.07, [(2.588, 1.0)]), (4, 1, -13.1, [(2.131, 1.0)])],
    "Ti": [(4, 0, -8.97, [(1.075, 1.0)]), (4, 1, -5.44, [(1.075, 1.0)]), (3, 2, -10.81, [(4.55, 0.4206), (1.4, 0.7839)])],
    "Fe": [(4, 0, -9.1, [(1.9, 1.0)]), (4, 1, -5.32, [(1.9, 1.0)]), (3, 2, -12.6, [(5.35, 0.5366), (1.8, 0.6678)])],
    "Ni": [(4, 0, -9.17, [(1.825, 1.0)]), (4, 1, -5.15, [(1.125, 1.0)]), (3, 2, -13.49, [(5.75, 0.5683), (2.0, 0.6292)])],
    "Pt": [(6, 0, -9.077, [(2.554, 1.0)]), (6, 1, -5.475, [(2.554, 1.0)]), (5, 2, -12.59, [(6.013, 0.6334), (2.696, 0.5513)])],
}
# Polarised hydrogen: a 2p shell at its exact hydrogenic level, -13.6/4 eV.
HYDROGEN_2P = (2, 1, -3.4, [(1.3, 1.0)])

FORMS = ("constant", "weighted")
KS = (1.5, 1.75, 2.0)
# Forms with the K that goes with them; K is not used by the second and the last.
FURTHER = (("geometric-mean", 2.0), ("cusachs", 1.75), ("distance-dependent", 1.75), ("anderson", 1.75))


# ---------------------------------------------------------------- quadrature

@lru_cache(None)
def laguerre(n):
    """Nodes and weights of Gauss-Laguerre, n points, in extended precision."""
    with mpmath.workdps(40):
        start = np.polynomial.laguerre.laggauss(n)[0]
        nodes = [mpmath.findroot(lambda x: mpmath.laguerre(n, 0, x), mpmath.mpf(float(s))) for s in start]
        weights = [x / ((n + 1) * mpmath.laguerre(n + 1, 0, x)) ** 2 for x in nodes]
        return extended(nodes), extended(weights)


@lru_cache(None)
def legendre(n):
    """Nodes and weights of Gauss-Legendre on [-1, 1], n points, in extended precision."""
    with mpmath.workdps(40):
        start = np.polynomial.legendre.leggauss(n)[0]
        nodes = [mpmath.findroot(lambda x: mpmath.legendre(n, x), mpmath.mpf(float(s))) for s in start]
        slope = lambda x: n * (x * mpmath.legendre(n, x) - mpmath.legendre(n - 1, x)) / (x * x - 1)
        weights = [2 / ((1 - x * x) * slope(x) ** 2) for x in nodes]
        return extended(nodes), extended(weights)


def extended(values):
    return np.array([LD(mpmath.nstr(v, 30)) for v in values])


PI = LD("3.14159265358979323846264338327950288")


def harmonics(l, x, y, z):
    """Real solid harmonics r^l Y_lm, normalised on the sphere, order m = 0, +1, -1, +2, -2."""
    if l == 0:
        return [np.sqrt(1 / (4 * PI)) * np.ones_like(x)]
    if l == 1:
        c = np.sqrt(3 / (4 * PI))
        return [c * z, c * x, c * y]
    c = np.sqrt(15 / (4 * PI))
    return [
        np.sqrt(5 / (16 * PI)) * (2 * z * z - x * x - y * y),
        c * x * z, c * y * z, c / 2 * (x * x - y * y), c * x * y,
    ]


def norm(n, zeta):
    """(2 zeta)^(n + 1/2) / sqrt((2n)!)."""
    return (2 * zeta) ** n * np.sqrt(2 * zeta) / np.sqrt(LD(math.factorial(2 * n)))


def primitive_block(na, la, za, nb, lb, zb, displacement, size):
    """Overlaps of all components of two Slater shells, B displaced from A by `displacement` (bohr, laboratory frame)."""
    n_mu, n_nu, n_phi = size
    za, zb = LD(za), LD(zb)
    distance = np.sqrt((displacement ** 2).sum())
    axis = displacement / distance
    seed = np.zeros(3, dtype=LD)
    seed[np.argmin(np.abs(axis))] = 1
    first = np.cross(seed, axis)
    first /= np.sqrt((first ** 2).sum())
    second = np.cross(axis, first)

    alpha = distance * (za + zb) / 2
    beta = distance * (za - zb) / 2
    t, wt = laguerre(n_mu)
    nu, wnu = legendre(n_nu)
    phi = (np.arange(n_phi, dtype=LD) + LD("0.25")) * 2 * PI / n_phi
    mu = (1 + t / alpha)[:, None, None]
    nu_ = nu[None, :, None]
    phi_ = phi[None, None, :]
    half = distance / 2
    ra = half * (mu + nu_)
    rb = half * (mu - nu_)
    along = half * (1 + mu * nu_)
    across = half * np.sqrt((mu * mu - 1) * (1 - nu_ * nu_))
    weight = (wt / alpha)[:, None, None] * wnu[None, :, None] * (2 * PI / n_phi) * half ** 3 * (mu * mu - nu_ * nu_)
    weight = weight * np.exp(-alpha - beta * nu_)

    at_a = [along * axis[k] + across * (np.cos(phi_) * first[k] + np.sin(phi_) * second[k]) for k in range(3)]
    at_b = [at_a[k] - displacement[k] for k in range(3)]
    radial = weight * ra ** (na - 1 - la) * rb ** (nb - 1 - lb) * norm(na, za) * norm(nb, zb)
    left = harmonics(la, *at_a)
    right = harmonics(lb, *at_b)
    return np.array([[(radial * f * g).sum() for g in right] for f in left])


def normalised(n, terms):
    """Coefficients scaled so that the contraction has norm one (one-centre overlap of equal n)."""
    square = sum(
        LD(c1) * LD(c2) * (2 * np.sqrt(LD(z1) * LD(z2)) / (LD(z1) + LD(z2))) ** (2 * n + 1) for z1, c1 in terms for z2, c2 in terms
    )
    return [(z, LD(c) / np.sqrt(square)) for z, c in terms]


def shells_of(element, polarised):
    shells = list(PARAMETERS[element])
    return shells + [HYDROGEN_2P] if polarised and element == "H" else shells


def overlap_matrix(elements, positions, polarised, size):
    """Full S (extended precision) and the diagonal of H."""
    layout, diagonal = [], []
    for atom, element in enumerate(elements):
        for n, l, hii, terms in shells_of(element, polarised):
            layout.append((atom, n, l, normalised(n, terms), len(diagonal)))
            diagonal += [hii] * (2 * l + 1)
    s = np.eye(len(diagonal), dtype=LD)
    place = np.array(positions, dtype=LD) / LD("0.529177210903")
    for i, (a, na, la, ta, ia) in enumerate(layout):
        for b, nb, lb, tb, ib in layout[:i]:
            if a == b:
                continue
            block = sum(
                ca * cb * primitive_block(na, la, za, nb, lb, zb, place[b] - place[a], size) for za, ca in ta for zb, cb in tb
            )
            s[ia:ia + 2 * la + 1, ib:ib + 2 * lb + 1] = block
            s[ib:ib + 2 * lb + 1, ia:ia + 2 * la + 1] = block.T
    owner = np.concatenate([[a] * (2 * l + 1) for a, _, l, _, _ in layout])
    return s, np.array(diagonal), owner, layout


def hamiltonian(s, diagonal, owner, form, k):
    hi, hj = diagonal[:, None], diagonal[None, :]
    factor = k
    if form == "weighted":
        d = (hi - hj) / (hi + hj)
        factor = k + d ** 2 + d ** 4 * (1 - k)
    h = factor * s * (hi + hj) / 2
    h[owner[:, None] == owner[None, :]] = 0.0
    np.fill_diagonal(h, diagonal)
    return h


def further_hamiltonian(s, diagonal, layout, positions, form, k):
    """The other published forms, for bases of s and p functions with one exponent each."""
    h = np.diag(diagonal)
    for a, na, la, ta, ia in layout:
        for b, nb, lb, tb, ib in layout:
            if a == b:
                continue
            rows, columns = slice(ia, ia + 2 * la + 1), slice(ib, ib + 2 * lb + 1)
            block, hi, hj = s[rows, columns], diagonal[ia], diagonal[ib]
            axis = np.array(positions[b]) - np.array(positions[a])
            distance = np.linalg.norm(axis)
            if form == "geometric-mean":
                h[rows, columns] = -k * block * math.sqrt(hi * hj)
            elif form == "anderson":
                h[rows, columns] = 2.25 * math.exp(-0.13 * distance) * block * (hi + hj) / 2
            elif form == "distance-dependent":
                d = (hi - hj) / (hi + hj)
                at = (na / ta[0][0] + nb / tb[0][0]) * BOHR
                kappa = k - 1 + d ** 2 - d ** 4 * (k - 1)
                h[rows, columns] = (1 + kappa * math.exp(-0.35 * (distance - at))) * block * (hi + hj) / 2
            else:  # cusachs: local z along the pair, order z x y on both atoms
                z = axis / distance
                x = np.cross(z, np.eye(3)[np.argmin(np.abs(z))])
                x /= np.linalg.norm(x)
                local = np.array([z, x, np.cross(z, x)])
                turn = [np.eye(1), local[:, [2, 0, 1]].T]
                inner = turn[la].T @ block @ turn[lb]
                h[rows, columns] = turn[la] @ (inner * (2 - np.abs(inner))) @ turn[lb].T * (hi + hj) / 2
    return h


def many_digits(h, s):
    """The same eigenvalues with 40 digits: a check on LAPACK's."""
    with mpmath.workdps(40):
        lower = mpmath.cholesky(mpmath.matrix(s.tolist()))
        inverse = mpmath.inverse(lower)
        values = mpmath.eigsy(inverse * mpmath.matrix(h.tolist()) * inverse.T, eigvals_only=True)
        return sorted(float(v) for v in values)


# ---------------------------------------------------------------- molecules

def from_g2(name):
    atoms = g2_molecule(name)
    return list(atoms.get_chemical_symbols()), atoms.get_positions(), "G2 set, Curtiss et al., J. Chem. Phys. 106, 1063 (1997)"


def bent(centre, ligand, length, angle):
    half = math.radians(angle) / 2
    return [centre, ligand, ligand], np.array([[0, 0, 0], [0, length * math.sin(half), length * math.cos(half)], [0, -length * math.sin(half), length * math.cos(half)]])


def on_sphere(centre, ligands, directions, lengths):
    rows = [[0.0, 0.0, 0.0]]
    for direction, length in zip(directions, lengths):
        d = np.array(direction, dtype=float)
        rows.append(d / np.linalg.norm(d) * length)
    return [centre] + ligands, np.array(rows)


TETRAHEDRON = [(1, 1, 1), (1, -1, -1), (-1, 1, -1), (-1, -1, 1)]
ROUND = "round geometry near the experimental one: only identical input matters here"


def ring(radius, height, count, turn=0.0):
    return [[radius * math.cos(2 * math.pi * (k + turn) / count), radius * math.sin(2 * math.pi * (k + turn) / count), height] for k in range(count)]


def molecules():
    yield "H2O", *from_g2("H2O"), 0
    yield "H2S", *from_g2("SH2"), 0
    yield "NH3", *from_g2("NH3"), 0
    yield "PH3", *from_g2("PH3"), 0
    yield "CH4", *from_g2("CH4"), 0
    yield "SiF2", *bent("Si", "F", 1.590, 100.8), ROUND, 0
    yield "NF2", *bent("N", "F", 1.353, 103.2), ROUND, 0
    yield "SiCl2", *bent("Si", "Cl", 2.065, 101.5), ROUND, 0
    for name in ("PF3", "BCl3", "CO2", "HCN", "H2CO", "C2H4", "C6H6", "SO2", "BF3", "C2H2", "H2CCO", "Si2H6", "CH3SH", "N2O"):
        yield name, *from_g2(name), 0
    half, nf, nn = math.radians(106.0), 1.398, 1.224
    n1, n2 = np.array([0, 0, nn / 2]), np.array([0, 0, -nn / 2])
    arm = nf * np.array([0, math.sin(half), -math.cos(half)])
    yield "N2F2", ["N", "N", "F", "F"], np.array([n1, n2, n1 + arm, n2 - arm]), ROUND + " (trans)", 0
    yield "CHFClBr", *on_sphere("C", ["H", "F", "Cl", "Br"], TETRAHEDRON, [1.09, 1.36, 1.76, 1.94]), ROUND + " (tetrahedral directions)", 0
    yield "PtCl4 2-", *on_sphere("Pt", ["Cl"] * 4, [(1, 0, 0), (0, 1, 0), (-1, 0, 0), (0, -1, 0)], [2.31] * 4), ROUND, -2
    yield "TiCl4", *on_sphere("Ti", ["Cl"] * 4, TETRAHEDRON, [2.17] * 4), ROUND, 0
    elements, rows = on_sphere("Ni", ["C", "O"] * 4, [d for d in TETRAHEDRON for _ in (0, 1)], [1.838, 2.979] * 4)
    yield "Ni(CO)4", elements, rows, ROUND, 0
    rows = [[0.0, 0.0, 0.0]] + ring(1.220, 1.66, 5) + ring(1.220, -1.66, 5) + ring(2.300, 1.64, 5) + ring(2.300, -1.64, 5)
    yield "Fe(C5H5)2", ["Fe"] + ["C"] * 10 + ["H"] * 10, np.array(rows), ROUND + " (eclipsed)", 0


def random_rotation(generator):
    q = generator.normal(size=4)
    w, x, y, z = q / np.linalg.norm(q)
    return np.array([
        [1 - 2 * (y * y + z * z), 2 * (x * y - z * w), 2 * (x * z + y * w)],
        [2 * (x * y + z * w), 1 - 2 * (x * x + z * z), 2 * (y * z - x * w)],
        [2 * (x * z - y * w), 2 * (y * z + x * w), 1 - 2 * (x * x + y * y)],
    ])


def names(elements, polarised):
    return {
        e: [{"n": n, "l": l, "hii_ev": hii, "zeta": [[z, c] for z, c in terms]} for n, l, hii, terms in shells_of(e, polarised)]
        for e in sorted(set(elements))
    }


def record(name, elements, positions, source, charge, polarised, generator, worst, want_overlap):
    positions = positions @ random_rotation(generator).T + generator.uniform(-1, 1, 3)
    positions = [[float(v) for v in row] for row in positions]
    s, diagonal, owner, layout = overlap_matrix(elements, positions, polarised, (12, 48, 12))
    larger, _, _, _ = overlap_matrix(elements, positions, polarised, (16, 64, 14)) if len(elements) <= 9 else (s, None, None, None)
    worst["overlap_change_on_larger_grid"] = max(worst["overlap_change_on_larger_grid"], float(np.abs(s - larger).max()))
    s = s.astype(float)
    cases = []
    for form in FORMS:
        for k in KS:
            h = hamiltonian(s, diagonal, owner, form, k)
            values = scipy.linalg.eigh(h, s, eigvals_only=True)
            if k == 1.75 and len(diagonal) <= 30:
                worst["eigenvalue_change_ev_with_40_digits"] = max(
                    worst["eigenvalue_change_ev_with_40_digits"], float(np.abs(values - np.array(many_digits(h, s))).max())
                )
            cases.append({"form": form, "k": k, "eigenvalues_ev": [float(v) for v in values]})
    if all(len(terms) == 1 and l < 2 for _, _, l, terms, _ in layout) and len(diagonal) <= 17:
        for form, k in FURTHER:
            h = further_hamiltonian(s, diagonal, layout, positions, form, k)
            values = scipy.linalg.eigh(h, s, eigvals_only=True)
            cases.append({"form": form, "k": k, "eigenvalues_ev": [float(v) for v in values]})
    result = {
        "name": name, "elements": elements, "charge": charge, "polarised_hydrogen": polarised, "geometry_source": source,
        "positions_angstrom": positions, "parameters": names(elements, polarised),
        "smallest_overlap_eigenvalue": float(scipy.linalg.eigvalsh(s)[0]), "cases": cases,
    }
    if want_overlap:
        result["overlap"] = [[float(v) for v in row] for row in s]
    print(f"{name:12s} n={len(diagonal):3d} smallest S {result['smallest_overlap_eigenvalue']:.5f}", flush=True)
    return result


def main():
    generator = np.random.default_rng(20240611)
    worst = {"overlap_change_on_larger_grid": 0.0, "eigenvalue_change_ev_with_40_digits": 0.0}
    records = []
    for name, elements, positions, source, charge in molecules():
        full = name in ("H2O", "SiF2", "PtCl4 2-", "CHFClBr")
        records.append(record(name, elements, positions, source, charge, False, generator, worst, full))
        if name in ("H2O", "NH3", "H2CO"):
            records.append(record(name, elements, positions, source, charge, True, generator, worst, False))
    document = {
        "about": "Level energies by three-dimensional quadrature of Slater overlaps and LAPACK (energies.py).",
        "bohr_in_angstrom": BOHR,
        "function_order": "atoms in order, shells in the order of `parameters`, components m = 0, +1, -1, +2, -2 (z x y; z2 xz yz x2-y2 xy)",
        "zeta": "pairs of exponent (1/bohr) and coefficient as published; contractions were renormalised to norm one",
        "self_check": worst,
        "records": records,
    }
    target = Path(__file__).with_name("energies.json")
    lines = json.dumps(document, indent=1)
    target.write_text(compact(lines) + "\n", encoding="utf-8")
    print(worst)


def compact(text):
    """Innermost lists on one line."""
    import re

    return re.sub(r"\[\s+([^\[\]{}]*?)\s+\]", lambda m: "[" + re.sub(r"\s*\n\s*", " ", m.group(1)) + "]", text)


if __name__ == "__main__":
    main()
