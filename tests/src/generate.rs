//! Long sheets for measuring speed: blocks of a note such as a practitioner
//! writes, each with its own names and numbers, resting on the block before.
//! The mix: one line in five is blank or a comment; inputs, values, functions
//! with `where`, results and claims in the proportions of the example sheets;
//! literals with units, brackets of every kind, conditions and integrals.

use std::fmt::Write;

/// Lines of a block.
const BLOCK: usize = 25;

/// A sheet of so many lines, rounded up to whole blocks.
#[must_use]
pub fn sheet(lines: usize) -> String {
    let blocks = lines.div_ceil(BLOCK).max(1);
    let mut text = String::with_capacity(blocks * BLOCK * 60);
    text.push_str("assume planck2018\nd_0 = 12 kpc\nr_0 = 90 cMpc\n\n");
    for number in 1..=blocks {
        block(&mut text, number);
    }
    text
}

fn block(text: &mut String, i: usize) {
    let p = i - 1;
    let digit = i % 10;
    let small = 1 + i % 7;
    let _ = write!(
        text,
        "\
# Pair {i} of the Larkspur Deep Field: separation, luminosity and place.

given z_{i} = 0.{small}{digit}          \"redshift of pair {i}\"
given theta_{i} [arcsec] = {small}.{digit} arcsec \"separation on the sky\"
given F_{i} = {small}.{digit}e-17 erg/s/cm^2 \"line flux\"
d_{i} = theta_{i} * D_A(z_{i}) [kpc]
r_{i} = D_C(z_{i}) + 0.{small} Mpc
v_{i} [km/s] = H0 * (r_{i} - 0.5*r_{p})
# The expansion written out, with a correction.
f_{i}(x) = sqrt(Ωm * (1 + x)^3 + 1 - Ωm) * s where s = 1 + x/{small}0
g_{i}(a, b [kpc] = {small} kpc) = f_{i}(a) * b / (d_{p} + 3 kpc)
M_{i} = 2{small}.4 mag - μ(z_{i})
L_{i} = 4*pi * D_L(z_{i})^2 * F_{i} [erg/s]

t_{i} = if z_{i} > 0.5 and not z_{i} >= 2 then age(z_{i}) else lookback_time(z_{i})
q_{i} = integral(1/f_{i}(x), x = 0 .. z_{i}) + f_{i}(z_{i})^2
n_{i} = 1.{digit} × 10^-3 cMpc^-3 * comoving_volume(z_{i})
k_{i} = 0.{small} h/cMpc [1/cMpc for h]
w_{i} = 1420.4058 MHz / (1 + z_{i}) [cm via c]

result s_{i} = g_{i}(q_{i}, b = d_{i}) [1] \"weight of the pair\"
result a_{i} = k_{i} * r_{i} * n_{i}    \"modes\"
claim \"table {i}\": t_{i} is between 0 and 14 Gyr
claim: L_{i} / (1 erg/s) > 0 and v_{i} < 2 c and w_{i} > 21 cm and M_{i} < 25 mag

"
    );
}
