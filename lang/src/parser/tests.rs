//! Tests of the parser.

use super::*;

#[test]
fn the_sheet_of_the_language_page_reads_without_a_complaint() {
    let parsed = parse(
        r#"# How far can we see?
assume planck2018

given z = 1.1            "redshift of the farthest Larkspur galaxy"

recession(d [Mpc]) [km/s] = H0 * d

result R_obs  = particle_horizon() [Gly]     "radius of the observable universe"

claim "abstract":  2 * R_obs is 93 Gly within 2%
claim "sec. 2.1":  recession(3 Mpc) under flat with H0 = 70 km/s/Mpc, Ωm = 0.3 is 210 km/s

table z = 0.5 .. 3 every 0.5: D_C(z) [Gly], D_L(z) [Gpc], age(z) [Gyr]
figure "reach.svg" z = 0.01 .. 1000 every 0.05 dex: D_A(z) [Gly], hubble_radius(z) [Gly]
"#,
    );
    assert_eq!(parsed.diagnostics, []);
    assert_eq!(parsed.statements.len(), 8);
}
