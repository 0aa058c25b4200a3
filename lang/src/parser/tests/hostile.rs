//! Texts that nobody would write: deep, long, or no text at all.

use super::*;

#[test]
fn nesting_a_hundred_thousand_deep_is_one_clear_error() {
    for (open, close) in [("(", ")"), ("{", "}"), ("f(", ")"), ("-(", ")"), ("if (", ")")] {
        let text = format!("x = {}1{}", open.repeat(100_000), close.repeat(100_000));
        let found = codes(&text);
        assert!(
            matches!(found.as_slice(), ["nested-too-deep" | "statement-too-long"]),
            "{open}: {found:?}"
        );
    }
    for open in ["(", "[", "{", "f(", "a[", "(["] {
        let found = codes(&format!("x = {}", open.repeat(100_000)));
        assert!(!found.is_empty() && found.len() <= 12, "{open}: {found:?}");
    }
}

#[test]
fn chains_are_refused_before_a_tree_is_built() {
    for (part, end) in [
        ("1 + ", "1"),
        ("-", "1"),
        ("not ", "p"),
        ("2^", "2"),
        ("a < ", "b"),
        ("1 if 1 then 2 else ", "3"),
    ] {
        let text = format!("x = {}{end}", part.repeat(20_000));
        let found = codes(&text);
        assert!(!found.is_empty(), "{part}");
    }
    let under = format!("x{}", " under m".repeat(20_000));
    assert!(!codes(&under).is_empty());
    let wide = format!("x = {{{}1}}", "1, ".repeat(20_000));
    assert_eq!(codes(&wide), [""; 0], "a list is wide, not deep");
}

#[test]
fn what_is_too_much_is_refused_at_once() {
    let text = "x".repeat(50 << 20);
    assert_eq!(codes(&text), ["source-too-large"]);
    let long = format!("x = {}", "1 ".repeat(200_000));
    assert!(codes(&long).contains(&"statement-too-long"));
}

#[test]
fn a_long_line_that_is_no_sheet_is_refused_in_few_words() {
    for piece in ["(", ")", "\"", "$", "=", "1", " ", "é", "∞", "[km", "x = ", "# "] {
        let text = piece.repeat((4 << 20) / piece.len());
        let parsed = parse(&text);
        assert!(
            parsed.diagnostics.len() <= crate::layout::MAX_ERRORS + 1,
            "{piece}"
        );
        assert!(
            parsed.diagnostics.iter().all(|one| one.message.len() < 400),
            "{piece}"
        );
    }
}

/// A generator of numbers that is the same everywhere (Marsaglia 2003, xorshift).
struct Dice(u64);

impl Dice {
    fn throw(&mut self, sides: usize) -> usize {
        self.0 ^= self.0 << 13;
        self.0 ^= self.0 >> 7;
        self.0 ^= self.0 << 17;
        (self.0 % sides as u64) as usize
    }
}

#[test]
fn random_bytes_and_random_tokens_do_no_harm() {
    let mut dice = Dice(0x5eed_0001);
    let pieces = [
        "x", " ", "\n", "(", ")", "[", "]", "{", "}", "=", "+", "-", "*", "/", "^", "1", "2.5", "1e5", "km",
        "h", "Mpc", "\"", "#", ",", ":", ".", "..", "±", "×", "10", "⁻¹", "if", "then", "else", "under",
        "with", "where", "is", "claim", "table", "model", "given", "assume", "read", "as", "at", "for",
        "via", "every", "in", "steps", "<", "%", "(5)", "∞", "not", "and", "\t", "\r\n", "é", "\u{0}",
        "within", "sigma", "between", "tally", "result",
    ];
    for _ in 0..3_000 {
        let length = dice.throw(40);
        let text: String = (0..length)
            .map(|_| {
                let gap = if dice.throw(2) == 0 { " " } else { "" };
                format!("{}{gap}", pieces[dice.throw(pieces.len())])
            })
            .collect();
        for one in parse(&text).diagnostics {
            assert!(text.get(one.at.span.range()).is_some(), "{text:?}: {one:?}");
            for fix in &one.fixes {
                let _ = mended(&text, fix);
            }
        }
        let _ = wants_more(&text);
        let _ = parse_unit(&text);
    }
    for _ in 0..2_000 {
        let bytes: Vec<u8> = (0..dice.throw(60)).map(|_| dice.throw(256) as u8).collect();
        let text = String::from_utf8_lossy(&bytes);
        let _ = parse(&text);
        let _ = wants_more(&text);
    }
}
