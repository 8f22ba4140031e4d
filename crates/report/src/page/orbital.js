'use strict';
// Orbitals from coefficients and Slater functions: ψ = Σ c N r^(n−1) e^(−ζr) Y, lengths in bohr.
const BOHR = 0.529177210903;

// Normalised real harmonics times r^l, in the order m = 0, +1, −1, +2, −2, +3, −3.
const S_NORM = Math.sqrt(1 / (4 * Math.PI)), P_NORM = Math.sqrt(3 / (4 * Math.PI));
const SOLID = (() => {
  const f = (square) => Math.sqrt(square / Math.PI);
  const d = f(15 / 4), z = f(5 / 16);
  const f0 = f(7 / 16), f1 = f(21 / 32), f2 = f(105 / 16), f3 = f(35 / 32);
  return [
    null,
    null,
    (x, y, w, q) => [z * (3 * w * w - q), d * x * w, d * y * w, d / 2 * (x * x - y * y), d * x * y],
    (x, y, w, q) => [
      f0 * w * (5 * w * w - 3 * q), f1 * x * (5 * w * w - q), f1 * y * (5 * w * w - q),
      f2 * w * (x * x - y * y), 2 * f2 * x * y * w, f3 * x * (x * x - 3 * y * y), f3 * y * (3 * x * x - y * y)],
  ];
})();

function factorial(k) { return k < 2 ? 1 : k * factorial(k - 1); }

// Terms [ζ, c·N] of a contraction scaled to norm 1.
function prepareShell(shell) {
  const n = shell.n, norm = (z) => Math.pow(2 * z, n + 0.5) / Math.sqrt(factorial(2 * n));
  let square = 0;
  for (const [a, ca] of shell.zeta) {
    for (const [b, cb] of shell.zeta) {
      square += ca * cb * norm(a) * norm(b) * factorial(2 * n) / Math.pow(a + b, 2 * n + 1);
    }
  }
  const terms = shell.zeta.map(([z, c]) => [z, c * norm(z) / Math.sqrt(square)]);
  return { atom: shell.atom, n, l: shell.l, first: shell.first, terms };
}

// ψ of an orbital as a function of a place in Å. Coefficients are whole 10⁻⁴, its own start at `from`;
// shells of which it holds nothing are left out.
function orbitalAt(shells, coefficients, from, atoms) {
  const parts = [];
  for (const shell of shells) {
    const own = coefficients.slice(from + shell.first, from + shell.first + 2 * shell.l + 1).map((c) => c * 1e-4);
    if (own.some((c) => c !== 0)) parts.push({ shell, own, at: atoms[shell.atom] });
  }
  return (x, y, z) => {
    let sum = 0;
    for (let k = 0; k < parts.length; k++) sum += shellAt(parts[k], x, y, z);
    return sum;
  };
}
function shellAt({ shell, own, at }, x, y, z) {
  const dx = (x - at[0]) / BOHR, dy = (y - at[1]) / BOHR, dz = (z - at[2]) / BOHR;
  const q = dx * dx + dy * dy + dz * dz, r = Math.sqrt(q) + 1e-12, l = shell.l, terms = shell.terms;
  let radial = 0;
  for (let k = 0; k < terms.length; k++) if (terms[k][0] * r < 30) radial += terms[k][1] * Math.exp(-terms[k][0] * r);
  if (radial === 0) return 0;
  // r^(n−1) Y = r^(n−1−l) · (r^l Y)
  for (let k = shell.n - 1; k > l; k--) radial *= r;
  if (l === 0) return radial * S_NORM * own[0];
  if (l === 1) return radial * P_NORM * (own[0] * dz + own[1] * dx + own[2] * dy);
  const values = SOLID[l](dx, dy, dz, q);
  let angular = 0;
  for (let k = 0; k < values.length; k++) angular += own[k] * values[k];
  return radial * angular;
}

// Eigenvectors of a symmetric 3×3 matrix (Jacobi), longest axis first.
function axesOf(m) {
  const a = m.map((row) => row.slice()), v = [[1, 0, 0], [0, 1, 0], [0, 0, 1]];
  for (let sweep = 0; sweep < 30; sweep++) {
    for (const [p, q] of [[0, 1], [0, 2], [1, 2]]) {
      if (Math.abs(a[p][q]) < 1e-14) continue;
      const angle = 0.5 * Math.atan2(2 * a[p][q], a[q][q] - a[p][p]);
      const c = Math.cos(angle), s = Math.sin(angle);
      for (let k = 0; k < 3; k++) [a[k][p], a[k][q]] = [c * a[k][p] - s * a[k][q], s * a[k][p] + c * a[k][q]];
      for (let k = 0; k < 3; k++) [a[p][k], a[q][k]] = [c * a[p][k] - s * a[q][k], s * a[p][k] + c * a[q][k]];
      for (let k = 0; k < 3; k++) [v[k][p], v[k][q]] = [c * v[k][p] - s * v[k][q], s * v[k][p] + c * v[k][q]];
    }
  }
  return [0, 1, 2]
    .map((k) => ({ size: a[k][k], axis: [v[0][k], v[1][k], v[2][k]] }))
    .sort((x, y) => y.size - x.size);
}

const dot = (a, b) => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
const cross = (a, b) => [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
const unit = (a) => { const r = Math.sqrt(dot(a, a)); return a.map((c) => c / r); };

// One frame for the whole path, so that the picture does not turn while the atoms move: the main axes
// of all positions. Where two axes are equal the first atom off the third one decides.
function frameOf(points) {
  const centre = (atoms) => [0, 1, 2].map((k) => atoms.reduce((sum, a) => sum + a[k], 0) / atoms.length);
  const m = [[0, 0, 0], [0, 0, 0], [0, 0, 0]];
  for (const atoms of points) {
    const c = centre(atoms);
    for (const a of atoms) for (let i = 0; i < 3; i++) for (let j = 0; j < 3; j++) m[i][j] += (a[i] - c[i]) * (a[j] - c[j]);
  }
  const found = axesOf(m), scale = Math.max(found[0].size, 1e-9);
  let [u, v, w] = found.map((f) => f.axis);
  const atoms = points[0], c = centre(atoms);
  const aside = (axis) => {
    for (const a of atoms) {
      const d = a.map((x, k) => x - c[k]), off = d.map((x, k) => x - dot(d, axis) * axis[k]);
      if (dot(off, off) > 1e-4) return unit(off);
    }
    return null;
  };
  if (found[0].size - found[1].size < 1e-6 * scale) u = aside(w) || u;
  else if (found[1].size - found[2].size < 1e-6 * scale) v = aside(u) || v;
  // Signs by the largest component: the same picture for the same molecule.
  const up = (a) => { const k = [0, 1, 2].reduce((b, i) => (Math.abs(a[i]) > Math.abs(a[b]) + 1e-6 ? i : b), 0); return a[k] < 0 ? a.map((x) => -x) : a; };
  u = up(u);
  w = found[0].size - found[1].size < 1e-6 * scale ? w : cross(u, up(v));
  v = unit(cross(w, u));
  w = cross(u, v);
  let flat = 0, size = 0;
  for (const atoms of points) {
    const c = centre(atoms);
    for (const a of atoms) {
      const d = a.map((x, k) => x - c[k]);
      flat = Math.max(flat, Math.abs(dot(d, w)));
      size = Math.max(size, Math.abs(dot(d, u)), Math.abs(dot(d, v)), Math.abs(dot(d, w)));
    }
  }
  return { u, v, w, centre, flat: flat < 0.05, size };
}

// Planes to choose from: [right, up, towards the reader], height in Å, words.
function planesOf(frame) {
  const { u, v, w } = frame;
  const first = frame.flat ? 'the plane of the atoms' : 'the widest plane, through the middle of the atoms';
  return [
    { axes: [u, v, w], height: 0, words: first },
    { axes: [u, v, w], height: 0.5, words: frame.flat ? '0.5 Å above the plane of the atoms' : '0.5 Å above the widest plane' },
    { axes: [u, w, cross(u, w)], height: 0, words: 'a plane on edge, along the longest axis' },
    { axes: [v, w, u], height: 0, words: 'a plane on edge, across the longest axis' },
  ];
}

// The plane in which an orbital shows most, over some geometries of the path. Of a flat molecule the
// plane of the atoms comes first, and the one above it for orbitals that vanish there.
function choosePlane(frame, planes, sample) {
  const weight = planes.map((plane) => sample.reduce((sum, at) => sum + content(frame, plane, at), 0));
  if (frame.flat) return weight[0] > 0.02 * weight[1] ? 0 : 1;
  return weight.reduce((best, value, k) => (k !== 1 && value > 1.05 * weight[best] ? k : best), 0);
}

function content(frame, plane, { psiAt, atoms }) {
  const half = frame.size + 1.5, c = frame.centre(atoms), [a, b, n] = plane.axes;
  let sum = 0;
  for (let i = -10; i <= 10; i++) {
    for (let j = -10; j <= 10; j++) {
      const s = (i + 0.13) / 10 * half, t = (j + 0.27) / 10 * half;
      const value = psiAt(...[0, 1, 2].map((k) => c[k] + s * a[k] + t * b[k] + plane.height * n[k]));
      sum += value * value;
    }
  }
  return sum;
}

// Draws the molecule, and the orbital where `psiAt` is given, on `fine` pixels. Contours at ±0.025·2^k;
// positive phase filled, negative phase filled and hatched.
function drawOrbital(canvas, { frame, plane, atoms, elements, bonds, psiAt, colours, fine }) {
  const g = canvas.getContext('2d'), size = canvas.width, half = frame.size + 2.1, c = frame.centre(atoms);
  const [a, b, n] = plane.axes;
  g.fillStyle = colours.ground;
  g.fillRect(0, 0, size, size);
  if (psiAt) {
    const cells = fine > 400 ? 90 : 48, grid = new Float64Array((cells + 1) * (cells + 1));
    for (let j = 0; j <= cells; j++) {
      for (let i = 0; i <= cells; i++) {
        const s = (2 * i / cells - 1) * half, t = (1 - 2 * j / cells) * half;
        grid[j * (cells + 1) + i] = psiAt(
          c[0] + s * a[0] + t * b[0] + plane.height * n[0],
          c[1] + s * a[1] + t * b[1] + plane.height * n[1],
          c[2] + s * a[2] + t * b[2] + plane.height * n[2]);
      }
    }
    paint(canvas, grid, cells, fine, colours);
  }
  const place = (at) => {
    const d = at.map((x, k) => x - c[k]);
    return [size / 2 * (1 + dot(d, a) / half), size / 2 * (1 - dot(d, b) / half), dot(d, n)];
  };
  const spots = atoms.map(place), order = spots.map((_, k) => k).sort((p, q) => spots[p][2] - spots[q][2]);
  g.strokeStyle = colours.ink;
  g.lineWidth = size / 180;
  for (const [p, q] of bonds) {
    g.beginPath();
    g.moveTo(spots[p][0], spots[p][1]);
    g.lineTo(spots[q][0], spots[q][1]);
    g.stroke();
  }
  g.textAlign = 'center';
  g.textBaseline = 'middle';
  g.font = `600 ${Math.round(size / 26)}px system-ui, sans-serif`;
  for (const k of order) {
    g.beginPath();
    g.arc(spots[k][0], spots[k][1], size / 30, 0, 2 * Math.PI);
    g.fillStyle = colours.ground;
    g.fill();
    g.lineWidth = size / 260;
    g.stroke();
    g.fillStyle = colours.ink;
    g.fillText(elements[k], spots[k][0], spots[k][1] + size / 360);
  }
}

let scratch = null;
// Contours of a lattice: values between its points are bilinear, contour lines as wide on every slope.
function paint(canvas, grid, cells, fine, colours) {
  scratch = scratch || document.createElement('canvas');
  scratch.width = scratch.height = fine;
  const g = scratch.getContext('2d'), image = g.createImageData(fine, fine), pixels = image.data;
  const row = new Float64Array(fine + 1), above = new Float64Array(fine + 1), hatch = Math.round(fine / 52);
  const reach = 2 * fine / 720;
  for (let y = 0; y < fine; y++) {
    above.set(row);
    const fy = y / fine * cells, j = Math.floor(fy), v = fy - j, from = j * (cells + 1), next = from + cells + 1;
    for (let x = 0; x <= fine; x++) {
      const fx = Math.min(x / fine * cells, cells - 1e-9), i = Math.floor(fx), u = fx - i;
      row[x] = (grid[from + i] * (1 - u) + grid[from + i + 1] * u) * (1 - v) + (grid[next + i] * (1 - u) + grid[next + i + 1] * u) * v;
    }
    for (let x = 0; x < fine; x++) {
      const value = row[x], size = Math.abs(value), k = 4 * (y * fine + x);
      if (size < 0.012) {
        pixels[k] = colours.paper[0]; pixels[k + 1] = colours.paper[1]; pixels[k + 2] = colours.paper[2]; pixels[k + 3] = 255;
        continue;
      }
      const level = Math.log2(size / 0.025);
      const dx = row[x + 1] - value, dy = y ? above[x] - value : 0;
      const slope = Math.sqrt(dx * dx + dy * dy) / (size * Math.LN2) + 1e-9;
      let share = 0;
      if (level > 0) {
        share = 0.2 + 0.13 * Math.min(Math.floor(level), 4);
        if (value < 0 && (x + y) % hatch < hatch / 4) share = Math.min(1, share + 0.3);
      }
      const nearest = Math.max(0, Math.min(5, Math.round(level)));
      const edge = 0.5 + reach - Math.abs(level - nearest) / slope;
      if (edge > share) share = Math.min(1, edge);
      const phase = value > 0 ? colours.plus : colours.minus;
      for (let q = 0; q < 3; q++) pixels[k + q] = colours.paper[q] + (phase[q] - colours.paper[q]) * share;
      pixels[k + 3] = 255;
    }
  }
  g.putImageData(image, 0, 0);
  canvas.getContext('2d').drawImage(scratch, 0, 0, canvas.width, canvas.height);
}
