//! Spheres in curved space. Distances are in units of c/H0, so that Ωk is
//! minus the Gaussian curvature.

use std::f64::consts::PI;

/// Radius by area of a sphere of comoving radius `chi`:
/// `sinh(√Ωk χ)/√Ωk`, χ, or `|sin(√−Ωk χ)|/√−Ωk` (past the antipode of a
/// closed space an image grows again).
#[inline]
pub fn area_radius(chi: f64, curvature: f64) -> f64 {
    if curvature == 0.0 {
        return chi;
    }
    let root = libm::sqrt(curvature.abs());
    let x = root * chi;
    if curvature > 0.0 {
        libm::sinh(x) / root
    } else if x.abs() <= PI {
        libm::sin(x) / root
    } else {
        libm::sin(x).abs() / root
    }
}

/// Derivative of [`area_radius`] by `chi`, before the antipode.
pub fn area_radius_slope(chi: f64, curvature: f64) -> f64 {
    let x = libm::sqrt(curvature.abs()) * chi;
    if curvature > 0.0 {
        libm::cosh(x)
    } else {
        libm::cos(x)
    }
}

/// Volume of a ball of comoving radius `chi`, `4π ∫ S² dχ`; a closed space
/// has no more than all of it.
pub fn volume(chi: f64, curvature: f64) -> f64 {
    let u = curvature * chi * chi;
    if u < -PI * PI {
        return total_volume(curvature);
    }
    4.0 * PI * chi * chi * chi * ball_ratio(u)
}

/// Volume of a closed space, `2π² (−Ωk)^(−3/2)`.
pub fn total_volume(curvature: f64) -> f64 {
    let root = libm::sqrt(-curvature);
    2.0 * PI * PI / (root * root * root)
}

/// `(sinh 2x − 2x)/(4x³)` with `u = x²`, and its continuation to `u < 0`;
/// 1/3 in flat space. The series where the difference would cancel.
fn ball_ratio(u: f64) -> f64 {
    if u.abs() < 0.5 {
        let (mut term, mut sum) = (1.0 / 3.0, 1.0 / 3.0);
        for n in 1..16 {
            let k = f64::from(2 * n);
            term *= 4.0 * u / ((k + 2.0) * (k + 3.0));
            sum += term;
        }
        return sum;
    }
    let x = libm::sqrt(u.abs());
    let cube = 4.0 * x * x * x;
    if u > 0.0 {
        (libm::sinh(2.0 * x) - 2.0 * x) / cube
    } else {
        (2.0 * x - libm::sin(2.0 * x)) / cube
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn series_and_closed_form_of_the_ball_meet() {
        for u in [0.5, -0.5] {
            let (below, above) = (ball_ratio(u * (1.0 - 1e-12)), ball_ratio(u * (1.0 + 1e-12)));
            assert!((below / above - 1.0).abs() < 1e-12, "at u = {u}");
        }
    }

    #[test]
    fn a_whole_sphere_is_reached_at_the_antipode() {
        assert!((volume(PI, -1.0) / (2.0 * PI * PI) - 1.0).abs() < 1e-14);
        assert_eq!(volume(4.0, -1.0), total_volume(-1.0));
    }
}
