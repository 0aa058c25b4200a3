//! A report as one JSON object. The structures below are its shape: the keys
//! are stable and stand in this order, numbers are in the shortest form that
//! reads back the same, and what does not exist is `null`.

use super::{frame_key, one_line};
use crate::diagnostic::{Diagnostic, Severity};
use crate::report::{ClaimReport, Item, ModelReport, Numbers, Report, Shown, SlipReport, TableReport};
use crate::source::{Places, Span};
use serde::ser::{Serialize, SerializeMap, SerializeSeq, Serializer};

/// The whole report, with a line break at the end.
#[must_use]
pub fn render(report: &Report) -> String {
    // Strings and numbers alone cannot fail to be written.
    let mut text = serde_json::to_string(&document(report)).unwrap_or_default();
    text.push('\n');
    text
}

/// The claims of several sheets with their totals, with a line break at the
/// end.
#[must_use]
pub fn referee(reports: &[Report], totals: super::referee::Totals) -> String {
    let sheet = |report| {
        let Document {
            sheet,
            model,
            claims,
            warnings,
            errors,
            ..
        } = document(report);
        RefereedSheet {
            sheet,
            model,
            claims,
            warnings,
            errors,
        }
    };
    let refereed = Refereed {
        zij: env!("CARGO_PKG_VERSION"),
        sheets: reports.iter().map(sheet).collect(),
        totals,
    };
    let mut text = serde_json::to_string(&refereed).unwrap_or_default();
    text.push('\n');
    text
}

#[derive(serde::Serialize)]
struct Refereed<'a> {
    zij: &'static str,
    sheets: Vec<RefereedSheet<'a>>,
    totals: super::referee::Totals,
}

#[derive(serde::Serialize)]
struct RefereedSheet<'a> {
    sheet: Option<&'a str>,
    model: Option<Model<'a>>,
    claims: Vec<Claim<'a>>,
    warnings: Vec<Message<'a>>,
    errors: Vec<Message<'a>>,
}

#[derive(serde::Serialize)]
struct Document<'a> {
    zij: &'static str,
    sheet: Option<&'a str>,
    model: Option<Model<'a>>,
    results: Vec<NamedValue<'a>>,
    printed: Vec<PrintedValue<'a>>,
    claims: Vec<Claim<'a>>,
    tables: Vec<Table<'a>>,
    warnings: Vec<Message<'a>>,
    errors: Vec<Message<'a>>,
}

#[derive(serde::Serialize)]
struct Model<'a> {
    name: &'a str,
    parameters: Parameters<'a>,
}

#[derive(serde::Serialize)]
struct NamedValue<'a> {
    name: &'a str,
    #[serde(flatten)]
    value: Value<'a>,
}

#[derive(serde::Serialize)]
struct PrintedValue<'a> {
    source: String,
    #[serde(flatten)]
    value: Value<'a>,
}

#[derive(serde::Serialize)]
struct Value<'a> {
    value: Figures<'a>,
    unit: &'a str,
    uncertainty: Option<f64>,
    dimension: &'a str,
    frame: &'static str,
    about: Option<&'a str>,
}

#[derive(serde::Serialize)]
struct Claim<'a> {
    #[serde(rename = "where")]
    place: &'a str,
    source: String,
    verdict: Option<&'static str>,
    quoted: Quoted<'a>,
    computed: Figures<'a>,
    unit: &'a str,
    tolerance: Option<f64>,
    slips: Vec<Slip<'a>>,
}

#[derive(serde::Serialize)]
struct Slip<'a> {
    slip: &'a str,
    gives: f64,
    about: &'a str,
}

/// A number where one was quoted, else the words (`between 1 and 2`, `never`).
#[derive(serde::Serialize)]
#[serde(untagged)]
enum Quoted<'a> {
    Number(f64),
    Words(&'a str),
    Nothing,
}

#[derive(serde::Serialize)]
struct Table<'a> {
    columns: Vec<Column<'a>>,
    rows: Rows<'a>,
}

#[derive(serde::Serialize)]
struct Column<'a> {
    name: &'a str,
    unit: &'a str,
}

#[derive(serde::Serialize)]
struct Message<'a> {
    code: &'static str,
    message: &'a str,
    line: usize,
    column: usize,
    end_line: usize,
    end_column: usize,
    notes: Vec<String>,
    fixes: Vec<Repair<'a>>,
}

#[derive(serde::Serialize)]
struct Repair<'a> {
    title: &'a str,
    edits: Vec<Edit<'a>>,
}

#[derive(serde::Serialize)]
struct Edit<'a> {
    line: usize,
    column: usize,
    end_line: usize,
    end_column: usize,
    text: &'a str,
}

struct Parameters<'a>(&'a [(String, Numbers, String)]);

#[derive(serde::Serialize)]
struct Parameter<'a> {
    value: Figures<'a>,
    unit: &'a str,
}

impl Serialize for Parameters<'_> {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let mut map = serializer.serialize_map(Some(self.0.len()))?;
        for (name, value, unit) in self.0 {
            let value = Figures(value);
            map.serialize_entry(name, &Parameter { value, unit })?;
        }
        map.end()
    }
}

/// A number or truth value, an array of them, `"never"`, or `null`.
struct Figures<'a>(&'a Numbers);

impl Serialize for Figures<'_> {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        match self.0 {
            Numbers::Scalar(number) => number.serialize(serializer),
            Numbers::Series(all) => all.serialize(serializer),
            Numbers::Truth(truth) => truth.serialize(serializer),
            Numbers::Truths(all) => all.serialize(serializer),
            Numbers::Never => "never".serialize(serializer),
            Numbers::Missing => serializer.serialize_none(),
        }
    }
}

/// The rows of a table that is kept by columns.
struct Rows<'a>(&'a TableReport);

impl Serialize for Rows<'_> {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let rows = self.0.rows();
        let mut list = serializer.serialize_seq(Some(rows))?;
        for row in 0..rows {
            list.serialize_element(&self.0.row(row).collect::<Vec<_>>())?;
        }
        list.end()
    }
}

fn document(report: &Report) -> Document<'_> {
    let mut document = Document {
        zij: env!("CARGO_PKG_VERSION"),
        sheet: report.sources.first().map(|source| &*source.name),
        model: report.model.as_ref().map(model),
        results: Vec::new(),
        printed: Vec::new(),
        claims: Vec::new(),
        tables: Vec::new(),
        warnings: messages(report, Severity::Warning),
        errors: messages(report, Severity::Error),
    };
    for item in &report.items {
        match item {
            Item::Result(shown) => document.results.push(named(shown)),
            Item::Printed(shown) => document.printed.push(printed(shown)),
            Item::Claim(one) => document.claims.push(claim(one)),
            Item::Table(one) => document.tables.push(table(one)),
            Item::Text(_) => {}
        }
    }
    document
}

fn model(model: &ModelReport) -> Model<'_> {
    Model {
        name: &model.name,
        parameters: Parameters(&model.parameters),
    }
}

fn named(shown: &Shown) -> NamedValue<'_> {
    NamedValue {
        name: &shown.name,
        value: value(shown),
    }
}

fn printed(shown: &Shown) -> PrintedValue<'_> {
    PrintedValue {
        source: one_line(&shown.name),
        value: value(shown),
    }
}

fn value(shown: &Shown) -> Value<'_> {
    Value {
        value: Figures(&shown.value),
        unit: &shown.unit,
        uncertainty: None,
        dimension: &shown.dimension,
        frame: frame_key(shown.frame),
        about: shown.about.as_deref(),
    }
}

fn claim(claim: &ClaimReport) -> Claim<'_> {
    Claim {
        place: &claim.place,
        source: one_line(&claim.source),
        verdict: claim
            .agrees
            .map(|agrees| if agrees { "agrees" } else { "disagrees" }),
        quoted: match claim.quoted_value {
            Some(number) => Quoted::Number(number),
            None if claim.quoted.is_empty() => Quoted::Nothing,
            None => Quoted::Words(&claim.quoted),
        },
        computed: Figures(&claim.computed),
        unit: &claim.unit,
        tolerance: claim.tolerance,
        slips: claim.slips.iter().map(slip).collect(),
    }
}

fn slip(slip: &SlipReport) -> Slip<'_> {
    Slip {
        slip: &slip.key,
        gives: slip.gives,
        about: &slip.about,
    }
}

fn table(table: &TableReport) -> Table<'_> {
    Table {
        columns: table
            .columns
            .iter()
            .map(|column| Column {
                name: &column.name,
                unit: &column.unit,
            })
            .collect(),
        rows: Rows(table),
    }
}

fn messages(report: &Report, severity: Severity) -> Vec<Message<'_>> {
    let mut places: Vec<Option<Places>> = report.sources.iter().map(|_| None).collect();
    report
        .diagnostics
        .iter()
        .filter(|(_, diagnostic)| diagnostic.severity == severity)
        .map(|(index, diagnostic)| {
            let index = (*index).min(report.sources.len().saturating_sub(1));
            let places = match (places.get_mut(index), report.sources.get(index)) {
                (Some(slot), Some(source)) => Some(&*slot.get_or_insert_with(|| Places::new(&source.text))),
                _ => None,
            };
            message(report, index, diagnostic, places)
        })
        .collect()
}

fn message<'a>(
    report: &'a Report,
    index: usize,
    diagnostic: &'a Diagnostic,
    places: Option<&Places>,
) -> Message<'a> {
    let corners = |span: Span| corners(span, places);
    let (line, column, end_line, end_column) = corners(diagnostic.at.span);
    let elsewhere = report
        .sources
        .get(index)
        .filter(|_| index > 0)
        .map(|source| format!("the place is in {}", source.name));
    let edit = |(span, text): &'a (Span, String)| {
        let (line, column, end_line, end_column) = corners(*span);
        Edit {
            line,
            column,
            end_line,
            end_column,
            text,
        }
    };
    Message {
        code: diagnostic.code,
        message: &diagnostic.message,
        line,
        column,
        end_line,
        end_column,
        notes: elsewhere
            .into_iter()
            .chain(diagnostic.notes.iter().cloned())
            .collect(),
        fixes: diagnostic
            .fixes
            .iter()
            .map(|fix| Repair {
                title: &fix.title,
                edits: fix.edits.iter().map(edit).collect(),
            })
            .collect(),
    }
}

fn corners(span: Span, places: Option<&Places>) -> (usize, usize, usize, usize) {
    let Some(places) = places else {
        return (1, 1, 1, 1);
    };
    let start = places.position(span.start);
    let end = places.position(span.end.max(span.start));
    (start.line, start.column, end.line, end.column)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::{Frame, TableColumn};
    use crate::source::Source;

    fn parsed(report: &Report) -> serde_json::Value {
        serde_json::from_str(&render(report)).expect("what was written is JSON")
    }

    fn keys(value: &serde_json::Value) -> Vec<&str> {
        let object = value.as_object().expect("an object");
        object.keys().map(String::as_str).collect()
    }

    fn sample() -> Report {
        let shown = Shown {
            name: "a +\n  b".into(),
            value: Numbers::Scalar(0.1),
            unit: "Gly".into(),
            frame: Frame::Comoving,
            dimension: "a length".into(),
            about: None,
        };
        let claim = ClaimReport {
            place: "abstract".into(),
            source: "a is 1".into(),
            agrees: Some(false),
            quoted: "1".into(),
            quoted_value: Some(1.0),
            computed: Numbers::Scalar(2.0),
            unit: String::new(),
            tolerance: None,
            slips: Vec::new(),
            searched: false,
        };
        let column = TableColumn {
            name: "z".into(),
            unit: String::new(),
            about: None,
            values: vec![1.0, f64::NAN],
        };
        let table = TableReport {
            path: None,
            columns: vec![column],
        };
        Report {
            sources: vec![Source::new("s.zij", "Ωm\nΩ + 1 s")],
            items: vec![
                Item::Result(shown.clone()),
                Item::Printed(shown),
                Item::Claim(claim),
                Item::Table(table),
            ],
            ..Report::default()
        }
    }

    #[test]
    fn the_keys_are_those_of_the_language_page() {
        let value = parsed(&sample());
        let top = "zij sheet model results printed claims tables warnings errors";
        assert_eq!(keys(&value), top.split(' ').collect::<Vec<_>>());
        let shown = "name value unit uncertainty dimension frame about";
        assert_eq!(keys(&value["results"][0]), shown.split(' ').collect::<Vec<_>>());
        let printed = shown.replace("name", "source");
        assert_eq!(keys(&value["printed"][0]), printed.split(' ').collect::<Vec<_>>());
        let claim = "where source verdict quoted computed unit tolerance slips";
        assert_eq!(keys(&value["claims"][0]), claim.split(' ').collect::<Vec<_>>());
        assert_eq!(keys(&value["tables"][0]), ["columns", "rows"]);
    }

    #[test]
    fn what_could_not_be_computed_is_null() {
        let value = parsed(&sample());
        assert_eq!(value["tables"][0]["rows"][1][0], serde_json::Value::Null);
        assert_eq!(value["printed"][0]["source"], "a + b");
    }

    #[test]
    fn numbers_read_back_the_same() {
        let number = 13.797_123_456_789_012;
        let mut report = sample();
        if let Some(Item::Result(shown)) = report.items.first_mut() {
            shown.value = Numbers::Scalar(number);
        }
        let value = parsed(&report);
        assert_eq!(value["results"][0]["value"].as_f64(), Some(number));
    }

    #[test]
    fn places_count_characters_from_one() {
        let mut report = sample();
        let diagnostic = Diagnostic::error("unlike-sides", "cannot add", Span::new(9, 12), "a time").fix(
            "drop the unit",
            Span::new(10, 12),
            "",
        );
        report.diagnostics.push((0, diagnostic));
        let value = parsed(&report);
        let error = &value["errors"][0];
        let expected = "code message line column end_line end_column notes fixes";
        assert_eq!(keys(error), expected.split(' ').collect::<Vec<_>>());
        assert_eq!(
            (error["line"].as_u64(), error["column"].as_u64()),
            (Some(2), Some(5))
        );
        assert_eq!(error["end_column"].as_u64(), Some(8));
        assert_eq!(error["fixes"][0]["edits"][0]["column"].as_u64(), Some(6));
    }
}
