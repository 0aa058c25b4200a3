//! The edges of redshift and of physics: closed forms, limits, and models
//! that never had a big bang, fall back, or are torn apart.

#[path = "edges/table.rs"]
mod table;

use std::sync::Arc;
use table::EDGES;
use zij_stdlib::catalogue::{Definition, entries};
use zij_stdlib::constants::values as si;
use zij_stdlib::cosmology::{Found, Length, Redshift, Time};
use zij_stdlib::model::parameters::named;
use zij_stdlib::model::{self, BASES, Model, Setting};
use zij_stdlib::numerics::quadrature::adaptive;

fn km_s_mpc(value: f64) -> f64 {
    value * si::KM_PER_S_PER_MPC
}

fn settings(numbers: &[(&str, f64)]) -> Vec<(usize, Setting)> {
    let one = |(name, value): &(&str, f64)| (named(name).expect("a parameter"), Setting::Number(*value));
    numbers.iter().map(one).collect()
}

fn build(name: &str, numbers: &[(&str, f64)]) -> Model {
    let base = BASES.iter().find(|base| base.name == name).expect("a known base");
    model::build(base, &settings(numbers)).expect("a model")
}

/// H0 = 70 km/s/Mpc and more.
fn with_h0(name: &str, numbers: &[(&str, f64)]) -> Model {
    let mut all = vec![("H0", km_s_mpc(70.0))];
    all.extend(numbers);
    build(name, &all)
}

fn z(value: f64) -> Redshift {
    Redshift::new(value).expect("a redshift")
}

/// Open, with neutrinos of these masses in eV.
fn with_masses(electronvolts: &[f64]) -> Model {
    let numbers = [
        ("H0", km_s_mpc(70.0)),
        ("Ωcb", 0.25),
        ("ΩΛ", 0.7),
        ("T_CMB", 2.7255),
        ("Neff", 3.044),
    ];
    let mut given = settings(&numbers);
    let joules = electronvolts.iter().map(|mass| mass * si::ELEMENTARY_CHARGE);
    given.push((named("mν").expect("mν"), Setting::List(joules.collect())));
    let base = BASES.iter().find(|base| base.name == "general").expect("general");
    model::build(base, &given).expect("a model")
}

fn in_hubble_lengths(model: &Model, found: Found<Length>) -> f64 {
    let unit = model.hubble_distance(Redshift::TODAY).expect("c/H0").value;
    found.expect("a length").value / unit
}

fn in_hubble_times(model: &Model, found: Found<Time>) -> f64 {
    found.expect("a time").value / model.hubble_time().value
}

#[track_caller]
fn near(value: f64, expect: f64, relative: f64) {
    assert!((value / expect - 1.0).abs() <= relative, "{value} for {expect}");
}

#[test]
fn thirty_digit_integrals_are_met_from_the_far_future_to_a_redshift_of_a_billion() {
    let radiation = [("T_CMB", 2.7255), ("Neff", 3.046)];
    let make = |name: &str, numbers: &[(&str, f64)]| {
        let mut all = radiation.to_vec();
        all.extend(numbers);
        with_h0(name, &all)
    };
    let models = [
        ("cpl", make("flat", &[("Ωm", 0.3), ("w0", -0.9), ("wa", -0.2)])),
        ("closed", make("general", &[("Ωm", 0.35), ("ΩΛ", 0.75)])),
        ("phantom", make("flat", &[("Ωm", 0.3), ("w0", -1.3)])),
        ("open", make("general", &[("Ωm", 0.25), ("ΩΛ", 0.6)])),
    ];
    let models = models.into_iter().chain([
        ("light", with_masses(&[1e-6, 1e-6, 1e-6])),
        ("massive", with_masses(&[0.05, 0.05, 0.1])),
        ("heavy", with_masses(&[10.0])),
    ]);
    let models: Vec<_> = models.collect();
    let mut failures = Vec::new();
    for (name, quantity, redshift, expect) in EDGES {
        let model = &models.iter().find(|(known, _)| known == name).expect("a model").1;
        let at = z(*redshift);
        let value = match *quantity {
            "chi" => in_hubble_lengths(model, model.comoving_distance(at)),
            "tl" => in_hubble_times(model, model.lookback_time(at)),
            "age" => in_hubble_times(model, model.age(at)),
            "eta" => in_hubble_times(model, model.conformal_time(at)),
            "eh" => in_hubble_lengths(model, model.event_horizon(at)) * (1.0 + redshift),
            other => panic!("no test for {other}"),
        };
        // The goal is 1e-12 to z = 1e4 and 1e-10 beyond; 1e-12 holds for all.
        let error = (value / expect - 1.0).abs();
        if error.is_nan() || error > 1e-12 {
            failures.push(format!(
                "{name} {quantity}({redshift}): {value} for {expect}, {error:.1e} off"
            ));
        }
    }
    assert!(failures.is_empty(), "{}", failures.join("\n"));
}

#[test]
fn einstein_de_sitter_is_closed_form() {
    // D_C = 2 (1 − (1+z)^−½), t = ⅔ (1+z)^−3/2: Weinberg 2008, Cosmology, sec. 1.5.
    let model = build("einstein_de_sitter", &[]);
    for redshift in [-0.999, -0.3, 1e-8, 0.01, 1.0, 1.25, 3.0, 1e3, 1e8] {
        let stretch = 1.0 + redshift;
        let expect = -2.0 * libm::expm1(-0.5 * libm::log1p(redshift));
        near(
            in_hubble_lengths(&model, model.comoving_distance(z(redshift))),
            expect,
            1e-13,
        );
        near(
            in_hubble_times(&model, model.age(z(redshift))),
            2.0 / 3.0 * libm::pow(stretch, -1.5),
            1e-13,
        );
        near(
            in_hubble_times(&model, model.conformal_time(z(redshift))),
            2.0 / libm::sqrt(stretch),
            1e-13,
        );
    }
    near(model.angular_diameter_peak().expect("a peak").get(), 1.25, 1e-12);
    let largest = model.angular_diameter_distance(z(1.25));
    near(in_hubble_lengths(&model, largest), 8.0 / 27.0, 1e-14);
    let none = model.event_horizon(Redshift::TODAY).expect_err("none");
    assert!(none.0.contains("no event horizon"), "{none}");
    assert!(
        model
            .particle_horizon_limit()
            .expect_err("none")
            .0
            .contains("without limit")
    );
}

#[test]
fn milne_and_de_sitter_are_closed_forms() {
    // Hogg 1999 with E = 1 + z and E = 1.
    let (milne, de_sitter) = (build("milne", &[]), build("de_sitter", &[]));
    for redshift in [-0.99, 1e-8, 0.1, 1.0, 3.0, 1e3, 1e9] {
        near(
            in_hubble_lengths(&milne, milne.comoving_distance(z(redshift))),
            libm::log1p(redshift),
            1e-13,
        );
        let across = redshift * (1.0 + 0.5 * redshift) / (1.0 + redshift);
        near(
            in_hubble_lengths(&milne, milne.transverse_comoving_distance(z(redshift))),
            across,
            1e-12,
        );
        near(
            in_hubble_times(&milne, milne.age(z(redshift))),
            1.0 / (1.0 + redshift),
            1e-13,
        );
        near(
            in_hubble_lengths(&de_sitter, de_sitter.comoving_distance(z(redshift))),
            redshift,
            1e-13,
        );
        near(
            in_hubble_times(&de_sitter, de_sitter.lookback_time(z(redshift))),
            libm::log1p(redshift),
            1e-13,
        );
        near(
            in_hubble_lengths(&de_sitter, de_sitter.event_horizon(z(redshift))),
            1.0,
            1e-13,
        );
    }
    assert!(milne.particle_horizon(Redshift::TODAY).is_err());
    assert!(de_sitter.age(Redshift::TODAY).is_err());
    assert!(de_sitter.particle_horizon(Redshift::TODAY).is_err());
    assert!(milne.angular_diameter_peak().is_err());
}

#[test]
fn radiation_alone_is_closed_form() {
    // E = (1+z)²: D_C = z/(1+z), t = ½ (1+z)^−2.
    let model = with_h0("flat", &[("Ωm", 0.0), ("T_CMB", 27.6), ("Neff", 3.046)]);
    let dark = model.budget().dark;
    assert!(dark > 0.0 && dark < 0.3, "{dark}");
    let radiation = 1.0 - dark;
    // With Λ: t = asinh(√(ΩΛ/Ωr) (1+z)^−2)/(2√ΩΛ).
    for redshift in [-0.9, 1e-6, 1.0, 1e4, 1e9] {
        let square = (1.0 + redshift) * (1.0 + redshift);
        let expect = libm::asinh(libm::sqrt(dark / radiation) / square) / (2.0 * libm::sqrt(dark));
        near(in_hubble_times(&model, model.age(z(redshift))), expect, 1e-12);
    }
}

#[test]
fn matter_with_a_cosmological_constant_has_a_closed_age() {
    // t = (2/(3√ΩΛ)) asinh(√(ΩΛ/Ωm) (1+z)^−3/2): Carroll, Press & Turner 1992, eq. 17.
    let model = build("concordance", &[]);
    for redshift in [-0.999, -0.5, 0.0, 1.0, 10.0, 1e4, 1e9] {
        let argument = libm::sqrt(0.7 / 0.3) * libm::pow(1.0 + redshift, -1.5);
        let expect = 2.0 / 3.0 / libm::sqrt(0.7) * libm::asinh(argument);
        near(in_hubble_times(&model, model.age(z(redshift))), expect, 1e-12);
    }
    near(
        model.acceleration_onset().expect("an epoch").get(),
        libm::cbrt(2.0 * 0.7 / 0.3) - 1.0,
        1e-12,
    );
}

#[test]
fn closed_dust_follows_the_cycloid() {
    // a = (Ωm/2(Ωm−1)) (1 − cos θ), H0 t = (Ωm/2(Ωm−1)^1.5) (θ − sin θ).
    let matter = 2.0;
    let model = with_h0("general", &[("Ωm", matter), ("ΩΛ", 0.0)]);
    let scale = matter / 2.0 / libm::pow(matter - 1.0, 1.5);
    for redshift in [-0.4999, -0.49, -0.3, 0.0, 1.0, 100.0, 1e6] {
        let cosine = 1.0 - 2.0 * (matter - 1.0) / matter / (1.0 + redshift);
        let theta = libm::acos(cosine);
        // θ − sin θ loses digits for small θ: compare only where it keeps them.
        let tolerance = if theta < 0.05 { 1e-5 } else { 1e-12 };
        near(
            in_hubble_times(&model, model.age(z(redshift))),
            scale * (theta - libm::sin(theta)),
            tolerance,
        );
        let tolerance = if theta < 0.05 { 1e-9 } else { 1e-12 };
        near(
            in_hubble_times(&model, model.conformal_time(z(redshift))),
            theta / libm::sqrt(matter - 1.0),
            tolerance,
        );
    }
    near(model.turnaround().expect("it turns").get(), -0.5, 1e-14);
    near(
        in_hubble_times(&model, model.turnaround_time()),
        scale * std::f64::consts::PI,
        1e-12,
    );
    let crunch = model.big_crunch_time().expect("it ends");
    near(
        in_hubble_times(&model, Ok(crunch)),
        2.0 * scale * std::f64::consts::PI,
        1e-12,
    );
    // On the way back: at θ = 3π/2 as at θ = π/2, a = 1.
    let theta = 1.5 * std::f64::consts::PI;
    let late = model.hubble_time() * (scale * (theta - libm::sin(theta)));
    near(model.scale_factor_at(late).expect("collapsing"), 1.0, 1e-12);
    assert!(model.scale_factor_at(crunch * 1.01).is_err());
    assert!(
        model
            .age(z(-0.6))
            .expect_err("never")
            .0
            .contains("turns round at z = -0.5")
    );
    // Light can go round once from bang to crunch: θ runs through 2π.
    let limit = in_hubble_lengths(&model, model.particle_horizon_limit());
    near(limit, 2.0 * std::f64::consts::PI, 1e-12);
}

#[test]
fn light_sent_today_may_arrive_in_the_collapse() {
    // The cycloid again: light sent at θ₀ from where light of θ comes now
    // arrives at 2θ₀ − θ.
    let matter = 10.0;
    let model = with_h0("general", &[("Ωm", matter), ("ΩΛ", 0.0)]);
    let scale = matter / 2.0 / libm::pow(matter - 1.0, 1.5);
    let theta = |redshift: f64| libm::acos(1.0 - 2.0 * (matter - 1.0) / matter / (1.0 + redshift));
    for redshift in [0.1, 1.0, 5.0] {
        let arrival = 2.0 * theta(0.0) - theta(redshift);
        let expect = scale * (arrival - libm::sin(arrival));
        near(
            in_hubble_times(&model, model.arrival_time(z(redshift))),
            expect,
            1e-12,
        );
    }
    let turn = model.turnaround_time().expect("it turns");
    assert!(model.arrival_time(z(5.0)).expect("arrives") > turn);
}

#[test]
fn curvature_vanishes_smoothly_from_both_sides() {
    let flat = with_h0("general", &[("Ωm", 0.3), ("ΩΛ", 0.7)]);
    for redshift in [0.1, 1.0, 1100.0] {
        let at = z(redshift);
        let expect = flat.luminosity_distance(at).expect("flat").value;
        let volume = flat.comoving_volume(at).expect("flat").value;
        for curvature in [1e-9, -1e-9, 1e-13, -1e-13] {
            let model = with_h0("general", &[("Ωm", 0.3), ("ΩΛ", 0.7 - curvature)]);
            near(
                model.luminosity_distance(at).expect("curved").value,
                expect,
                20.0 * f64::abs(curvature) + 1e-14,
            );
            near(
                model.comoving_volume(at).expect("curved").value,
                volume,
                60.0 * f64::abs(curvature) + 1e-14,
            );
        }
    }
}

#[test]
fn neutrinos_lose_their_mass_smoothly() {
    let numbers = [
        ("H0", km_s_mpc(70.0)),
        ("Ωcb", 0.3),
        ("T_CMB", 2.7255),
        ("Neff", 3.046),
    ];
    let massless = build("flat", &numbers);
    for (electronvolts, tolerance) in [(1e-12, 1e-14), (1e-6, 1e-8)] {
        let mut given = settings(&numbers);
        let masses = vec![electronvolts * si::ELEMENTARY_CHARGE; 3];
        given.push((named("mν").expect("mν"), Setting::List(masses)));
        let base = BASES.iter().find(|base| base.name == "flat").expect("flat");
        let massive = model::build(base, &given).expect("a model");
        for redshift in [0.1, 1.0, 1100.0, 1e9] {
            let expect = massless.comoving_distance(z(redshift)).expect("massless").value;
            near(
                massive.comoving_distance(z(redshift)).expect("massive").value,
                expect,
                tolerance,
            );
            let expect = massless.age(z(redshift)).expect("massless").value;
            near(
                massive.age(z(redshift)).expect("massive").value,
                expect,
                tolerance,
            );
        }
    }
}

fn given_w(w: impl Fn(f64) -> Option<f64> + Send + Sync + 'static) -> Model {
    let mut given = settings(&[("H0", km_s_mpc(70.0)), ("Ωm", 0.3)]);
    given.push((named("w").expect("w"), Setting::Function(Arc::new(w))));
    let base = BASES.iter().find(|base| base.name == "flat").expect("flat");
    model::build(base, &given).expect("a model")
}

#[test]
fn a_given_equation_of_state_agrees_with_the_built_in_ones() {
    let linear = with_h0("flat", &[("Ωm", 0.3), ("w0", -0.9), ("wa", -0.2)]);
    let given = given_w(|z| Some(-0.9 - 0.2 * z / (1.0 + z)));
    for redshift in [-0.9, -0.1, 1e-6, 0.5, 3.0, 1100.0, 1e8] {
        let at = z(redshift);
        let expect = linear.comoving_distance(at).expect("linear").value;
        near(given.comoving_distance(at).expect("given").value, expect, 1e-12);
        near(
            given.age(at).expect("given").value,
            linear.age(at).expect("linear").value,
            1e-12,
        );
        near(
            given.deceleration(at).expect("given"),
            linear.deceleration(at).expect("linear"),
            1e-11,
        );
        near(
            given.jerk(at).expect("given"),
            linear.jerk(at).expect("linear"),
            1e-9,
        );
    }
}

#[test]
fn a_given_equation_of_state_may_jump_or_end() {
    // w = −1 below z = 1 and 0 above: dark energy joins the matter.
    let jump = given_w(|z| Some(if z < 1.0 { -1.0 } else { 0.0 }));
    let expect = libm::sqrt(0.3 * 27.0 + 0.7 * 27.0 / 8.0);
    near(jump.expansion_ratio(z(2.0)).expect("E"), expect, 1e-12);
    let ends = given_w(|z| (z < 2.0).then_some(-1.0));
    let concordance = build("concordance", &[]);
    let expect = concordance.comoving_distance(z(1.9)).expect("a distance").value;
    near(
        ends.comoving_distance(z(1.9)).expect("a distance").value,
        expect,
        1e-12,
    );
    assert!(
        ends.comoving_distance(z(2.1))
            .expect_err("none")
            .0
            .contains("no value beyond z = 2.0")
    );
    assert!(
        ends.age(Redshift::TODAY)
            .expect_err("none")
            .0
            .contains("the beginning is unknown")
    );
    let nowhere = given_w(|_| None);
    assert!(
        nowhere
            .comoving_distance(z(0.1))
            .expect_err("none")
            .0
            .contains("no value today")
    );
    let noise =
        given_w(|z| Some(-1.0 + (z.to_bits().wrapping_mul(0x9E37_79B9_7F4A_7C15) >> 40) as f64 * 1e-8));
    assert!(
        noise
            .comoving_distance(z(0.1))
            .expect_err("none")
            .0
            .contains("varies too fast")
    );
}

#[test]
fn a_bounce_is_recognised() {
    // Ωm = 0.1, ΩΛ = 1.5: no big bang (Carroll, Press & Turner 1992, fig. 1).
    let model = with_h0("general", &[("Ωm", 0.1), ("ΩΛ", 1.5)]);
    assert!(
        model.notes().iter().any(|note| note.contains("bounced")),
        "{:?}",
        model.notes()
    );
    assert!(
        model
            .age(Redshift::TODAY)
            .expect_err("none")
            .0
            .contains("no big bang")
    );
    assert!(
        model
            .comoving_distance(z(1e3))
            .expect_err("none")
            .0
            .contains("bounced at z = ")
    );
    assert!(model.comoving_distance(z(0.5)).expect("before the bounce").value > 0.0);
    assert!(
        model
            .event_horizon(Redshift::TODAY)
            .expect("a horizon")
            .value
            .is_finite()
    );
    // At the bounce itself the distance is finite: light turned with it.
    let history = model.expansion();
    assert!(history.square(1.5) > 0.0);
}

#[test]
fn a_loitering_model_is_old() {
    // Just below the critical ΩΛ of Ωm = 0.3 in closed space.
    let model = with_h0("general", &[("Ωm", 0.3), ("ΩΛ", 1.713)]);
    let age = in_hubble_times(&model, model.age(Redshift::TODAY));
    assert!(age > 1.5 && age.is_finite(), "{age}");
    let rest = model.age(z(50.0)).expect("a big bang").value;
    let passed = model.lookback_time(z(50.0)).expect("a past").value;
    near(
        rest + passed,
        model.age(Redshift::TODAY).expect("an age").value,
        1e-12,
    );
}

#[test]
fn phantom_energy_ends_in_a_rip() {
    // ≈ ⅔ |1+w|⁻¹ H0⁻¹ (1−Ωm)^−½: Caldwell, Kamionkowski & Weinberg 2003, eq. 1 (an approximation).
    let model = with_h0("flat", &[("Ωm", 0.3), ("w0", -1.5)]);
    let rip = in_hubble_times(&model, model.big_rip_time());
    near(rip, 2.0 / 3.0 / 0.5 / libm::sqrt(0.7), 0.05);
    let ages = model.age(Redshift::TODAY).expect("an age") + model.big_rip_time().expect("a rip");
    assert!(model.scale_factor_at(ages * 1.001).is_err());
    assert!(model.scale_factor_at(ages * 0.999).expect("before") > 100.0);
    assert!(build("concordance", &[]).big_rip_time().is_err());
}

#[test]
fn inverses_return_what_was_put_in() {
    let models = [
        build("planck2018", &[]),
        build("planck2018", &[("Ωk", -0.02)]),
        with_h0("flat", &[("Ωm", 0.3), ("w0", -1.2), ("wa", 0.3)]),
    ];
    for model in &models {
        for redshift in [1e-8, 1e-3, 0.3, 1.0, 7.0, 1100.0, 1e6] {
            let at = z(redshift);
            let back = |found: Found<Redshift>| found.expect("a redshift").get();
            let distance = model.comoving_distance(at).expect("a distance");
            near(
                back(model.redshift_of_comoving_distance(distance)),
                redshift,
                1e-9,
            );
            near(
                back(model.redshift_of_lookback(model.lookback_time(at).expect("a time"))),
                redshift,
                1e-4,
            );
            let distance = model.luminosity_distance(at).expect("a distance");
            near(
                back(model.redshift_of_luminosity_distance(distance)),
                redshift,
                1e-11,
            );
        }
        for redshift in [-0.9, -0.5, 0.1, 5.0, 1e3, 1e8] {
            let age = model.age(z(redshift)).expect("an age");
            near(
                model.redshift_of_age(age).expect("a redshift").get(),
                redshift,
                1e-11,
            );
            let distance = model.comoving_distance(z(redshift)).expect("a distance");
            let tolerance = if redshift < 1e4 { 1e-9 } else { 1e-2 };
            near(
                model
                    .redshift_of_comoving_distance(distance)
                    .expect("a redshift")
                    .get(),
                redshift,
                tolerance,
            );
        }
    }
}

#[test]
fn identities_of_horizons_hold() {
    let model = build("planck2018", &[]);
    let today = Redshift::TODAY;
    // Proper particle horizon = comoving one over 1 + z; the two meet today.
    let past = model.particle_horizon(today).expect("a horizon");
    near(
        past.value,
        model.particle_horizon_comoving(today).expect("a horizon").value,
        1e-15,
    );
    // What is on the event horizon today: its light never arrives.
    let edge = model.event_horizon_redshift().expect("an edge").get();
    assert!(
        model
            .arrival_time(z(edge + 1e-6))
            .expect("never")
            .value
            .is_infinite()
    );
    assert!(
        model
            .arrival_time(z(edge - 1e-6))
            .expect("late")
            .value
            .is_finite()
    );
    // Its last sight is today.
    let last = model.last_sight(z(edge)).expect("a time");
    near(last.value, model.age(today).expect("an age").value, 1e-9);
    // The widest place of the light cone recedes at c: flat, so D_A peaks there too.
    let peak = model.light_cone_peak().expect("a peak");
    near(
        model.recession_speed_then(peak).expect("a speed").value,
        si::SPEED_OF_LIGHT,
        1e-12,
    );
    near(
        model.angular_diameter_peak().expect("a peak").get(),
        peak.get(),
        1e-12,
    );
    assert!(
        model
            .light_cone(model.age(today).expect("an age"))
            .expect("nothing")
            .value
            < 1e10
    );
}

#[test]
fn no_model_panics_hangs_or_returns_nonsense() {
    let t = ("T_CMB", 2.7255);
    let cases: Vec<Vec<(&str, f64)>> = vec![
        vec![("Ωm", 0.3), ("ΩΛ", 0.7)],
        vec![("Ωm", 0.0), ("ΩΛ", 0.0)],
        vec![("Ωm", 0.0), ("ΩΛ", 0.0), t],
        vec![("Ωm", 0.0), ("ΩΛ", 2.0)],
        vec![("Ωm", 0.0), ("ΩΛ", -1.0)],
        vec![("Ωm", 0.1), ("ΩΛ", 1.5)],
        vec![("Ωm", 0.3), ("ΩΛ", 1.7134), t],
        vec![("Ωm", 5.0), ("ΩΛ", 0.0), t],
        vec![("Ωm", 100.0), ("ΩΛ", -50.0), t],
        vec![("Ωm", 1e-9), ("ΩΛ", 0.99), t],
        vec![("Ωm", 0.3), ("ΩΛ", 0.7), ("w0", -5.0)],
        vec![("Ωm", 0.3), ("ΩΛ", 0.7), ("w0", 1.0)],
        vec![("Ωm", 0.3), ("ΩΛ", 0.7), ("w0", -1.0), ("wa", 3.0)],
        vec![("Ωm", 0.3), ("ΩΛ", 0.7), ("w0", -1.0), ("wa", -30.0)],
        vec![("Ωm", 0.3), ("ΩΛ", 0.7), ("w0", -50.0), ("wa", 80.0)],
        vec![("Ωm", 0.3), ("ΩΛ", -1e5)],
        vec![("Ωm", 1e5), ("ΩΛ", 1e5), t],
    ];
    let may_be_infinite = ["arrival_time", "arrival_wait"];
    for numbers in &cases {
        let model = with_h0("general", numbers);
        for entry in entries() {
            let mut values = Vec::new();
            match entry.definition {
                Definition::ModelValue(value) => values.push(value(&model)),
                Definition::Cosmology(function) => {
                    for x in [
                        -1.0,
                        -0.999_999,
                        -0.3,
                        0.0,
                        1e-8,
                        0.5,
                        3.0,
                        1e3,
                        1e9,
                        1e10,
                        1e17,
                        1e25,
                        f64::INFINITY,
                    ] {
                        let arguments: Vec<f64> = entry
                            .arguments
                            .iter()
                            .enumerate()
                            .map(|(place, _)| x * (1 + place) as f64)
                            .collect();
                        values.push(function(&model, &arguments));
                    }
                }
                Definition::Constant(..) | Definition::Function(_) => {}
            }
            for value in values {
                let allowed = match &value {
                    Ok(number) => {
                        number.is_finite() || (number.is_infinite() && may_be_infinite.contains(&entry.name))
                    }
                    Err(error) => !error.0.is_empty() && !error.0.ends_with('.') && !error.0.contains("NaN"),
                };
                assert!(allowed, "{} in {numbers:?}: {value:?}", entry.name);
            }
        }
    }
}

/// `∫₀ᵉ f` in parts that grow outward: with w = −1000 the dark energy is gone
/// within a thousandth of today.
fn in_parts(end: f64, f: impl Fn(f64) -> f64) -> f64 {
    let ends = [0.0, 1e-4, 1e-3, 1e-2, 0.1, 1.0].map(|share| share * end);
    ends.windows(2)
        .map(|part| adaptive(part[0], part[1], 1e-13, &f))
        .sum()
}

/// Distances and times of a model against quadrature without tables.
fn agrees_with_plain_quadrature(model: &Model) {
    for redshift in [-0.2, 0.1, 2.0, 300.0] {
        let (Ok(distance), Ok(passed)) = (
            model.comoving_distance(z(redshift)),
            model.lookback_time(z(redshift)),
        ) else {
            continue;
        };
        let unit = model.hubble_distance(Redshift::TODAY).expect("c/H0").value;
        let end = libm::log1p(redshift);
        let rate = |x: f64| model.expansion().rate(libm::exp(x));
        let chi = in_parts(end, |x| libm::exp(x) / rate(x));
        let elapsed = in_parts(end, |x| 1.0 / rate(x));
        // A model that nearly stops loses digits in E² itself.
        near(distance.value / unit, chi, 1e-8);
        near(passed.value / model.hubble_time().value, elapsed, 1e-8);
        if let (Ok(then), Ok(now)) = (model.age(z(redshift)), model.age(Redshift::TODAY)) {
            near((then + passed).value, now.value, 1e-8);
        }
    }
}

/// A number between 0 and 1 from a linear congruential generator (Knuth 1997,
/// The Art of Computer Programming 2, sec. 3.3.4).
fn next(state: &mut u64) -> f64 {
    *state = state
        .wrapping_mul(6_364_136_223_846_793_005)
        .wrapping_add(1_442_695_040_888_963_407);
    (*state >> 11) as f64 / 9_007_199_254_740_992.0
}

/// A number of either sign over many orders of magnitude, or a plain one.
fn wild(state: &mut u64) -> f64 {
    let sign = if next(state) < 0.5 { -1.0 } else { 1.0 };
    match (next(state) * 4.0) as u32 {
        0 => 0.0,
        1 => sign * libm::exp10(12.0 * next(state) - 8.0),
        _ => sign * 3.0 * next(state),
    }
}

#[test]
fn models_drawn_at_random_do_not_panic_or_return_nonsense() {
    let mut state = 42;
    let rounds = 100;
    let mut built = 0;
    for round in 0..rounds {
        let numbers = [
            ("Ωm", wild(&mut state).abs()),
            ("ΩΛ", wild(&mut state)),
            ("w0", wild(&mut state)),
            ("wa", wild(&mut state)),
            ("T_CMB", 3.0 * wild(&mut state).abs()),
            (
                "H0",
                km_s_mpc(70.0) * libm::exp10(wild(&mut state).clamp(-9.0, 9.0)),
            ),
        ];
        let base = BASES.iter().find(|base| base.name == "general").expect("general");
        let Ok(model) = model::build(base, &settings(&numbers)) else {
            continue;
        };
        built += 1;
        for entry in entries() {
            let mut values = Vec::new();
            match entry.definition {
                Definition::ModelValue(value) => values.push(value(&model)),
                Definition::Cosmology(function) => {
                    for x in [-0.9, 1e-3, 2.0, 1e4, 1e17] {
                        let arguments: Vec<f64> = (0..entry.arguments.len())
                            .map(|place| x * (1 + place) as f64)
                            .collect();
                        values.push(function(&model, &arguments));
                    }
                }
                Definition::Constant(..) | Definition::Function(_) => {}
            }
            for value in values {
                let never = ["arrival_time", "arrival_wait"].contains(&entry.name);
                let sound = value
                    .as_ref()
                    .is_ok_and(|x| x.is_finite() || (never && x.is_infinite()))
                    || value.is_err();
                assert!(sound, "round {round}, {} in {numbers:?}: {value:?}", entry.name);
            }
        }
        agrees_with_plain_quadrature(&model);
    }
    assert!(built > rounds / 3, "only {built} were built");
}
