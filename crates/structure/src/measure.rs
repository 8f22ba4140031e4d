//! Measured values of internal coordinates.

use crate::coordinate::CoordinateKind;
use crate::units::DEGREE_IN_RADIANS;
use crate::vector::{Vector, cross, distance, dot, norm, perpendicular, subtract, unit};

/// The value of a coordinate at a geometry: degrees, or Å for a stretch; a
/// pyramid is measured at its centre and three ligands (`atoms` = centre and
/// ligands, four in all) as the mean of its three angles. `None` where it is
/// undefined (a torsion with three atoms in line) or the atoms do not fit.
pub fn measure(kind: CoordinateKind, atoms: &[usize], positions: &[[f64; 3]]) -> Option<f64> {
    let at = |index: usize| positions.get(*atoms.get(index)?).copied();
    match kind {
        CoordinateKind::Stretch => Some(distance(at(0)?, at(1)?)),
        CoordinateKind::Bend => angle_degrees(at(0)?, at(1)?, at(2)?),
        CoordinateKind::Twist => torsion_degrees(at(0)?, at(1)?, at(2)?, at(3)?),
        CoordinateKind::Pyramid => {
            let (centre, first, second, third) = (at(0)?, at(1)?, at(2)?, at(3)?);
            let sum = angle_degrees(first, centre, second)?
                + angle_degrees(second, centre, third)?
                + angle_degrees(third, centre, first)?;
            Some(sum / 3.0)
        }
    }
}

/// Angle a–b–c in degrees, accurate near 0 and 180 too.
pub(crate) fn angle_degrees(a: Vector, b: Vector, c: Vector) -> Option<f64> {
    let (u, v) = (unit(subtract(a, b))?, unit(subtract(c, b))?);
    Some(libm::atan2(norm(cross(u, v)), dot(u, v)) / DEGREE_IN_RADIANS)
}

/// Torsion a–b–c–d in degrees, −180 … 180, positive clockwise when one looks
/// from b to c (IUPAC, Pure Appl. Chem. 68, 2193 (1996)).
pub(crate) fn torsion_degrees(a: Vector, b: Vector, c: Vector, d: Vector) -> Option<f64> {
    let axis = unit(subtract(c, b))?;
    let first = perpendicular(subtract(a, b), axis);
    let last = perpendicular(subtract(d, c), axis);
    let in_line = |part: Vector, whole: f64| norm(part) < IN_LINE * whole;
    if in_line(first, distance(a, b)) || in_line(last, distance(d, c)) {
        return None;
    }
    Some(libm::atan2(dot(axis, cross(first, last)), dot(first, last)) / DEGREE_IN_RADIANS)
}

/// Three atoms count as in line when the sine of their angle is below this.
pub(crate) const IN_LINE: f64 = 1e-5;

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn measured_values() {
        let positions = [
            [0.0; 3],
            [1.0, 0.0, 0.0],
            [0.0, 2.0, 0.0],
            [1.0, 0.0, 1.0],
            [-1.0, 0.0, 0.0],
        ];
        let bend = |atoms: &[usize]| measure(CoordinateKind::Bend, atoms, &positions);
        assert!((bend(&[1, 0, 2]).unwrap() - 90.0).abs() < 1e-12);
        assert!((bend(&[1, 0, 4]).unwrap() - 180.0).abs() < 1e-12);
        // From 0 to 1 one looks along +x: from +y to +z is clockwise.
        let twist = measure(CoordinateKind::Twist, &[2, 0, 1, 3], &positions).unwrap();
        assert!((twist - 90.0).abs() < 1e-12);
        assert_eq!(
            measure(CoordinateKind::Twist, &[4, 0, 1, 3], &positions),
            None
        );
        assert_eq!(bend(&[1, 0, 9]), None);
    }
}
