//! Growth, the power spectrum and haloes against closed forms and
//! independent evaluations.

use zij_stdlib::constants::values as si;
use zij_stdlib::cosmology::Redshift;
use zij_stdlib::cosmology::halo::{Counts, Edge};
use zij_stdlib::model::parameters::named;
use zij_stdlib::model::{self, BASES, Model, Setting};
use zij_stdlib::numerics::quadrature::adaptive;

fn build(name: &str, numbers: &[(&str, f64)]) -> Model {
    let base = BASES.iter().find(|base| base.name == name).expect("a known base");
    let one = |(name, value): &(&str, f64)| (named(name).expect("a parameter"), Setting::Number(*value));
    let settings: Vec<_> = numbers.iter().map(one).collect();
    model::build(base, &settings).expect("a model")
}

fn z(value: f64) -> Redshift {
    Redshift::new(value).expect("a redshift")
}

#[track_caller]
fn near(value: f64, expect: f64, relative: f64) {
    assert!((value / expect - 1.0).abs() <= relative, "{value} for {expect}");
}

const H70: (&str, f64) = ("H0", 70.0 * si::KM_PER_S_PER_MPC);

#[test]
fn growth_with_curvature_and_lambda_is_heaths_integral() {
    // D ∝ E(z) ∫_z^∞ (1+z)/E³ dz, exact without radiation: Heath 1977, MNRAS 179, 351.
    let models = [
        build("concordance", &[]),
        build("general", &[H70, ("Ωm", 0.3), ("ΩΛ", 0.0)]),
        build("general", &[H70, ("Ωm", 0.4), ("ΩΛ", 0.8)]),
        build("general", &[H70, ("Ωm", 2.0), ("ΩΛ", 0.0)]),
    ];
    for model in &models {
        let matter = model.budget().cold;
        let heath = |redshift: f64| {
            // u = (1+z)^−½ makes the integrand smooth to infinity.
            let end = 1.0 / libm::sqrt(1.0 + redshift);
            let integral = adaptive(0.0, end, 1e-14, |u| {
                let s = 1.0 / (u * u);
                let rate = model.expansion().rate(s);
                if rate.is_finite() {
                    s / (rate * rate * rate) * 2.0 / (u * u * u)
                } else {
                    0.0
                }
            });
            2.5 * matter * model.expansion().rate(1.0 + redshift) * integral
        };
        let today = heath(0.0);
        // The start, a = 1e-10, is in the era of matter to some 1e-10.
        near(model.growth_suppression(z(0.0)).expect("growth"), today, 1e-9);
        for redshift in [-0.3, 0.5, 3.0, 30.0, 1e3] {
            near(
                model.growth_factor(z(redshift)).expect("growth"),
                heath(redshift) / today,
                1e-10,
            );
        }
    }
}

#[test]
fn growth_through_equality_is_meszaros() {
    // D ∝ y + 2/3 with y = a/a_eq, exact for cold matter and radiation in
    // flat space: Mészáros 1974, A&A 37, 225.
    let model = build(
        "flat",
        &[H70, ("Ωm", 0.999_9), ("T_CMB", 2.7255), ("Neff", 3.046)],
    );
    let radiation = model.budget().photons + model.budget().massless;
    let matter = 1.0 - radiation;
    let model = build("flat", &[H70, ("Ωm", matter), ("T_CMB", 2.7255), ("Neff", 3.046)]);
    assert!(model.budget().dark.abs() < 1e-14);
    let y = |redshift: f64| matter / radiation / (1.0 + redshift);
    for redshift in [1.0, 100.0, 3e3, 1e4, 1e6] {
        let expect = (y(redshift) + 2.0 / 3.0) / (y(0.0) + 2.0 / 3.0);
        near(model.growth_factor(z(redshift)).expect("growth"), expect, 1e-9);
        let rate = y(redshift) / (y(redshift) + 2.0 / 3.0);
        near(model.growth_rate(z(redshift)).expect("growth"), rate, 1e-9);
    }
}

#[test]
fn the_transfer_function_agrees_with_another_evaluation_of_the_paper() {
    // Eisenstein & Hu 1998 evaluated with 20 digits by a general
    // multiple-precision library for planck2018, ωm = 0.143015217.
    let model = build("planck2018", &[]);
    let transfer = model.transfer_function().expect("a transfer function");
    near(transfer.sound_horizon_mpc(), 150.909_980_081_904_48, 1e-12);
    for (k, full, smooth, power) in [
        (0.001, 0.984_798_360_394, 0.984_670_032_165, 17_173.388_252_8),
        (0.01, 0.681_176_868_563, 0.687_220_071_021, 75_784.630_635_4),
        (0.05, 0.195_219_033_354, 0.189_530_205_53, 29_413.169_652_7),
        (0.1, 0.083_842_107_496_1, 0.083_156_271_074_9, 10_589.750_489_4),
        (1.0, 0.002_505_335_772_56, 0.002_482_844_706_27, 87.215_411_424_8),
        (10.0, 4.537_146_077_18e-5, 4.488_745_536_93e-5, 0.263_831_640_973),
    ] {
        near(transfer.full(k), full, 1e-11);
        near(transfer.smooth(k), smooth, 1e-11);
        let found = model.linear_power(k / si::MEGAPARSEC, z(0.0)).expect("P");
        let unit = si::MEGAPARSEC * si::MEGAPARSEC * si::MEGAPARSEC;
        near(found.value / unit, power, 1e-7);
    }
}

#[test]
fn the_variance_agrees_with_adaptive_quadrature() {
    // The same evaluation, integrated over ln k and, where W oscillates, over
    // k period by period. Goal 1e-6.
    let model = build("planck2018", &[]);
    for (radius, expect) in [
        (0.05, 6.697_233_954_54),
        (1.0, 2.844_065_639_08),
        (20.0, 0.551_629_544_488),
        (100.0, 0.108_366_734_361),
    ] {
        near(
            model.rms_contrast(radius * si::MEGAPARSEC, z(0.0)).expect("σ"),
            expect,
            1e-6,
        );
    }
    let eight = 8.0 / model.budget().h * si::MEGAPARSEC;
    near(model.rms_contrast(eight, z(0.0)).expect("σ"), 0.8111, 1e-12);
    let slope = model.rms_contrast_slope(eight).expect("a slope");
    let ratio = model.rms_contrast(eight * 1.001, z(0.0)).expect("σ")
        / model.rms_contrast(eight * 0.999, z(0.0)).expect("σ");
    near(slope, libm::log(ratio) / libm::log(1.001 / 0.999), 1e-5);
}

#[test]
fn sigma8_follows_from_the_primordial_amplitude() {
    // Δ² = (4/25) A_s (k/0.05)^(ns−1) (c k/H0)⁴ T² D²/Ωm², D = a in the era
    // of matter (Dodelson 2003, Modern Cosmology, sec. 7.1): a check of the
    // transfer function against the amplitude Planck measures. The fit is
    // good to some per cent.
    let model = build("planck2018", &[]);
    let amplitude = libm::exp(3.044) * 1e-10;
    let matter = model.budget().cold + model.budget().massive_matter;
    let (k, hubble) = (
        0.1,
        model.hubble_distance(Redshift::TODAY).expect("c/H0").value / si::MEGAPARSEC,
    );
    let transfer = model.transfer_function().expect("T").full(k);
    let growth = model.growth_suppression(z(0.0)).expect("growth");
    let fourth = (k * hubble) * (k * hubble) * (k * hubble) * (k * hubble);
    let primordial = amplitude * libm::pow(k / 0.05, 0.9649 - 1.0);
    let dimensionless =
        0.16 * primordial * fourth * transfer * transfer * growth * growth / (matter * matter);
    let power = dimensionless * 2.0 * std::f64::consts::PI * std::f64::consts::PI / (k * k * k);
    let unit = si::MEGAPARSEC * si::MEGAPARSEC * si::MEGAPARSEC;
    let found = model.linear_power(k / si::MEGAPARSEC, z(0.0)).expect("P").value / unit;
    near(found, power, 0.06);
}

#[test]
fn haloes_meet_the_formulas_of_their_papers() {
    // Barkana & Loeb 2001, eq. 24 to 26, for Ωm = 1: 0.784 kpc/h, 23.4 km/s,
    // 1.98e4 K at z = 9 and 1e8 Msun/h.
    let model = build("einstein_de_sitter", &[]);
    let mass = 1e8 * si::SOLAR_MASS / model.budget().h;
    let radius = model
        .halo_radius(mass, Edge::Virial, z(9.0))
        .expect("a radius")
        .value;
    near(radius / si::KILOPARSEC * model.budget().h, 0.784, 2e-3); // 0.7852: rounded there
    near(
        model
            .halo_speed(mass, Edge::Virial, z(9.0))
            .expect("a speed")
            .value
            / 1e3,
        23.4,
        2e-3,
    );
    near(
        model
            .virial_temperature_k(mass, z(9.0), 0.6)
            .expect("a temperature"),
        1.98e4,
        1e-2, // 1.991e4: rounded there
    );
    near(
        model.halo_mass_kg(radius, Edge::Virial, z(9.0)).expect("a mass"),
        mass,
        1e-14,
    );
    // 18π² over the critical density; 8 Mpc/h hold 2.786e14 Msun in planck2018.
    near(model.virial_overdensity(z(3.0)).expect("Δ"), 177.652_879, 1e-8);
    let planck = build("planck2018", &[]);
    let eight = planck
        .lagrangian_radius(2.786e14 * si::SOLAR_MASS)
        .expect("a radius")
        .value;
    near(eight / si::MEGAPARSEC * planck.budget().h, 8.0, 1e-3);
}

#[test]
fn all_matter_is_in_haloes() {
    // ∫ f(ν) d ln ν = 1 by definition: the mass in haloes above 1e6 Msun is
    // what the multiplicity leaves above its ν.
    let model = build("planck2018", &[]);
    let density = |fold: f64, counts: Counts| {
        let mass = si::SOLAR_MASS * libm::exp(fold);
        model.halo_counts_per_m3(mass, z(0.0), counts).expect("a density") * mass
    };
    let matter = model.budget().cold + model.budget().massive_matter;
    let mean = matter * model.critical_density(Redshift::TODAY).expect("ρ").value;
    let lightest = libm::log(1e8);
    let above = adaptive(lightest, libm::log(1e16), 1e-8, |fold| {
        density(fold, Counts::PressSchechter)
    }) / mean;
    let nu = model.peak_height(si::SOLAR_MASS * 1e8, z(0.0)).expect("ν");
    near(above, libm::erfc(nu / std::f64::consts::SQRT_2), 1e-4);
    let shear = adaptive(lightest, libm::log(1e16), 1e-8, |fold| {
        density(fold, Counts::ShethTormen)
    }) / mean;
    assert!(shear > 0.5 && shear < 1.0, "{shear}");
    // Counts above a mass fall with it and add up.
    let above = |mass: f64| {
        model
            .halo_counts_above_per_m3(mass * si::SOLAR_MASS, z(0.0), Counts::ShethTormen)
            .expect("counts")
    };
    let between = adaptive(libm::log(1e13), libm::log(1e14), 1e-8, |fold| {
        density(fold, Counts::ShethTormen) / si::SOLAR_MASS / libm::exp(fold)
    });
    near(above(1e13) - above(1e14), between, 1e-6);
}
