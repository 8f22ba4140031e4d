//! Sums of Slater functions of one n: their norm and their radius.

/// ⟨χ|χ⟩ of χ = Σ cᵢ χ(n, ζᵢ), every Slater function being normalised:
/// Σᵢⱼ cᵢcⱼ [2√(ζᵢζⱼ)/(ζᵢ+ζⱼ)]^(2n+1). `terms` holds (ζ, c); the unit of ζ does not matter.
///
/// Elementary; for two terms this is the condition that published double-ζ d functions obey
/// (Richardson, Nieuwpoort, Powell & Edgell, J. Chem. Phys. 36, 1057 (1962)).
pub fn contraction_norm(n: u8, terms: &[(f64, f64)]) -> f64 {
    let mut norm = 0.0;
    for &(zeta_i, c_i) in terms {
        for &(zeta_j, c_j) in terms {
            let base = 2.0 * (zeta_i * zeta_j).sqrt() / (zeta_i + zeta_j);
            // A plain product: `powi` may differ between machines.
            let power = (0..2 * u32::from(n) + 1).fold(1.0, |product, _| product * base);
            norm += c_i * c_j * power;
        }
    }
    norm
}

/// The distance from the nucleus, in bohr, where the outermost maximum of the radial density
/// r²R(r)² of the contraction lies; n/ζ for a single Slater function.
///
/// Used as the orbital radius in the distance-dependent constant of Calzaferri, Forss & Kamber,
/// J. Phys. Chem. 93, 5366 (1989).
pub fn most_probable_radius(n: u8, terms: &[(f64, f64)]) -> f64 {
    if let [(zeta, _)] = terms {
        return f64::from(n) / zeta;
    }
    // With u = rR = Σ wᵢ rⁿ e^(−ζᵢr), u′/r^(n−1) = Σ wᵢ (n − ζᵢ r) e^(−ζᵢr): its last zero is
    // bracketed from outside, where every term is spent, and halved down to the last bit.
    let slope = |r: f64| {
        terms.iter().fold(0.0, |sum, &(zeta, c)| {
            let weight = (0..n).fold(zeta.sqrt(), |product, _| product * zeta);
            sum + c * weight * (f64::from(n) - zeta * r) * libm::exp(-zeta * r)
        })
    };
    let smallest = terms
        .iter()
        .fold(f64::INFINITY, |least, term| least.min(term.0));
    let mut outer = f64::from(n) / smallest;
    let step = outer / 64.0;
    let sign = slope(outer * (1.0 + 1e-9)).signum();
    let mut inner = outer - step;
    while inner > step && slope(inner).signum() * sign > 0.0 {
        outer = inner;
        inner -= step;
    }
    for _ in 0..60 {
        let middle = 0.5 * (inner + outer);
        if slope(middle).signum() * sign > 0.0 {
            outer = middle
        } else {
            inner = middle
        }
    }
    0.5 * (inner + outer)
}

#[cfg(test)]
mod tests {
    use super::*;
    use approx::assert_abs_diff_eq;

    #[test]
    fn norm_of_one_and_of_two_functions() {
        assert_abs_diff_eq!(contraction_norm(1, &[(1.3, 1.0)]), 1.0, epsilon = 1e-15);
        // Two equal functions add their coefficients.
        assert_abs_diff_eq!(
            contraction_norm(3, &[(2.0, 0.3), (2.0, 0.7)]),
            1.0,
            epsilon = 1e-15
        );
        // The 3d function of Fe printed as 0.5366/0.6678 is normalised (from memory).
        assert_abs_diff_eq!(
            contraction_norm(3, &[(5.35, 0.5366), (1.80, 0.6678)]),
            1.0,
            epsilon = 1e-4
        );
    }

    #[test]
    fn radius_is_a_stationary_point_of_the_radial_function() {
        assert_abs_diff_eq!(
            most_probable_radius(2, &[(1.625, 1.0)]),
            2.0 / 1.625,
            epsilon = 1e-14
        );
        let terms = [(5.35, 0.5366), (1.80, 0.6678)];
        let r = most_probable_radius(3, &terms);
        let radial = |r: f64| -> f64 {
            terms
                .iter()
                .map(|&(z, c): &(f64, f64)| c * z.powf(3.5) * r.powi(3) * (-z * r).exp())
                .sum()
        };
        assert!(
            radial(r) > radial(r * 1.001) && radial(r) > radial(r * 0.999),
            "r = {r}"
        );
    }
}
