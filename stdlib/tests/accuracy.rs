//! Accuracy of the cosmology against 40-digit references and closed forms.
//!
//! `tests/published/reference.json` holds values integrated at 45 digits from
//! the published definitions; `tests/published/README.md` says how.

use serde_json::Value;
use zij_stdlib::constants::values as si;
use zij_stdlib::cosmology::{Found, Redshift};
use zij_stdlib::model::parameters::named;
use zij_stdlib::model::{self, BASES, Base, Model, Setting};

const REFERENCE: &str = include_str!("../../tests/published/reference.json");

/// Distances: PHYSICS goal 1e-12.
const DISTANCE: f64 = 1e-12;
/// Everything else of background and horizons: goal 1e-10.
const BACKGROUND: f64 = 1e-10;

/// Growth and sound horizons: goal 1e-8; 1e-10 holds.
const STRUCTURE: f64 = 1e-10;

/// Quantities of the file that other chapters of the library compute.
const NOT_COVERED_YET: &[&str] = &["virial_overdensity", "sigma_crit", "einstein_radius"];

fn base(name: &str) -> &'static Base {
    BASES.iter().find(|base| base.name == name).expect("a known base")
}

fn z(value: f64) -> Redshift {
    Redshift::new(value).expect("a redshift")
}

fn number(value: &Value) -> f64 {
    value
        .as_str()
        .expect("a string of digits")
        .parse()
        .expect("a number")
}

/// A model of the reference file.
fn reference_model(inputs: &Value) -> Model {
    let km_s_mpc = 1e3 / si::MEGAPARSEC;
    let mut settings = vec![
        (
            named("H0").expect("H0"),
            Setting::Number(number(&inputs["H0"]) * km_s_mpc),
        ),
        (named("Ωcb").expect("Ωcb"), Setting::Number(number(&inputs["Om"]))),
    ];
    let mut add = |key: &str, name: &str| {
        if let Some(value) = inputs.get(key) {
            settings.push((named(name).expect("a parameter"), Setting::Number(number(value))));
        }
    };
    add("Ode", "ΩΛ");
    add("obh2", "ωb");
    add("T", "T_CMB");
    add("Neff", "Neff");
    if let Some(Value::Array(masses)) = inputs.get("masses") {
        let joules = masses
            .iter()
            .map(|mass| number(mass) * si::ELEMENTARY_CHARGE)
            .collect();
        settings.push((named("mν").expect("mν"), Setting::List(joules)));
    }
    let name = if inputs.get("Ode").is_some() {
        "general"
    } else {
        "flat"
    };
    model::build(base(name), &settings).expect("a reference model builds")
}

/// What the library gives for a quantity of the file, in the file's unit, and
/// the tolerance; `None` for what other chapters compute.
fn computed(model: &Model, quantity: &str, args: &Value) -> Option<(Found<f64>, f64)> {
    let arg = |name: &str| number(&args[name]);
    let at = || z(arg("z"));
    let gyr = |found: Found<zij_stdlib::cosmology::Time>| found.map(|time| time.value / si::GIGAYEAR);
    let mpc = |found: Found<zij_stdlib::cosmology::Length>| found.map(|length| length.value / si::MEGAPARSEC);
    let gly =
        |found: Found<zij_stdlib::cosmology::Length>| found.map(|length| length.value / si::LIGHT_YEAR / 1e9);
    let km_s_mpc = 1e3 / si::MEGAPARSEC;
    let redshift = |found: Found<Redshift>| found.map(Redshift::get);
    let years = |value: f64| zij_stdlib::cosmology::Time::new::<uom::si::time::second>(value * si::GIGAYEAR);
    let metres =
        |value: f64| zij_stdlib::cosmology::Length::new::<uom::si::length::meter>(value * si::MEGAPARSEC);
    let gpc3 = si::GIGAPARSEC * si::GIGAPARSEC * si::GIGAPARSEC;
    let (found, tolerance) = match quantity {
        "hubble_distance" => (mpc(model.hubble_distance(Redshift::TODAY)), DISTANCE),
        "hubble_time" => (Ok(model.hubble_time().value / si::GIGAYEAR), BACKGROUND),
        "H0_si" => (
            model.hubble_rate(Redshift::TODAY).map(|rate| rate.value),
            BACKGROUND,
        ),
        "Om" => (model.cold_fraction(Redshift::TODAY), BACKGROUND),
        "Ode" => (model.dark_energy_fraction(Redshift::TODAY), BACKGROUND),
        "Ok" => (model.curvature_fraction(Redshift::TODAY), BACKGROUND),
        "Og" => (model.photon_fraction(Redshift::TODAY), BACKGROUND),
        "Onu" => (model.neutrino_fraction(Redshift::TODAY), BACKGROUND),
        "q0" => (model.deceleration(Redshift::TODAY), BACKGROUND),
        "j0" => (model.jerk(Redshift::TODAY), BACKGROUND),
        "particle_horizon_limit" => (gly(model.particle_horizon_limit()), BACKGROUND),
        "z_hubble_radius" => (redshift(model.hubble_sphere_redshift()), BACKGROUND),
        "z_event_horizon" => (redshift(model.event_horizon_redshift()), BACKGROUND),
        "z_light_cone_max" => (redshift(model.light_cone_peak()), BACKGROUND),
        "light_cone_max" => (
            model
                .light_cone_peak()
                .and_then(|peak| gly(model.proper_distance_then(peak))),
            BACKGROUND,
        ),
        "age_light_cone_max" => (
            model.light_cone_peak().and_then(|peak| gyr(model.age(peak))),
            BACKGROUND,
        ),
        "z_DA_max" => (redshift(model.angular_diameter_peak()), BACKGROUND),
        "DA_max" => (
            model
                .angular_diameter_peak()
                .and_then(|peak| mpc(model.angular_diameter_distance(peak))),
            BACKGROUND,
        ),
        "z_at_age" => (redshift(model.redshift_of_age(years(arg("age_Gyr")))), BACKGROUND),
        "z_at_lookback" => (
            redshift(model.redshift_of_lookback(years(arg("lookback_Gyr")))),
            BACKGROUND,
        ),
        "z_at_DL" => (
            redshift(model.redshift_of_luminosity_distance(metres(arg("DL_Mpc")))),
            BACKGROUND,
        ),
        "z_at_DA_low" => (
            redshift(model.redshift_of_angular_diameter_distance(metres(arg("DA_Mpc")))),
            BACKGROUND,
        ),
        "z_at_DA_high" => (
            redshift(model.far_redshift_of_angular_diameter_distance(metres(arg("DA_Mpc")))),
            BACKGROUND,
        ),
        "z_at_distance_modulus" => (
            redshift(model.redshift_of_distance_modulus(arg("mu"))),
            BACKGROUND,
        ),
        "z_matter_de_equality" => (redshift(model.matter_dark_energy_equality()), BACKGROUND),
        "z_matter_radiation_equality" => (redshift(model.matter_radiation_equality()), BACKGROUND),
        "z_acceleration" => (redshift(model.acceleration_onset()), BACKGROUND),
        "age" => (gyr(model.age(at())), BACKGROUND),
        "particle_horizon" => (gly(model.particle_horizon_comoving(at())), BACKGROUND),
        "conformal_time" => (gyr(model.conformal_time(at())), BACKGROUND),
        "event_horizon" => (gly(model.event_horizon(at())), BACKGROUND),
        "hubble_radius" => (gly(model.hubble_radius(at())), BACKGROUND),
        "critical_density" => (
            model.critical_density(at()).map(|density| density.value / 1e3),
            BACKGROUND,
        ),
        "Om_z" => (model.cold_fraction(at()), BACKGROUND),
        "E" => (model.expansion_ratio(at()), BACKGROUND),
        "H" => (
            model.hubble_rate(at()).map(|rate| rate.value / km_s_mpc),
            BACKGROUND,
        ),
        "q" => (model.deceleration(at()), BACKGROUND),
        "lookback_time" => (gyr(model.lookback_time(at())), BACKGROUND),
        "comoving_distance" => (mpc(model.comoving_distance(at())), DISTANCE),
        "transverse_comoving_distance" => (mpc(model.transverse_comoving_distance(at())), DISTANCE),
        "angular_diameter_distance" => (mpc(model.angular_diameter_distance(at())), DISTANCE),
        "luminosity_distance" => (mpc(model.luminosity_distance(at())), DISTANCE),
        "distance_modulus" => (model.distance_modulus(at()), DISTANCE),
        "kpc_per_arcsec" => (
            mpc(model.angular_diameter_distance(at())).map(|distance| distance * 1e3 * si::ARCSECOND),
            DISTANCE,
        ),
        "comoving_volume" => (
            model.comoving_volume(at()).map(|volume| volume.value / gpc3),
            DISTANCE,
        ),
        "differential_volume" => (
            model.differential_volume(at()).map(|volume| volume.value / gpc3),
            DISTANCE,
        ),
        "v_rec_now" => (
            model.recession_speed(at()).map(|speed| speed.value / 1e3),
            BACKGROUND,
        ),
        "v_rec_then" => (
            model.recession_speed_then(at()).map(|speed| speed.value / 1e3),
            BACKGROUND,
        ),
        "redshift_drift" => (
            model.redshift_drift(at()).map(|rate| rate.value * si::GIGAYEAR),
            BACKGROUND,
        ),
        "drift_velocity" => (
            model
                .velocity_drift(at())
                .map(|drift| drift.value * 100.0 * si::JULIAN_YEAR),
            BACKGROUND,
        ),
        "angular_diameter_distance_between" => (
            mpc(model.angular_diameter_distance_between(z(arg("zl")), z(arg("zs")))),
            DISTANCE,
        ),
        "curvature_radius" => (gly(model.curvature_radius()), BACKGROUND),
        "total_volume" => (model.total_volume().map(|volume| volume.value / gpc3), BACKGROUND),
        "virial_overdensity" => (model.virial_overdensity(at()), BACKGROUND),
        "growth_rate" => (model.growth_rate(at()), STRUCTURE),
        "growth_factor" => (model.growth_factor(at()), STRUCTURE),
        "z_drag" => (redshift(model.drag_epoch()), BACKGROUND),
        "z_star" => (redshift(model.last_scattering()), BACKGROUND),
        "sound_horizon_drag" => (mpc(model.sound_horizon_drag()), STRUCTURE),
        "sound_horizon_star" => (mpc(model.sound_horizon_star()), STRUCTURE),
        "sound_horizon" => (mpc(model.sound_horizon(at())), STRUCTURE),
        "acoustic_angle_100" => (model.acoustic_angle_rad().map(|angle| 100.0 * angle), STRUCTURE),
        other => {
            assert!(NOT_COVERED_YET.contains(&other), "no test for {other}");
            return None;
        }
    };
    Some((found, tolerance))
}

#[test]
fn reference_values_are_met() {
    let reference: Value = serde_json::from_str(REFERENCE).expect("the reference file is JSON");
    let (mut compared, mut failures) = (0, Vec::new());
    let models = reference["models"].as_object().expect("models");
    for (name, inputs) in models {
        let model = reference_model(inputs);
        let entries = reference["entries"].as_array().expect("entries");
        for entry in entries.iter().filter(|entry| entry["model"] == name.as_str()) {
            let quantity = entry["quantity"].as_str().expect("a quantity");
            let Some((found, tolerance)) = computed(&model, quantity, &entry["args"]) else {
                continue;
            };
            compared += 1;
            let expect = number(&entry["value"]);
            let what = format!("{name} {quantity} {}", entry["args"]);
            match found {
                // The file has no horizon as an infinite one.
                Err(error) if expect.is_infinite() => {
                    assert!(error.0.contains("no event horizon"), "{what}: {error}");
                }
                Err(error) => failures.push(format!("{what}: {error}")),
                Ok(value) if value == expect => {}
                Ok(value) => {
                    let scale = if expect == 0.0 { 1.0 } else { expect.abs() };
                    let error = (value - expect).abs() / scale;
                    if error.is_nan() || error > tolerance {
                        failures.push(format!("{what}: {value} for {expect}, {error:.1e} off"));
                    }
                }
            }
        }
    }
    assert!(
        failures.is_empty(),
        "{} of {compared}:\n{}",
        failures.len(),
        failures.join("\n")
    );
    assert!(compared > 1000, "only {compared} values were compared");
}
