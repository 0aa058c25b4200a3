//! A referee's view of sheets: each claim with its verdict, grouped by sheet
//! and by where the number is quoted, the slips under what disagrees, and the
//! totals.

use super::look::{self, Look, Tone};
use super::{Format, json, markdown, number, one_line, text};
use crate::report::{ClaimReport, Item, Numbers, Report};

/// Claims longer than this do not push the computed values to the right.
const MAX_CLAIM_WIDTH: usize = 48;
/// How far a verdict stands in, and what is said below it.
const INDENT: usize = 4;
const BELOW: usize = 15;

/// How many claims there are of each kind.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, serde::Serialize)]
pub struct Totals {
    /// All of them.
    pub claims: usize,
    /// Those that agree.
    pub agree: usize,
    /// Those that disagree.
    pub disagree: usize,
    /// Those that could not be computed.
    pub undecided: usize,
    /// Those that disagree and that a slip would explain.
    pub explained: usize,
}

impl Totals {
    /// Counts the claims of some reports.
    #[must_use]
    pub fn of(reports: &[Report]) -> Totals {
        let mut totals = Totals::default();
        for claim in reports.iter().flat_map(claims) {
            totals.claims += 1;
            totals.agree += usize::from(claim.agrees == Some(true));
            totals.disagree += usize::from(claim.agrees == Some(false));
            totals.undecided += usize::from(claim.agrees.is_none());
            totals.explained += usize::from(!claim.slips.is_empty());
        }
        totals
    }

    fn in_words(self) -> String {
        let mut parts = Vec::new();
        let plural = |count: usize, one: &str, many: &str| {
            let word = if count == 1 { one } else { many };
            format!("{count} {word}")
        };
        if self.agree > 0 {
            parts.push(plural(self.agree, "agrees", "agree"));
        }
        if self.disagree > 0 {
            let explained = match self.explained {
                0 => "none explained by a slip".to_owned(),
                count => format!("{count} explained by a slip"),
            };
            let disagree = plural(self.disagree, "disagrees", "disagree");
            parts.push(format!("{disagree} ({explained})"));
        }
        if self.undecided > 0 {
            parts.push(format!("{} undecided", self.undecided));
        }
        let claims = plural(self.claims, "claim", "claims");
        if parts.is_empty() {
            "no claims to judge".into()
        } else {
            format!("{claims}: {}", parts.join(", "))
        }
    }
}

/// The verdicts, in text, JSON or Markdown.
#[must_use]
pub fn render(reports: &[Report], format: Format, look: &Look) -> String {
    match format {
        Format::Json => json::referee(reports, Totals::of(reports)),
        Format::Markdown => in_markdown(reports),
        Format::Text | Format::Csv => in_text(reports, look),
    }
}

fn claims(report: &Report) -> impl Iterator<Item = &ClaimReport> {
    report.items.iter().filter_map(|item| match item {
        Item::Claim(claim) => Some(claim),
        Item::Result(_) | Item::Printed(_) | Item::Table(_) | Item::Text(_) => None,
    })
}

/// The claims by where they are quoted, in the order in which the places come.
fn places(report: &Report) -> Vec<(&str, Vec<&ClaimReport>)> {
    let mut places: Vec<(&str, Vec<&ClaimReport>)> = Vec::new();
    let mut known = rustc_hash::FxHashMap::default();
    for claim in claims(report) {
        let place = claim.place.as_str();
        let index = *known.entry(place).or_insert_with(|| {
            places.push((place, Vec::new()));
            places.len() - 1
        });
        places[index].1.push(claim);
    }
    places
}

fn sheet_name(report: &Report) -> &str {
    report.sources.first().map_or("", |source| &source.name)
}

// ---- text ----

fn in_text(reports: &[Report], look: &Look) -> String {
    let judged = reports.iter().filter(|report| report.evaluated);
    let mut parts: Vec<String> = judged.map(|report| sheet_lines(report, look)).collect();
    let refused = reports.iter().filter(|report| !report.evaluated);
    parts.extend(refused.map(|report| format!("{}: not judged\n", sheet_name(report))));
    parts.push(format!("{}\n", Totals::of(reports).in_words()));
    parts.join("\n")
}

fn sheet_lines(report: &Report, look: &Look) -> String {
    let mut head = look.paint(Tone::Strong, &look::harmless(sheet_name(report)));
    if let Some(model) = report.model.as_ref().filter(|model| model.used) {
        let default = if model.by_default {
            ", which it leaves to be assumed"
        } else {
            ""
        };
        head.push_str(&format!(", under {}{default}", one_line(&model.name)));
    }
    let widths = claims(report).map(|claim| look::width(&one_line(&claim.source)));
    let width = widths
        .filter(|width| *width <= MAX_CLAIM_WIDTH)
        .max()
        .unwrap_or(0);
    let mut lines = format!("{head}\n");
    for (place, claims) in places(report) {
        let place = if place.is_empty() {
            "(no place given)"
        } else {
            place
        };
        lines.push_str(&format!(
            "  {}\n",
            look.paint(Tone::Strong, &look::harmless(&one_line(place)))
        ));
        for claim in claims {
            lines.push_str(&claim_lines(claim, width, look));
        }
    }
    lines
}

fn claim_lines(claim: &ClaimReport, width: usize, look: &Look) -> String {
    let (tone, word) = match claim.agrees {
        Some(true) => (Tone::Good, "agrees"),
        Some(false) => (Tone::Bad, "disagrees"),
        None => (Tone::Doubt, "undecided"),
    };
    let verdict = look::pad(&look.paint(tone, word), BELOW - INDENT);
    let head = format!("{}{verdict}", " ".repeat(INDENT));
    let statement = look::harmless(&one_line(&claim.source));
    let value = look.paint(Tone::Faint, &computed(claim, look));
    let line = format!("{head}{}  {value}", look::pad(&statement, width));
    let mut lines = if look::width(&line) <= look.width {
        format!("{}\n", line.trim_end())
    } else {
        text::hanging(&head, &statement, look) + &below(&value, look)
    };
    for slip in text::slip_lines(claim, look) {
        lines.push_str(&below(&slip, look));
    }
    lines
}

fn below(text: &str, look: &Look) -> String {
    if text.is_empty() {
        return String::new();
    }
    text::indented(text, BELOW.min(look.width / 4), look)
}

/// What was computed, with the ratio to it where the two disagree.
fn computed(claim: &ClaimReport, look: &Look) -> String {
    let value = computed_value(claim, look);
    match (claim.quoted_value, &claim.computed, claim.agrees) {
        (Some(quoted), Numbers::Scalar(one), Some(false)) if (quoted / one).is_finite() => {
            format!("{value}, quoted/computed {}", number::short(quoted / one, look))
        }
        _ => value,
    }
}

fn computed_value(claim: &ClaimReport, look: &Look) -> String {
    let value = number::numbers(&claim.computed, look);
    match &claim.computed {
        Numbers::Scalar(_) | Numbers::Series(_) => format!("{value} {}", claim.unit).trim_end().into(),
        Numbers::Truth(_) | Numbers::Truths(_) => String::new(),
        Numbers::Never | Numbers::Missing => value,
    }
}

// ---- Markdown ----

fn in_markdown(reports: &[Report]) -> String {
    let mut parts: Vec<String> = reports.iter().map(sheet_in_markdown).collect();
    parts.push(format!("{}.\n", Totals::of(reports).in_words()));
    parts.join("\n")
}

fn sheet_in_markdown(report: &Report) -> String {
    let mut text = format!("## {}\n\n", markdown::escaped(sheet_name(report)));
    if !report.evaluated {
        return text + "Not judged: the sheet has an error.\n";
    }
    if let Some(model) = report.model.as_ref().filter(|model| model.used) {
        text.push_str(&format!("{}\n", markdown::model(model)));
    }
    let rows: Vec<Vec<String>> = places(report)
        .into_iter()
        .flat_map(|(_, claims)| claims)
        .map(row)
        .collect();
    let head = ["where", "claim", "computed", "verdict", "what would give it"];
    text + &markdown::pipes(&head, &[], &rows)
}

fn row(claim: &ClaimReport) -> Vec<String> {
    let verdict = match claim.agrees {
        Some(true) => "agrees",
        Some(false) => "**disagrees**",
        None => "undecided",
    };
    let slips = text::slip_lines(claim, &Look::PLAIN);
    let slips: Vec<String> = slips.iter().map(|line| markdown::escaped(line)).collect();
    vec![
        markdown::escaped(&claim.place),
        markdown::code(&claim.source),
        computed(claim, &Look::PLAIN),
        verdict.into(),
        slips.join("; "),
    ]
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::SlipReport;
    use crate::source::Source;

    fn claim(place: &str, agrees: bool, slips: &[&str]) -> Item {
        let slip = |key: &&str| SlipReport {
            key: (*key).into(),
            gives: 40.2,
            about: "two digits swapped".into(),
        };
        Item::Claim(ClaimReport {
            place: place.into(),
            source: "R is 40 Gly".into(),
            agrees: Some(agrees),
            quoted: "40 Gly".into(),
            quoted_value: Some(40.0),
            computed: Numbers::Scalar(if agrees { 40.0 } else { 50.0 }),
            unit: "Gly".into(),
            tolerance: Some(0.5),
            slips: slips.iter().map(slip).collect(),
            searched: !agrees,
        })
    }

    fn sample() -> Vec<Report> {
        let items = vec![
            claim("abstract", true, &[]),
            claim("sec. 2", false, &["transposed-digits"]),
            claim("abstract", false, &[]),
        ];
        vec![Report {
            sources: vec![Source::new("s.zij", "")],
            items,
            evaluated: true,
            ..Report::default()
        }]
    }

    #[test]
    fn claims_stand_by_where_they_are_quoted() {
        let expected = "\
s.zij
  abstract
    agrees     R is 40 Gly  40 Gly
    disagrees  R is 40 Gly  50 Gly, quoted/computed 0.8
               no plain slip gives this number
  sec. 2
    disagrees  R is 40 Gly  50 Gly, quoted/computed 0.8
               40.2 Gly would follow from two digits swapped (transposed-digits)

3 claims: 1 agrees, 2 disagree (1 explained by a slip)
";
        assert_eq!(render(&sample(), Format::Text, &Look::PLAIN), expected);
    }

    #[test]
    fn the_machine_readable_form_has_sheets_and_totals() {
        let text = render(&sample(), Format::Json, &Look::PLAIN);
        let value: serde_json::Value = serde_json::from_str(&text).expect("JSON");
        let keys: Vec<&String> = value.as_object().expect("an object").keys().collect();
        assert_eq!(keys, ["zij", "sheets", "totals"]);
        assert_eq!(value["totals"]["disagree"], 2);
        let slip = &value["sheets"][0]["claims"][1]["slips"][0];
        assert_eq!(slip["slip"], "transposed-digits");
        assert_eq!(slip["gives"], 40.2);
    }

    #[test]
    fn markdown_has_a_row_for_each_claim() {
        let text = render(&sample(), Format::Markdown, &Look::PLAIN);
        assert_eq!(text.lines().filter(|line| line.starts_with('|')).count(), 5);
        assert!(text.contains("**disagrees** | 40.2 Gly would follow from two digits swapped"));
    }
}
