//! A report as comma-separated values: the table of a sheet that has exactly
//! one, else its results and printed values, one line for each number.

use super::{frame_key, one_line};
use crate::report::{Item, Numbers, Report, Shown, TableReport};

const HEAD: [&str; 7] = ["name", "element", "value", "unit", "dimension", "frame", "about"];

/// The table of the sheet, or its values.
#[must_use]
pub fn render(report: &Report) -> String {
    let mut tables = report.items.iter().filter_map(|item| match item {
        Item::Table(table) => Some(table),
        Item::Result(_) | Item::Printed(_) | Item::Claim(_) | Item::Text(_) => None,
    });
    match (tables.next(), tables.next()) {
        (Some(only), None) => table(only),
        _ => values(report),
    }
}

/// A table under a head of `name [unit]`.
#[must_use]
pub fn table(table: &TableReport) -> String {
    let head = table.columns.iter().map(|column| {
        if column.unit.is_empty() {
            one_line(&column.name)
        } else {
            format!("{} [{}]", one_line(&column.name), column.unit)
        }
    });
    let mut records = vec![head.collect::<Vec<_>>()];
    records.extend((0..table.rows()).map(|row| table.row(row).map(full).collect()));
    written(&records)
}

fn values(report: &Report) -> String {
    let mut records = vec![HEAD.map(String::from).to_vec()];
    for item in &report.items {
        match item {
            Item::Result(shown) | Item::Printed(shown) => records.extend(value(shown)),
            Item::Claim(_) | Item::Table(_) | Item::Text(_) => {}
        }
    }
    written(&records)
}

/// One record for a scalar, one for each element of a series.
fn value(shown: &Shown) -> Vec<Vec<String>> {
    let record = |element: String, number: String| {
        vec![
            one_line(&shown.name),
            element,
            number,
            shown.unit.clone(),
            shown.dimension.clone(),
            frame_key(shown.frame).into(),
            one_line(shown.about.as_deref().unwrap_or("")),
        ]
    };
    let counted = |numbers: Vec<String>| {
        let numbers = numbers.into_iter().enumerate();
        numbers
            .map(|(at, number)| record((at + 1).to_string(), number))
            .collect()
    };
    match &shown.value {
        Numbers::Scalar(number) => vec![record(String::new(), full(*number))],
        Numbers::Series(all) => counted(all.iter().map(|number| full(*number)).collect()),
        Numbers::Truth(truth) => vec![record(String::new(), truth.to_string())],
        Numbers::Truths(all) => counted(all.iter().map(ToString::to_string).collect()),
        Numbers::Never => vec![record(String::new(), "never".into())],
        Numbers::Missing => vec![record(String::new(), String::new())],
    }
}

/// All digits; nothing for what could not be computed.
fn full(number: f64) -> String {
    if number.is_finite() {
        serde_json::Number::from_f64(number).map_or_else(String::new, |number| number.to_string())
    } else {
        String::new()
    }
}

fn written(records: &[Vec<String>]) -> String {
    let mut writer = ::csv::WriterBuilder::new().from_writer(Vec::new());
    for record in records {
        // A vector takes every byte.
        if writer.write_record(record).is_err() {
            return String::new();
        }
    }
    let bytes = writer.into_inner().unwrap_or_default();
    String::from_utf8(bytes).unwrap_or_default()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::TableColumn;

    fn report(items: Vec<Item>) -> Report {
        Report {
            items,
            ..Report::default()
        }
    }

    fn column(name: &str, unit: &str, values: &[f64]) -> TableColumn {
        TableColumn {
            name: name.into(),
            unit: unit.into(),
            about: None,
            values: values.into(),
        }
    }

    #[test]
    fn the_only_table_is_the_output() {
        let table = TableReport {
            path: None,
            columns: vec![
                column("z", "", &[0.5, 1e-20]),
                column("angle(z, 1)", "arcsec", &[f64::NAN, 0.1]),
            ],
        };
        assert_eq!(
            render(&report(vec![Item::Table(table)])),
            "z,\"angle(z, 1) [arcsec]\"\n0.5,\n1e-20,0.1\n"
        );
    }

    #[test]
    fn descriptions_are_quoted() {
        let shown = Shown {
            name: "a".into(),
            value: Numbers::Scalar(1.0),
            dimension: "a number".into(),
            about: Some("say \"so\", please".into()),
            ..Shown::default()
        };
        let text = render(&report(vec![Item::Result(shown)]));
        let last = text.lines().last();
        assert_eq!(last, Some("a,,1.0,,a number,proper,\"say \"\"so\"\", please\""));
    }

    #[test]
    fn a_series_has_a_line_for_each_element() {
        let shown = Shown {
            name: "s".into(),
            value: Numbers::Series(vec![1.5, 2.5]),
            ..Shown::default()
        };
        let text = render(&report(vec![Item::Printed(shown)]));
        assert!(text.contains("s,1,1.5") && text.contains("s,2,2.5"), "{text}");
    }
}
