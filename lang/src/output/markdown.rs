//! A report as Markdown: pipe tables of the values, the claims and each table,
//! and a line on the model.

use super::look::Look;
use super::{frame_word, number, one_line};
use crate::report::{ClaimReport, Item, ModelReport, Numbers, Report, Shown, TableReport};

/// The whole report.
#[must_use]
pub fn render(report: &Report) -> String {
    let mut values = Vec::new();
    let mut claims = Vec::new();
    let mut tables = Vec::new();
    let mut texts = Vec::new();
    for item in &report.items {
        match item {
            Item::Result(shown) | Item::Printed(shown) => values.push(value(shown)),
            Item::Claim(one) => claims.push(claim(one)),
            Item::Table(one) => tables.push(table(one)),
            Item::Text(text) => texts.push(format!("```text\n{}\n```\n", text.trim_end())),
        }
    }
    let mut parts = Vec::new();
    if !values.is_empty() {
        parts.push(pipes(&["name", "value", "unit", "about"], &[1], &values));
    }
    if !claims.is_empty() {
        let head = ["where", "claim", "computed", "verdict"];
        parts.push(pipes(&head, &[], &claims));
    }
    parts.extend(tables);
    parts.extend(texts);
    parts.extend(report.model.as_ref().filter(|model| model.used).map(model));
    parts.join("\n")
}

fn value(shown: &Shown) -> Vec<String> {
    let unit = match frame_word(shown) {
        Some(word) => format!("{} ({word})", shown.unit),
        None => shown.unit.clone(),
    };
    vec![
        code(&shown.name),
        number::numbers(&shown.value, &Look::PLAIN),
        unit,
        escaped(shown.about.as_deref().unwrap_or("")),
    ]
}

fn claim(claim: &ClaimReport) -> Vec<String> {
    let verdict = match claim.agrees {
        Some(true) => "agrees",
        Some(false) => "**disagrees**",
        None => "undecided",
    };
    let computed = number::numbers(&claim.computed, &Look::PLAIN);
    let computed = match &claim.computed {
        Numbers::Scalar(_) | Numbers::Series(_) => format!("{computed} {}", claim.unit),
        Numbers::Truth(_) | Numbers::Truths(_) | Numbers::Never | Numbers::Missing => computed,
    };
    vec![
        escaped(&claim.place),
        code(&claim.source),
        computed.trim_end().into(),
        verdict.into(),
    ]
}

fn table(table: &TableReport) -> String {
    let head: Vec<_> = table
        .columns
        .iter()
        .map(|column| {
            let unit = if column.unit.is_empty() {
                String::new()
            } else {
                format!(" \\[{}\\]", escaped(&column.unit))
            };
            format!("{}{unit}", escaped(&column.name))
        })
        .collect();
    let columns: Vec<_> = table
        .columns
        .iter()
        .map(|column| number::column(&column.values, &Look::PLAIN))
        .collect();
    let cell = |column: &Vec<String>, row: usize| {
        let text = column.get(row).map_or("", |cell| cell.trim());
        text.to_owned()
    };
    let rows: Vec<Vec<_>> = (0..table.rows())
        .map(|row| columns.iter().map(|column| cell(column, row)).collect())
        .collect();
    let head: Vec<_> = head.iter().map(String::as_str).collect();
    let numeric: Vec<_> = (0..head.len()).collect();
    pipes(&head, &numeric, &rows)
}

pub(super) fn model(model: &ModelReport) -> String {
    let set = |(name, value, unit): &(String, Numbers, String)| {
        let value = number::numbers(value, &Look::PLAIN);
        format!("{} = {value} {unit}", escaped(name))
            .trim_end()
            .to_owned()
    };
    let parameters: Vec<_> = model.parameters.iter().map(set).collect();
    let default = if model.by_default {
        " (assumed, for the sheet names none)"
    } else {
        ""
    };
    let mut sentences = vec![format!("Model: {}{default}", code(&model.name))];
    sentences.extend((!parameters.is_empty()).then(|| parameters.join(", ")));
    sentences.extend((!model.source.is_empty()).then(|| escaped(&model.source)));
    sentences.extend(model.notes.iter().map(|note| escaped(note)));
    format!("{}.\n", sentences.join("; "))
}

pub(super) fn pipes(head: &[&str], numeric: &[usize], rows: &[Vec<String>]) -> String {
    let rule = (0..head.len()).map(|index| if numeric.contains(&index) { "--:" } else { "---" });
    let mut text = format!(
        "| {} |\n| {} |\n",
        head.join(" | "),
        rule.collect::<Vec<_>>().join(" | ")
    );
    for row in rows {
        text.push_str(&format!("| {} |\n", row.join(" | ")));
    }
    text
}

/// Text in which nothing is taken for markup.
pub(super) fn escaped(text: &str) -> String {
    let mut result = String::new();
    for letter in one_line(text).chars() {
        if matches!(letter, '|' | '\\' | '`' | '*' | '_' | '[' | ']' | '<' | '#' | '~') {
            result.push('\\');
        }
        result.push(letter);
    }
    result
}

/// Source text; a pipe would end the cell even inside backticks.
pub(super) fn code(text: &str) -> String {
    let text = one_line(text).replace('|', "\\|");
    if text.contains('`') {
        format!("`` {text} ``")
    } else {
        format!("`{text}`")
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn pipes_and_markup_are_escaped() {
        let shown = Shown {
            name: "a".into(),
            value: Numbers::Scalar(2.0),
            unit: "Mpc".into(),
            about: Some("a | b_c".into()),
            ..Shown::default()
        };
        let report = Report {
            items: vec![Item::Result(shown)],
            ..Report::default()
        };
        assert_eq!(
            render(&report),
            "| name | value | unit | about |\n| --- | --: | --- | --- |\n| `a` | 2 | Mpc | a \\| b\\_c |\n"
        );
    }
}
