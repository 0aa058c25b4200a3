//! Sheets as text: right ones from a small grammar, and heaps of words.

use proptest::prelude::*;

/// A number as written.
fn number() -> impl Strategy<Value = String> {
    prop_oneof![
        (0u32..1000).prop_map(|whole| whole.to_string()),
        (0u32..1000, 0u32..100).prop_map(|(whole, part)| format!("{whole}.{part:02}")),
        (1u32..99, -30i32..30).prop_map(|(digits, power)| format!("{digits}e{power}")),
        (1u32..99, 1i32..30).prop_map(|(digits, power)| format!("{digits} × 10^{power}")),
        (1u32..99, 1u32..9).prop_map(|(whole, last)| format!("{whole}.4({last})")),
        (1u32..99).prop_map(|whole| format!("{whole}.4 ± 0.2")),
        (1u32..99).prop_map(|whole| format!("{whole}.4 (+0.6, -0.5)")),
    ]
}

/// A unit as written after a number.
fn unit() -> impl Strategy<Value = &'static str> {
    prop::sample::select(vec![
        "kpc",
        "km/s/Mpc",
        "km s^-1 Mpc^-1",
        "km s⁻¹",
        "erg/s/cm^2",
        "Msun",
        "arcsec",
        "Mpc/h",
        "h/cMpc",
        "m^(1/2)",
        "m·s",
        "mag",
        "%",
        "kg.m/s^2",
        "mag/arcsec^2",
        "Å",
        "μm",
    ])
}

/// A bracket after an expression.
fn bracket() -> impl Strategy<Value = &'static str> {
    prop::sample::select(vec![
        "[Mpc]",
        "[1]",
        "[kpc at z]",
        "[Gly today]",
        "[Mpc for h]",
        "[Msun for h = 0.7]",
        "[cMpc by hand]",
        "[cm via c]",
        "[km via G, c]",
        "[cMpc at z]",
        "[Mpc/h for h]",
        "[10^-20 erg/s]",
        "[/s]",
        "[km/(s Mpc)]",
    ])
}

fn name() -> impl Strategy<Value = &'static str> {
    prop::sample::select(vec![
        "x",
        "y_1",
        "z",
        "Ωm",
        "H0",
        "π",
        "ΩΛ",
        "R₂₀₀",
        "sample.z",
        "d",
    ])
}

/// An expression.
pub fn expression() -> impl Strategy<Value = String> {
    let leaf = prop_oneof![
        number(),
        (number(), unit()).prop_map(|(number, unit)| format!("{number} {unit}")),
        name().prop_map(String::from),
        Just("{0, 0, 0.06} eV".to_owned()),
        Just("∞".to_owned()),
    ];
    leaf.prop_recursive(5, 40, 3, |inner| {
        let pair = (inner.clone(), inner.clone());
        let operator = prop::sample::select(vec!["+", "-", "*", "/", "^", "·", "×"]);
        let comparison = prop::sample::select(vec!["<", "<=", ">", ">=", "≤", "≥"]);
        prop_oneof![
            (pair.clone(), operator).prop_map(|((a, b), sign)| format!("({a}) {sign} ({b})")),
            (
                inner.clone(),
                name(),
                prop::sample::select(vec!["+", "-", "*", "/"])
            )
                .prop_map(|(a, b, sign)| format!("{b} {sign} ({a})")),
            (name(), name(), name()).prop_map(|(a, b, c)| format!("{a} + {b}*{c}^2 - -{a}")),
            inner.clone().prop_map(|a| format!("-({a})")),
            inner.clone().prop_map(|a| format!("({a})")),
            (inner.clone(), bracket()).prop_map(|(a, bracket)| format!("(({a}) {bracket})")),
            pair.clone().prop_map(|(a, b)| format!("f({a}, c = {b})")),
            pair.clone()
                .prop_map(|(a, b)| format!("integral({a}, x = 0 .. ({b}))")),
            pair.clone().prop_map(|(a, b)| format!("{{{a}, {b}}}")),
            pair.clone()
                .prop_map(|(a, b)| format!("root(f(x) = {a}, x = 0 .. ({b}))")),
            inner.clone().prop_map(|a| format!("(({a}) under planck2018)")),
            inner
                .clone()
                .prop_map(|a| format!("(({a}) under (flat with H0 = 70 km/s/Mpc, Ωm = 0.3))")),
            (pair, comparison).prop_map(|((a, b), sign)| format!(
                "(if ({a}) {sign} ({b}) and not 1 > 2 then {b} else {a})"
            )),
        ]
    })
}

fn statement() -> impl Strategy<Value = String> {
    let expr = expression;
    prop_oneof![
        expr(),
        expr().prop_map(|a| format!("v = {a}")),
        expr().prop_map(|a| format!("given v [kpc] = {a} \"what it is\"")),
        (expr(), expr()).prop_map(|(a, b)| format!("f(a, b [kpc], c = 1) [kpc] = {a} where p = {b}, q = p")),
        expr().prop_map(|a| format!("result r = {a} [Gly] \"a result\"")),
        Just("result r [Mpc]".to_owned()),
        (expr(), expr()).prop_map(|(a, b)| format!("claim \"sec. 1\": {a} is ({b}) within 2%")),
        (expr(), expr()).prop_map(|(a, b)| format!("claim: {a} is between {b} and ({a})")),
        expr().prop_map(|a| format!("claim: {a} is about 16 Gly")),
        expr().prop_map(|a| format!("claim: {a} is never")),
        (expr(), expr())
            .prop_map(|(a, b)| format!("table \"o.csv\" z = 0.1 .. 9 every 0.1 dex: {a} \"one\", {b}")),
        expr().prop_map(|a| format!("table z = 0 .. 3 in 30 steps: {a}")),
        expr().prop_map(|a| format!("read \"s.csv\" as sample with r [Mpc], v [km/s] only z > {a}")),
        expr().prop_map(|a| format!("model m = planck2018 with H0 = {a}, w(z) = -1 + z")),
        expr().prop_map(|a| format!("1 beam = {a}")),
        expr().prop_map(|a| format!("correlate x, z by {a}")),
        expr().prop_map(|a| format!("explain {a}")),
        Just("tally galaxy, photon".to_owned()),
        Just("assume concordance".to_owned()),
        Just("include \"defs.zij\"".to_owned()),
        Just("help D_L".to_owned()),
        Just("help \"how far\"".to_owned()),
    ]
}

/// A sheet whose form is right.
pub fn sheet() -> impl Strategy<Value = String> {
    prop::collection::vec(statement(), 1..6).prop_map(|statements| statements.join("\n") + "\n")
}

/// A piece of any sheet.
pub fn word() -> impl Strategy<Value = String> {
    let words = "assume model given result claim table figure read include tally correlate explain help \
        and or not if then else under where with is every at in by via for points today dex hand steps log \
        about within between above below least most never as only flat general planck2018 D_C D_L H0 Ωm z x f \
        sqrt integral root sum maximum derivative Mpc kpc km/s h Msun cMpc Mpc/h arcsec mag % c G \
        1 0 2.5 1e400 1e-400 67.4(5) 3 × 10^5 .. = + - * / ^ ** · × < <= ≥ ( ) [ ] { } , : . ± +- ∞ \" # \
        −0.4 ⁻¹ ∴ Ω \u{feff} \u{200b} é 🌌 == && ; \\ | ~ ' ″ 1 -1 0.5 2 3";
    let words: Vec<String> = words.split_whitespace().map(String::from).collect();
    prop_oneof![
        20 => prop::sample::select(words),
        1 => number(),
        1 => Just("\"text\"".to_owned()),
        1 => Just("[kpc at z]".to_owned()),
    ]
}

/// Words in no order, over several lines.
pub fn soup() -> impl Strategy<Value = String> {
    let joint = prop::sample::select(vec![" ", " ", " ", "", "\n", "\n  "]);
    let pieces = prop::collection::vec((word(), joint), 0..60);
    pieces.prop_map(|pieces| pieces.into_iter().map(|(word, joint)| word + joint).collect())
}

/// What is typed at the prompt: right, torn, or a heap of words.
pub fn entry() -> impl Strategy<Value = String> {
    let usual = vec![
        "z = 1.1",
        "x = D_C(z)",
        "that*2",
        "assume concordance",
        "model m = flat with H0 = 70 km/s/Mpc, Ωm = 1",
        "x under m",
        "f(a) = a^2 + a",
        "f(3)",
        "table z = 1 .. 3 every 1: z, f(z)",
        "claim: z is 1.1",
        "integral(f(t), t = 0 .. z)",
        "x = x + 1 Mpc",
        "explain x",
        "1 beam = 3e-4 sr",
        "tally galaxy",
        "help D_L",
        "given z = 2",
        "result x",
        "x [pMpc]",
        "D_C(z) + D_A(z)",
    ];
    prop_oneof![
        4 => prop::sample::select(usual).prop_map(String::from),
        1 => statement(),
        1 => soup(),
    ]
}
