//! Three-vectors as arrays: the few operations that geometries need.

pub(crate) type Vector = [f64; 3];

pub(crate) fn add(a: Vector, b: Vector) -> Vector {
    [a[0] + b[0], a[1] + b[1], a[2] + b[2]]
}

pub(crate) fn subtract(a: Vector, b: Vector) -> Vector {
    [a[0] - b[0], a[1] - b[1], a[2] - b[2]]
}

pub(crate) fn scale(a: Vector, factor: f64) -> Vector {
    [a[0] * factor, a[1] * factor, a[2] * factor]
}

pub(crate) fn dot(a: Vector, b: Vector) -> f64 {
    a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
}

pub(crate) fn cross(a: Vector, b: Vector) -> Vector {
    [
        a[1] * b[2] - a[2] * b[1],
        a[2] * b[0] - a[0] * b[2],
        a[0] * b[1] - a[1] * b[0],
    ]
}

pub(crate) fn norm(a: Vector) -> f64 {
    dot(a, a).sqrt()
}

pub(crate) fn distance(a: Vector, b: Vector) -> f64 {
    norm(subtract(a, b))
}

/// The unit vector along `a`; `None` when `a` is shorter than 1e-9.
pub(crate) fn unit(a: Vector) -> Option<Vector> {
    let length = norm(a);
    (length > 1e-9).then(|| scale(a, 1.0 / length))
}

/// The part of `a` perpendicular to the unit vector `axis`.
pub(crate) fn perpendicular(a: Vector, axis: Vector) -> Vector {
    subtract(a, scale(axis, dot(a, axis)))
}
