//! Mistakes that are named, with the repair spelled out.

use super::*;

/// Each fix of a mistake, applied.
#[track_caller]
fn repairs(text: &str, code: &str) -> Vec<String> {
    let found = parse(text).diagnostics;
    assert_eq!(
        found.iter().map(|one| one.code).collect::<Vec<_>>(),
        [code],
        "{text}"
    );
    let fixes = found[0].fixes.iter();
    fixes.map(|fix| mended(text, fix)).collect()
}

#[test]
fn each_mistake_of_section_two_has_its_repairs_and_they_read() {
    let cases: [(&str, &str, &[&str]); 11] = [
        (
            "x = 3 W/m^2 Hz",
            "ambiguous-unit",
            &["x = 3 W/m^2/Hz", "x = 3 W Hz/m^2"],
        ),
        (
            "x = 1/3 Mpc",
            "fraction-with-unit",
            &["x = 1/3 * 1 Mpc", "x = 1/(3 Mpc)"],
        ),
        ("x = 3 * 10^5 km/s", "product-of-power", &["x = 3e5 km/s"]),
        ("x = 70 km s-1", "missing-caret", &["x = 70 km s^-1"]),
        ("x = 2x", "implicit-product", &["x = 2*x", "x = 2 x"]),
        ("x = 4π", "implicit-product", &["x = 4*π"]),
        ("x = 2(1+z)", "implicit-product", &["x = 2*(1+z)"]),
        ("x = 30°", "angle-mark", &["x = 30 deg"]),
        ("x = 1.5\"", "angle-mark", &["x = 1.5 arcsec"]),
        ("x = 12 h", "hour-or-little-h", &["x = 12 hr"]),
        ("x = 70 km/h", "hour-or-little-h", &["x = 70 km/hr"]),
    ];
    for (text, code, wanted) in &cases {
        assert_eq!(repairs(text, code), *wanted, "{text}");
        for repaired in *wanted {
            assert_eq!(codes(repaired), [""; 0], "{repaired}");
        }
    }
}

#[test]
fn brackets_that_end_an_expression_offer_parentheses() {
    assert_eq!(repairs("a [km] + b", "bracket-ends-expression"), ["(a [km]) + b"]);
    assert_eq!(repairs("a [km] [m]", "bracket-ends-expression"), ["(a [km]) [m]"]);
    assert_eq!(
        repairs("a + b [kpc at z]", "sum-converted"),
        ["(a + b) [kpc at z]", "a + (b [kpc at z])"]
    );
    assert_eq!(
        repairs("(a under flat with Ωm = 0.3) / b", "bare-with"),
        ["(a under (flat with Ωm = 0.3)) / b"]
    );
}

#[test]
fn signs_of_other_languages_get_the_word_of_this_one() {
    assert_eq!(
        repairs("x = if a < 1&&b < 2 then 1 else 0", "foreign-operator"),
        ["x = if a < 1 and b < 2 then 1 else 0"]
    );
    assert_eq!(repairs("x := 3", "foreign-operator"), ["x = 3"]);
    assert_eq!(repairs("claim: x = 3", "equals-in-claim"), ["claim: x is 3"]);
    assert_eq!(
        repairs("asume planck2018", "unknown-statement"),
        ["assume planck2018"]
    );
    assert_eq!(
        repairs("m = flat with Ωm = 0.3", "model-as-value"),
        ["model m = flat with Ωm = 0.3"]
    );
    assert_eq!(repairs("x = 3 ÷ 2", "unknown-character"), ["x = 3 / 2"]);
    let curly = "given z = 1 “redshift”";
    let straight = parse(curly)
        .diagnostics
        .iter()
        .rev()
        .fold(curly.to_owned(), |text, one| mended(&text, &one.fixes[0]));
    assert_eq!(straight, "given z = 1 \"redshift\"");
}

#[test]
fn brackets_are_matched() {
    assert_eq!(repairs("x = (1 + 2", "unclosed-bracket"), ["x = (1 + 2)"]);
    assert_eq!(repairs("x = f({1, 2", "unclosed-bracket"), ["x = f({1, 2})"]);
    assert_eq!(repairs("x = 1 + 2)", "stray-bracket"), ["x = 1 + 2"]);
    assert_eq!(repairs("x = (1 + 2]", "mismatched-bracket"), ["x = (1 + 2)"]);
}

#[test]
fn every_mistake_of_a_sheet_is_reported_and_the_rest_is_read() {
    let text = "x = 1 +\ny = 2\nz = (3\nw = 4 5\ntally 3\nclaim: y = 2\nv = y * 2\n";
    assert_eq!(
        codes(text),
        [
            "missing-expression",
            "unclosed-bracket",
            "split-number",
            "unexpected",
            "equals-in-claim"
        ]
    );
    let parsed = parse(text);
    let whole = parsed.statements.iter().filter(|one| {
        matches!(&one.kind, StatementKind::Value(definition) if definition.value.kind != ExprKind::Broken)
    });
    assert_eq!(whole.count(), 2, "y and v are read");
}

#[test]
fn several_mistakes_of_one_statement_are_reported() {
    assert_eq!(
        codes("x = 1/3 Mpc + 12 h"),
        ["fraction-with-unit", "hour-or-little-h"]
    );
}

#[test]
fn a_broken_statement_still_binds_its_name() {
    let parsed = parse("x = 1 +\nf(a) = )\nread \"a.csv\" as s with\n");
    assert!(matches!(&parsed.statements[0].kind, StatementKind::Value(one) if one.name.node == "x"));
    assert!(matches!(&parsed.statements[1].kind, StatementKind::Function(one, _) if one.name.node == "f"));
    assert!(parsed.lost.iter().any(|name| name.node == "s"));
}

#[test]
fn messages_are_one_line_and_point_into_the_text() {
    for text in [
        "x = ",
        "(",
        "1 2",
        "x = \u{0}",
        "claim",
        "table x",
        "x = 1 \"a\" \"b\"",
        "f(x = 1, = 2)",
        "[km]",
    ] {
        for one in parse(text).diagnostics {
            assert_eq!(one.message.lines().count(), 1, "{text:?}");
            assert!(!one.message.ends_with('.'), "{text:?}: {}", one.message);
            assert!(one.at.span.range().end <= text.len(), "{text:?}");
        }
    }
}
