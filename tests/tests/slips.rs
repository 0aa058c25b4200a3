//! Slips planted and found: wrong numbers made by a known mistake, right
//! numbers, and wrong numbers from nowhere.
//!
//! The wrong numbers are computed by the mistaken expression itself, written
//! in the language and run apart from the search. Every sheet is generated
//! from a fixed seed; no physical value is expected here.

use std::fmt::Write;
use zij_tests::repository;
use zij_tests::subject::{Judged, judged, numbers, run};

/// SplitMix64 (Steele, Lea & Flood 2014, OOPSLA): a stream of numbers that
/// is the same everywhere.
struct Draws(u64);

impl Draws {
    fn next(&mut self) -> f64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut x = self.0;
        x = (x ^ (x >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        x = (x ^ (x >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        ((x ^ (x >> 31)) >> 11) as f64 / (1_u64 << 53) as f64
    }

    fn between(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * self.next()
    }

    fn pick<'a, T: ?Sized>(&mut self, all: &[&'a T]) -> &'a T {
        all[(self.next() * all.len() as f64) as usize]
    }
}

/// A claim, the mistake in it, and the redshifts for which both are met.
struct Plant {
    key: &'static str,
    right: &'static str,
    wrong: Wrong,
    unit: &'static str,
    redshifts: (f64, f64),
}

#[derive(Clone, Copy)]
enum Wrong {
    /// Another expression, under the same model.
    Expression(&'static str),
    /// The same expression under another model.
    Model(&'static str, &'static str),
    /// The right number times this.
    Times(f64),
    /// The right number with its digits miscopied.
    Digits(fn(&str, f64) -> String),
}

const fn plant(key: &'static str, right: &'static str, unit: &'static str, wrong: &'static str) -> Plant {
    Plant {
        key,
        right,
        wrong: Wrong::Expression(wrong),
        unit,
        redshifts: (0.3, 8.0),
    }
}

const fn times(key: &'static str, right: &'static str, unit: &'static str, factor: f64) -> Plant {
    Plant {
        wrong: Wrong::Times(factor),
        ..plant(key, right, unit, "")
    }
}

const fn model(
    key: &'static str,
    right: &'static str,
    unit: &'static str,
    (stated, taken): (&'static str, &'static str),
) -> Plant {
    Plant {
        wrong: Wrong::Model(stated, taken),
        ..plant(key, right, unit, "")
    }
}

const fn copied(
    key: &'static str,
    right: &'static str,
    unit: &'static str,
    how: fn(&str, f64) -> String,
) -> Plant {
    Plant {
        wrong: Wrong::Digits(how),
        ..plant(key, right, unit, "")
    }
}

const LY_PER_PC: f64 = 3.261_563_777_167_433_6;

/// `z` stands for the redshift, `y` for a larger one.
const PLANTS: &[Plant] = &[
    plant("luminosity-for-comoving", "D_C(z)", "Mpc", "D_L(z)"),
    plant("luminosity-for-angular", "D_A(z)", "Mpc", "D_L(z)"),
    plant("angular-for-comoving", "D_C(z)", "Mpc", "D_A(z)"),
    plant("angular-for-luminosity", "D_L(z)", "Gpc", "D_A(z)"),
    plant("comoving-for-luminosity", "D_L(z)", "Gpc", "D_M(z)"),
    plant("comoving-for-angular", "D_A(z)", "Gly", "D_M(z)"),
    plant(
        "comoving-for-angular",
        "30 kpc/D_A(z)",
        "arcsec",
        "30 kpc/(D_M(z) [Mpc by hand])",
    ),
    plant(
        "light-travel-for-comoving",
        "D_C(z)",
        "Gly",
        "light_travel_distance(z)",
    ),
    plant(
        "comoving-for-light-travel",
        "light_travel_distance(z)",
        "Gly",
        "D_C(z)",
    ),
    plant(
        "light-travel-for-comoving",
        "particle_horizon()",
        "Gly",
        "c*age()",
    ),
    plant("age-for-lookback", "lookback_time(z)", "Gyr", "age(z)"),
    plant("lookback-for-age", "age(z)", "Gyr", "lookback_time(z)"),
    plant(
        "speed-then-for-now",
        "recession_speed(z)",
        "c",
        "recession_speed_then(z)",
    ),
    plant(
        "speed-now-for-then",
        "recession_speed_then(z)",
        "c",
        "recession_speed(z)",
    ),
    plant("v-is-cz", "recession_speed(z)", "c", "c*z"),
    plant(
        "relativistic-doppler",
        "recession_speed(z)",
        "km/s",
        "doppler_speed(z)",
    ),
    plant("hubble-law-low-z", "D_L(z)", "Mpc", "c*z/H0"),
    plant(
        "subtracted-angular-distances",
        "D_A(z, y)",
        "Mpc",
        "D_A(y) - D_A(z)",
    ),
    plant(
        "subtracted-angular-distances",
        "critical_surface_density(z, y)",
        "Msun/pc^2",
        "c^2/(4*pi*G) * D_A(y)/(D_A(z)*(D_A(z) - D_A(y)))*(-1)",
    ),
    plant("today-for-then", "hubble_radius(z)", "Gly", "c/H0"),
    plant(
        "mean-for-critical",
        "critical_density(z)",
        "Msun/kpc^3",
        "critical_density(z)*Ωm(z)",
    ),
    plant(
        "observed-for-rest",
        "observed_duration(21.7 d, z)",
        "d",
        "21.7 d*(1+z)^2",
    ),
    plant(
        "dropped-1+z",
        "burst_energy(3.1 Jy ms, 1.4 GHz, z)",
        "erg",
        "burst_energy(3.1 Jy ms, 1.4 GHz, z)/(1+z)",
    ),
    plant(
        "extra-1+z",
        "luminosity_per_frequency(2.3 mJy, z, -0.7)",
        "W/Hz",
        "luminosity_per_frequency(2.3 mJy, z, -0.7)*(1+z)",
    ),
    plant(
        "dropped-1+z-4",
        "flux_of(3.2e45 erg/s, z)",
        "erg/s/cm^2",
        "flux_of(3.2e45 erg/s, z)/(1+z)^4",
    ),
    plant("dropped-1+z-2", "H(z)", "km/s/Mpc", "H(z)/(1+z)^2"),
    plant(
        "comoving-for-proper",
        "proper_size(12 arcsec, z)",
        "kpc",
        "comoving_size(12 arcsec, z)",
    ),
    plant(
        "proper-for-comoving",
        "comoving_size(12 arcsec, z)",
        "kpc",
        "proper_size(12 arcsec, z)",
    ),
    plant("h-dropped", "r_d", "Mpc", "r_d*h"),
    plant("h-dropped", "D_C(z)", "Mpc", "D_C(z)*h"),
    plant("h-inverted", "event_horizon()", "Gly", "event_horizon()/h"),
    plant("h-power", "comoving_volume(z)", "Gpc^3", "comoving_volume(z)*h^3"),
    plant(
        "5logh",
        "absolute_magnitude(22.4 mag, z)",
        "mag",
        "absolute_magnitude(22.4 mag, z) - 5*log10(h)",
    ),
    times("Gpc-for-Gly", "D_C(z)", "Gly", 1.0 / LY_PER_PC),
    times("Gly-for-Gpc", "D_L(z)", "Gpc", LY_PER_PC),
    times("diameter-for-radius", "hubble_radius(z)", "Gly", 2.0),
    times("diameter-for-radius", "comoving_volume(z)", "Gpc^3", 8.0),
    times(
        "radius-for-diameter",
        "2*particle_horizon_comoving(z)",
        "Gly",
        0.5,
    ),
    times(
        "4pi-dropped",
        "luminosity(2.4e-16 erg/s/cm^2, z)",
        "erg/s",
        0.25 / std::f64::consts::PI,
    ),
    times(
        "fwhm-for-sigma",
        "virial_speed(1e12 Msun, z)",
        "km/s",
        2.354_820_045_030_949,
    ),
    times(
        "three-d-for-one-d",
        "isothermal_dispersion(1.3 arcsec, z, y)",
        "km/s",
        1.732_050_807_568_877_2,
    ),
    times("power-of-ten", "age(z)", "Gyr", 0.1),
    times("power-of-ten", "luminosity(2.4e-16 erg/s/cm^2, z)", "erg/s", 1e3),
    times("arcsec-for-arcmin", "angular_size(2.4 Mpc, z)", "arcmin", 60.0),
    plant(
        "200m-for-200c",
        "halo_radius_200c(2e14 Msun, z)",
        "Mpc",
        "halo_radius_200m(2e14 Msun, z)",
    ),
    plant("ln-for-log10", "log10(D_L(z)/(1 Mpc))", "1", "ln(D_L(z)/(1 Mpc))"),
    model(
        "no-radiation",
        "age(1000*z)",
        "Myr",
        (
            "planck2018",
            "flat with H0 = 67.36 km/s/Mpc, Ωm = (Ωm under planck2018)",
        ),
    ),
    model(
        "no-radiation",
        "particle_horizon()",
        "Gly",
        (
            "planck2018",
            "flat with H0 = 67.36 km/s/Mpc, Ωm = (Ωm under planck2018)",
        ),
    ),
    model(
        "other-H0",
        "D_C(z)",
        "Mpc",
        ("planck2018", "planck2018 with H0 = 70 km/s/Mpc"),
    ),
    model(
        "other-H0",
        "age(z)",
        "Gyr",
        (
            "flat with H0 = 70 km/s/Mpc, Ωm = 0.28",
            "flat with H0 = 73 km/s/Mpc, Ωm = 0.28",
        ),
    ),
    model("other-model", "lookback_time(z)", "Gyr", ("planck2018", "wmap9")),
    model("other-model", "D_L(z)", "Mpc", ("planck2018", "concordance")),
    model("other-model", "D_A(z)", "Mpc", ("planck2015", "wmap7")),
    model(
        "no-dark-energy",
        "age(z)",
        "Gyr",
        ("concordance", "flat with H0 = 70 km/s/Mpc, Ωm = 1"),
    ),
    model(
        "curvature-ignored",
        "D_L(z)",
        "Mpc",
        (
            "general with H0 = 69 km/s/Mpc, Ωm = 0.29, ΩΛ = 0.65",
            "flat with H0 = 69 km/s/Mpc, Ωm = 0.29",
        ),
    ),
    model(
        "constant-dark-energy",
        "D_C(z)",
        "Mpc",
        (
            "flat with H0 = 70 km/s/Mpc, Ωm = 0.3, w0 = -0.85, wa = 0.1",
            "flat with H0 = 70 km/s/Mpc, Ωm = 0.3",
        ),
    ),
    copied("transposed-digits", "D_C(z)", "Mpc", transposed),
    copied("transposed-digits", "age(z)", "Myr", transposed),
    copied("truncated", "D_L(z)", "Mpc", truncated),
    copied("one-digit", "lookback_time(z)", "Myr", one_digit),
    plant("rounded-input", "D_A(zn)", "Mpc", "D_A(zr)"),
    plant("rounded-input", "age(zn)", "Gyr", "age(zr)"),
];

const MODELS: &[&str] = &[
    "planck2018",
    "concordance",
    "wmap9",
    "flat with H0 = 71.3 km/s/Mpc, Ωm = 0.262",
    "general with H0 = 66.1 km/s/Mpc, Ωm = 0.33, ΩΛ = 0.63",
    "desi_dr2",
];

/// Swaps the first two unlike neighbours from the second digit on.
fn transposed(text: &str, _: f64) -> String {
    let mut bytes = text.as_bytes().to_vec();
    let end = text.find('e').unwrap_or(text.len());
    let digits: Vec<usize> = (0..end).filter(|place| bytes[*place].is_ascii_digit()).collect();
    if let Some(pair) = digits[1..]
        .windows(2)
        .find(|pair| bytes[pair[0]] != bytes[pair[1]])
    {
        bytes.swap(pair[0], pair[1]);
    }
    String::from_utf8(bytes).expect("ASCII")
}

/// The second digit becomes the next one.
fn one_digit(text: &str, _: f64) -> String {
    let mut bytes = text.as_bytes().to_vec();
    let place = (1..bytes.len())
        .find(|place| bytes[*place].is_ascii_digit())
        .expect("two digits");
    bytes[place] = b'0' + (bytes[place] - b'0' + 1) % 10;
    String::from_utf8(bytes).expect("ASCII")
}

/// The same number of digits, without rounding; where rounding would have
/// done the same, it is no slip, and another redshift is drawn.
fn truncated(text: &str, value: f64) -> String {
    let digits = text
        .bytes()
        .take_while(|byte| *byte != b'e')
        .filter(u8::is_ascii_digit)
        .count();
    let long = format!("{value:.14e}");
    let (mantissa, power) = long.split_once('e').expect("a power");
    let point = usize::from(digits > 1);
    format!("{}e{power}", &mantissa[..digits + point])
}

/// A number as a paper quotes it: three digits in one case of five, five in
/// three of ten, else four.
fn quoted(value: f64, draws: &mut Draws) -> String {
    let places = match draws.next() {
        draw if draw < 0.2 => 2,
        draw if draw < 0.7 => 3,
        _ => 4,
    };
    format!("{value:.places$e}")
}

/// What is claimed, and what it is with the mistake.
struct Case {
    key: &'static str,
    given: String,
    right: String,
    wrong: String,
    unit: &'static str,
    model: (String, String),
    how: Wrong,
}

fn case(place: usize, plant: &Plant, draws: &mut Draws) -> Case {
    let (low, high) = plant.redshifts;
    let z = format!("{:.3}", libm::exp(draws.between(libm::log(low), libm::log(high))));
    let y = format!(
        "{:.2}",
        z.parse::<f64>().expect("a number") + draws.between(0.5, 4.0)
    );
    let (zn, zr) = named_redshift(place, draws);
    let written = |text: &str| {
        let text = text.replace("zn", &zn.0).replace("zr", &zr);
        replace_word(&replace_word(&text, "z", &z), "y", &y)
    };
    let stated = draws.pick(MODELS).to_owned();
    let right = written(plant.right);
    let (wrong, model) = match plant.wrong {
        Wrong::Expression(wrong) => (written(wrong), (stated.clone(), stated)),
        Wrong::Model(stated, taken) => (right.clone(), (stated.to_owned(), taken.to_owned())),
        Wrong::Times(_) | Wrong::Digits(_) => (right.clone(), (stated.clone(), stated)),
    };
    let model = if plant.right.contains("r_d") {
        ("planck2018".to_owned(), "planck2018".to_owned())
    } else {
        model
    };
    Case {
        key: plant.key,
        given: zn.1,
        right,
        wrong,
        unit: plant.unit,
        model,
        how: plant.wrong,
    }
}

/// The name of a redshift with its definition, and its value in two digits.
fn named_redshift(place: usize, draws: &mut Draws) -> ((String, String), String) {
    let value = draws.between(1.1, 7.9);
    let name = format!("z_{place}");
    let definition = format!("given {name} = {value:.4}\n");
    ((name, definition), format!("{value:.1}"))
}

/// A word that is no part of another one.
fn replace_word(text: &str, word: &str, by: &str) -> String {
    let mut out = String::new();
    let is_part = |letter: char| letter.is_alphanumeric() || letter == '_';
    let mut before = ' ';
    for (place, letter) in text.char_indices() {
        let after = text[place + letter.len_utf8()..].chars().next().unwrap_or(' ');
        if text[place..].starts_with(word) && !is_part(before) && !is_part(after) {
            out.push_str(by);
        } else {
            out.push(letter);
        }
        before = letter;
    }
    out
}

/// Right and mistaken values of the cases, in their units.
fn values(cases: &[Case]) -> Vec<(f64, f64)> {
    let mut sheet = String::new();
    for case in cases {
        sheet.push_str(&case.given);
        for (expression, model) in [(&case.right, &case.model.0), (&case.wrong, &case.model.1)] {
            let unit = case.unit;
            writeln!(sheet, "{expression} [{unit}] under ({model})").expect("a string");
        }
    }
    let report = run(&sheet);
    let numbers = numbers(&report);
    assert_eq!(numbers.len(), 2 * cases.len(), "{:?}", report.diagnostics.first());
    numbers.chunks(2).map(|pair| (pair[0], pair[1])).collect()
}

/// Claims of these numbers, judged.
fn verdicts(cases: &[Case], texts: &[String]) -> Vec<Judged> {
    let mut sheet = String::new();
    for (case, text) in cases.iter().zip(texts) {
        let unit = if case.unit == "1" { "" } else { case.unit };
        sheet.push_str(&case.given);
        writeln!(
            sheet,
            "claim: {} under ({}) is {text} {unit}",
            case.right, case.model.0
        )
        .expect("a string");
    }
    let report = run(&sheet);
    let judged = judged(&report);
    assert_eq!(
        judged.len(),
        cases.len(),
        "{:?}\n{sheet}",
        report.diagnostics.first()
    );
    judged
}

fn cases(count: usize, draws: &mut Draws) -> Vec<Case> {
    let plant = |place: usize| &PLANTS[place % PLANTS.len()];
    (0..count).map(|place| case(place, plant(place), draws)).collect()
}

fn agrees(text: &str, value: f64) -> bool {
    let places = text.split('e').next().map_or(0, str::len).saturating_sub(2);
    format!("{value:.places$e}") == *text
}

/// The texts of wrong numbers, and the numbers before they were rounded.
fn planted(cases: &[Case], draws: &mut Draws) -> Vec<(String, f64)> {
    let made = values(cases);
    let pairs = cases.iter().zip(&made);
    pairs
        .map(|(case, (right, wrong))| match case.how {
            Wrong::Expression(_) | Wrong::Model(..) => (quoted(*wrong, draws), *wrong),
            Wrong::Times(factor) => (quoted(right * factor, draws), right * factor),
            Wrong::Digits(how) => {
                let text = how(&quoted(*right, draws), *right);
                let value = text.parse().expect("a number");
                (text, value)
            }
        })
        .collect()
}

struct Tally {
    tried: usize,
    first: usize,
    first_by_name: usize,
    among_three: usize,
    missed: Vec<String>,
}

/// Plants `count` slips and counts those that are found. A slip that gives
/// the very number of the true one (a distance swap and the power of (1+z)
/// that it is) counts as the true one; by name alone it is counted apart.
fn planted_and_found(seed: u64, count: usize) -> Tally {
    let mut draws = Draws(seed);
    let cases = cases(count + count / 4, &mut draws);
    let texts = planted(&cases, &mut draws);
    let only: Vec<String> = texts.iter().map(|(text, _)| text.clone()).collect();
    let mut tally = Tally {
        tried: 0,
        first: 0,
        first_by_name: 0,
        among_three: 0,
        missed: Vec::new(),
    };
    for ((case, (text, wrong)), judged) in cases.iter().zip(&texts).zip(verdicts(&cases, &only)) {
        // A slip too small to change the digits is no wrong number.
        if judged.agrees == Some(true) || tally.tried == count {
            continue;
        }
        tally.tried += 1;
        let is_true = |slip: &(String, f64)| slip.0 == case.key || (slip.1 / wrong - 1.0).abs() < 1e-9;
        let place = judged.slips.iter().position(is_true);
        tally.first += usize::from(place == Some(0));
        tally.first_by_name += usize::from(judged.slips.first().is_some_and(|slip| slip.0 == case.key));
        tally.among_three += usize::from(place.is_some());
        if place != Some(0) {
            let found = &judged.slips;
            tally
                .missed
                .push(format!("{}: {} is {text}: {found:?}", case.key, case.right));
        }
    }
    tally
}

#[test]
fn a_planted_slip_is_found() {
    let tally = planted_and_found(20_260, 300);
    let Tally {
        tried,
        first,
        first_by_name,
        among_three,
        missed,
    } = &tally;
    println!("{tried} planted: first {first} (by name {first_by_name}), among three {among_three}");
    println!("{}", missed.join("\n"));
    assert_eq!(*tried, 300);
    assert!(*first >= 255, "first: {first} of {tried}\n{}", missed.join("\n"));
    assert!(
        *among_three >= 291,
        "among three: {among_three} of {tried}\n{}",
        missed.join("\n")
    );
}

#[test]
fn a_right_number_is_never_refused() {
    let mut draws = Draws(4_711);
    let cases = cases(300, &mut draws);
    let texts: Vec<String> = values(&cases)
        .iter()
        .map(|(right, _)| quoted(*right, &mut draws))
        .collect();
    for ((case, text), judged) in cases.iter().zip(&texts).zip(verdicts(&cases, &texts)) {
        assert_eq!(judged.agrees, Some(true), "{} is {text}", case.right);
    }
}

/// How many of 300 wrong numbers from nowhere are explained, and which.
fn explained(seed: u64) -> Vec<String> {
    let mut draws = Draws(seed);
    let cases = cases(300, &mut draws);
    let mut texts = Vec::new();
    for (right, _) in values(&cases) {
        let text = loop {
            // Within a factor of five, evenly in the logarithm.
            let text = quoted(right * libm::exp(draws.between(-1.6, 1.6)), &mut draws);
            if !agrees(&text, right) {
                break text;
            }
        };
        texts.push(text);
    }
    let judged = verdicts(&cases, &texts);
    let all = cases.iter().zip(&texts).zip(judged);
    all.filter(|(_, judged)| !judged.slips.is_empty())
        .map(|((case, text), judged)| format!("{} is {text}: {:?}", case.right, judged.slips))
        .collect()
}

#[test]
fn a_number_from_nowhere_has_no_convincing_slip() {
    let explained = explained(1_729);
    println!("{} of 300 explained\n{}", explained.len(), explained.join("\n"));
    assert!(
        explained.len() <= 30,
        "{}\n{}",
        explained.len(),
        explained.join("\n")
    );
}

#[test]
fn the_slips_of_the_example_are_found() {
    let path = repository::root().join("examples/referee_report.zij");
    let text = repository::read(&path);
    let planted: Vec<Option<&str>> = text
        .lines()
        .filter(|line| line.starts_with("claim"))
        .map(|line| line.split_once("# slip: ").map(|(_, key)| key.trim()))
        .collect();
    let judged = judged(&run(&text));
    assert_eq!(judged.len(), planted.len());
    for (judged, planted) in judged.iter().zip(&planted) {
        assert_eq!(judged.agrees, Some(planted.is_none()), "{judged:?}");
        assert_eq!(judged.slips.first().map(|slip| slip.0.as_str()), *planted);
    }
    assert!(planted.iter().flatten().count() >= 12);
}

#[test]
fn two_plain_slips_at_once_are_found_where_the_digits_are_enough() {
    let sheet = "D_L(1.37) [Gpc] under planck2018\n";
    let gpc = numbers(&run(sheet))[0];
    let claim = format!("claim: D_C(1.37) under planck2018 is {gpc:.5} Gly\n");
    let judged = judged(&run(&claim));
    let keys: Vec<&str> = judged[0].slips.iter().map(|slip| slip.0.as_str()).collect();
    assert!(
        keys.contains(&"luminosity-for-comoving + Gpc-for-Gly"),
        "{keys:?}"
    );
}

#[test]
fn a_function_for_dark_energy_may_have_been_left_out() {
    let constant = numbers(&run("D_C(1.5) [Mpc] under planck2018\n"))[0];
    let model = "planck2018 with w(z) = -0.9 + 0.2*z/(1+z)";
    let claim = format!("claim: D_C(1.5) under ({model}) is {constant:.1} Mpc\n");
    let judged = judged(&run(&claim));
    assert_eq!(
        judged[0].slips.first().map(|slip| slip.0.as_str()),
        Some("constant-dark-energy")
    );
}

#[test]
fn nothing_is_searched_where_no_number_was_written() {
    let report = run("claim: D_C(1) is above 100 Gpc\nclaim: D_C(1) is 2 * 5 Gpc within 1%\n");
    assert!(
        judged(&report)
            .iter()
            .all(|one| one.agrees == Some(false) && one.slips.is_empty())
    );
}

#[test]
fn claims_of_series_and_of_hostile_numbers_are_judged_without_slips() {
    let sheet = "claim: {1, 2} is 3\nclaim: 0 * D_C(1) is 5 Mpc\nclaim: D_C(1) is 0 Mpc\n\
                 claim: D_C(1) is -3 Mpc\nclaim: D_C(1) is 1e300 Gly\nclaim: 1e270 * D_C(1) is 1e-300 Mpc\n";
    for one in judged(&run(sheet)) {
        assert_eq!(one.agrees, Some(false));
        assert!(one.slips.iter().all(|slip| slip.1.is_finite()), "{one:?}");
    }
}
