//! A report for reading: values aligned on their equals signs, claims with
//! their verdicts, tables aligned on the decimal point, and last the model all
//! of it rests on.

use super::look::{self, Look, Tone};
use super::{frame_word, number, one_line};
use crate::report::{
    ClaimReport, Frame, Item, ModelReport, Numbers, Report, Shown, SlipReport, TableColumn, TableReport,
};

/// Rows of a table shown in the text form; the other forms have them all.
const MAX_ROWS: usize = 400;

/// Names longer than this do not push the others to the right.
const MAX_NAME_WIDTH: usize = 28;

/// The whole report.
#[must_use]
pub fn render(report: &Report, look: &Look) -> String {
    let mut parts = blocks(report, look);
    parts.extend(summary(report));
    if let Some(model) = report.model.as_ref().filter(|model| model.used) {
        parts.push(model_lines(model, look));
    }
    parts.retain(|part| !part.is_empty());
    parts.join("\n")
}

/// The report of one entry at the prompt: its values, without the model that
/// the prompt names already.
#[must_use]
pub fn render_entry(report: &Report, look: &Look) -> String {
    let mut text = String::new();
    for item in &report.items {
        match item {
            Item::Printed(shown) => text.push_str(&answer(shown, look)),
            Item::Result(shown) => text.push_str(&values(&[shown], look)),
            Item::Claim(claim) => text.push_str(&claim_lines(claim, look)),
            Item::Table(table) => text.push_str(&table_lines(table, look)),
            Item::Text(lines) => text.push_str(&text_lines(lines)),
        }
    }
    text
}

/// Items of a kind that follow each other share a block.
fn blocks(report: &Report, look: &Look) -> Vec<String> {
    let mut parts = Vec::new();
    let mut items = report.items.as_slice();
    while let Some(first) = items.first() {
        let same = |item: &&Item| kind(item) == kind(first);
        let count = items.iter().take_while(same).count();
        let (block, rest) = items.split_at(count);
        parts.push(block_lines(block, look));
        items = rest;
    }
    parts
}

#[derive(PartialEq)]
enum Kind {
    Values,
    Claims,
    Table,
    Text,
}

fn kind(item: &Item) -> Kind {
    match item {
        Item::Result(_) | Item::Printed(_) => Kind::Values,
        Item::Claim(_) => Kind::Claims,
        Item::Table(_) => Kind::Table,
        Item::Text(_) => Kind::Text,
    }
}

fn block_lines(items: &[Item], look: &Look) -> String {
    let mut shown = Vec::new();
    let mut lines = Vec::new();
    for item in items {
        match item {
            Item::Result(value) | Item::Printed(value) => shown.push(value),
            Item::Claim(claim) => lines.push(claim_lines(claim, look)),
            Item::Table(table) => lines.push(table_lines(table, look)),
            Item::Text(text) => lines.push(text_lines(text)),
        }
    }
    if !shown.is_empty() {
        lines.push(values(&shown, look));
    }
    let tables = matches!(items.first(), Some(Item::Table(_)));
    lines.join(if tables { "\n" } else { "" })
}

fn text_lines(text: &str) -> String {
    format!("{}\n", text.trim_end())
}

// ---- values ----

fn values(shown: &[&Shown], look: &Look) -> String {
    let name_width = |value: &&Shown| look::width(&one_line(&value.name));
    let names = shown
        .iter()
        .map(name_width)
        .filter(|width| *width <= MAX_NAME_WIDTH);
    let name_width = names.max().unwrap_or(0);
    let quantities: Vec<_> = shown.iter().map(|value| quantity(value, look)).collect();
    let fits = |width: &usize| *width <= MAX_NAME_WIDTH;
    let value_width = quantities.iter().map(|text| look::width(text)).filter(fits).max();
    shown
        .iter()
        .zip(&quantities)
        .map(|(value, quantity)| value_lines(value, quantity, name_width, value_width.unwrap_or(0), look))
        .collect()
}

fn value_lines(value: &Shown, quantity: &str, name_width: usize, value_width: usize, look: &Look) -> String {
    let name = look::pad(&one_line(&value.name), name_width);
    let head = format!("{name} = ");
    let Some(about) = &value.about else {
        return hanging(&head, quantity, look);
    };
    let about = look.paint(Tone::Faint, &one_line(about));
    let line = format!("{head}{}  {about}", look::pad(quantity, value_width));
    if look::width(&line) <= look.width {
        return format!("{line}\n");
    }
    format!("{}{}", hanging(&head, quantity, look), indented(&about, 4, look))
}

/// What the prompt answers to an expression: beside it its dimension, which
/// says the frame as well, or on a narrow terminal the frame alone.
fn answer(shown: &Shown, look: &Look) -> String {
    let mut bare = shown.clone();
    if frame_word(shown).is_some_and(|word| shown.dimension.contains(word)) {
        bare.frame = Frame::Proper;
    }
    let dimension = look.paint(Tone::Faint, &shown.dimension);
    let line = format!("= {}   {dimension}", quantity(&bare, look));
    if look::width(&line) <= look.width {
        format!("{}\n", line.trim_end())
    } else {
        hanging("= ", &quantity(shown, look), look)
    }
}

/// Numbers, unit and frame.
fn quantity(shown: &Shown, look: &Look) -> String {
    let numbers = number::numbers(&shown.value, look);
    let missing = matches!(shown.value, Numbers::Missing);
    let mut text = if missing {
        look.paint(Tone::Bad, &numbers)
    } else {
        numbers
    };
    if missing || matches!(shown.value, Numbers::Never) {
        return text;
    }
    if !shown.unit.is_empty() {
        text = format!(
            "{text}{}{}",
            unit_gap(&shown.unit),
            look.paint(Tone::Unit, &shown.unit)
        );
    }
    if let Some(word) = frame_word(shown) {
        text = format!("{text} {}", look.paint(Tone::Faint, &format!("({word})")));
    }
    if let Numbers::Series(all) = &shown.value {
        let count = format!("  ({} values)", all.len());
        text = format!("{text}{}", look.paint(Tone::Faint, &count));
    }
    text
}

fn unit_gap(unit: &str) -> &'static str {
    if unit == "%" { "" } else { " " }
}

/// Text after a head, going on below itself where it is too long.
pub(super) fn hanging(head: &str, text: &str, look: &Look) -> String {
    let indent = look::width(head).min(look.width / 3).max(2);
    let room = look.width.saturating_sub(indent).max(12);
    let first_room = look.width.saturating_sub(look::width(head));
    if look::width(text) <= first_room {
        return format!("{head}{text}\n");
    }
    let lines = look::wrap(text, room).join(&format!("\n{}", " ".repeat(indent)));
    if look::width(head) > indent {
        format!("{}\n{}{lines}\n", head.trim_end(), " ".repeat(indent))
    } else {
        format!("{head}{lines}\n")
    }
}

pub(super) fn indented(text: &str, indent: usize, look: &Look) -> String {
    let room = look.width.saturating_sub(indent).max(12);
    look::wrap(text, room)
        .iter()
        .map(|line| format!("{}{line}\n", " ".repeat(indent)))
        .collect()
}

// ---- claims ----

fn claim_lines(claim: &ClaimReport, look: &Look) -> String {
    let verdict = match claim.agrees {
        Some(true) => look.paint(Tone::Good, "agrees"),
        Some(false) => look.paint(Tone::Bad, "disagrees"),
        None => look.paint(Tone::Doubt, "undecided"),
    };
    let place = if claim.place.is_empty() {
        String::new()
    } else {
        format!("{}: ", look.paint(Tone::Strong, &claim.place))
    };
    let head = look::pad(&verdict, 11);
    let statement = format!("{place}{}", one_line(&claim.source));
    let figures = figures(claim, look);
    let one = format!("{head}{statement}  {}", look.paint(Tone::Faint, &figures));
    if claim.agrees != Some(false) && look::width(&one) <= look.width {
        return format!("{}\n", one.trim_end());
    }
    let indent = 11.min(look.width / 4);
    let detail = if figures.is_empty() {
        String::new()
    } else {
        indented(&figures, indent, look)
    };
    let slips: String = slip_lines(claim, look)
        .iter()
        .map(|line| indented(line, indent, look))
        .collect();
    format!("{}{detail}{slips}", hanging(&head, &statement, look))
}

/// What would give the quoted number.
pub(super) fn slip_lines(claim: &ClaimReport, look: &Look) -> Vec<String> {
    if claim.searched && claim.slips.is_empty() {
        return vec!["no plain slip gives this number".into()];
    }
    let line = |slip: &SlipReport| {
        let gives = number::short(slip.gives, look);
        let unit = with_gap(&claim.unit);
        format!("{gives}{unit} would follow from {} ({})", slip.about, slip.key)
    };
    claim.slips.iter().map(line).collect()
}

/// Quoted, computed and their ratio, as far as they are numbers.
fn figures(claim: &ClaimReport, look: &Look) -> String {
    let mut parts = Vec::new();
    if !claim.quoted.is_empty() && claim.agrees != Some(true) {
        parts.push(format!("quoted {}", one_line(&claim.quoted)));
    }
    match &claim.computed {
        Numbers::Missing => parts.push("not computed".into()),
        // A bare comparison says it all itself.
        Numbers::Truth(_) => {}
        computed => {
            let unit = with_gap(&claim.unit);
            let unit = if matches!(computed, Numbers::Never) {
                String::new()
            } else {
                unit
            };
            parts.push(format!("computed {}{unit}", number::numbers(computed, look)));
        }
    }
    if let (Some(quoted), Numbers::Scalar(computed), Some(false)) =
        (claim.quoted_value, &claim.computed, claim.agrees)
    {
        let ratio = quoted / computed;
        if ratio.is_finite() {
            parts.push(format!("quoted/computed {}", number::short(ratio, look)));
        }
    }
    parts.join(", ")
}

fn with_gap(unit: &str) -> String {
    if unit.is_empty() {
        String::new()
    } else {
        format!("{}{unit}", unit_gap(unit))
    }
}

fn summary(report: &Report) -> Option<String> {
    let verdicts: Vec<_> = report
        .items
        .iter()
        .filter_map(|item| match item {
            Item::Claim(claim) => Some(claim.agrees),
            Item::Result(_) | Item::Printed(_) | Item::Table(_) | Item::Text(_) => None,
        })
        .collect();
    if verdicts.len() < 2 {
        return None;
    }
    let count = |verdict| verdicts.iter().filter(|one| **one == verdict).count();
    let parts = [
        (count(Some(true)), "agree", "agrees"),
        (count(Some(false)), "disagree", "disagrees"),
        (count(None), "undecided", "undecided"),
    ];
    let said: Vec<_> = parts
        .iter()
        .filter(|(number, ..)| *number > 0)
        .map(|(number, many, one)| format!("{number} {}", if *number == 1 { one } else { many }))
        .collect();
    Some(format!("{} claims: {}\n", verdicts.len(), said.join(", ")))
}

// ---- tables ----

fn table_lines(table: &TableReport, look: &Look) -> String {
    let rows = table
        .columns
        .iter()
        .map(|column| column.values.len())
        .max()
        .unwrap_or(0);
    if let Some(path) = &table.path {
        let rows_word = if rows == 1 { "row" } else { "rows" };
        return format!(
            "table {path}: {rows} {rows_word} of {} columns\n",
            table.columns.len()
        );
    }
    let columns: Vec<_> = table.columns.iter().map(|column| cells(column, look)).collect();
    let mut text = String::new();
    for group in column_groups(&columns, look) {
        if !text.is_empty() {
            text.push('\n');
        }
        let lines = columns.iter().map(Vec::len).max().unwrap_or(0);
        for line in 0..lines {
            text.push_str(&row_line(&columns, &group, line, look));
        }
    }
    if rows > MAX_ROWS {
        text.push_str(&format!("{} more rows: --as csv has them all\n", rows - MAX_ROWS));
    }
    text + &legend(table, look)
}

/// One line of a table; the first two are its head.
fn row_line(columns: &[Vec<String>], group: &[usize], line: usize, look: &Look) -> String {
    let cell = |index: &usize| columns[*index].get(line).map_or("", String::as_str);
    let cells: Vec<_> = group.iter().map(cell).collect();
    let row = cells.join("  ");
    let row = row.trim_end();
    if line < 2 {
        format!("{}\n", look.paint(Tone::Strong, row))
    } else {
        format!("{row}\n")
    }
}

/// Head, unit and values, all of one width.
fn cells(column: &TableColumn, look: &Look) -> Vec<String> {
    let shown = column.values.len().min(MAX_ROWS);
    let body = number::column(&column.values[..shown], look);
    let unit = if column.unit.is_empty() {
        String::new()
    } else {
        format!("[{}]", column.unit)
    };
    let head = one_line(&column.name);
    let inner = body.first().map_or(0, |cell| look::width(cell));
    let full = inner.max(look::width(&head)).max(look::width(&unit));
    let right = |text: &str| format!("{}{text}", " ".repeat(full.saturating_sub(look::width(text))));
    let mut cells = vec![right(&head), right(&unit)];
    cells.extend(body.iter().map(|cell| right(cell)));
    cells
}

/// Which columns stand side by side: on a narrow terminal the table is cut
/// into several, each with the first column again.
fn column_groups(columns: &[Vec<String>], look: &Look) -> Vec<Vec<usize>> {
    let size = |index: usize| look::width(&columns[index][0]) + 2;
    let mut groups = Vec::new();
    let mut group = Vec::new();
    let mut used = 0;
    for index in 0..columns.len() {
        if group.len() > 1 && used + size(index) > look.width + 2 {
            groups.push(std::mem::replace(&mut group, vec![0]));
            used = size(0);
        }
        group.push(index);
        used += size(index);
    }
    if !group.is_empty() {
        groups.push(group);
    }
    groups
}

fn legend(table: &TableReport, look: &Look) -> String {
    table
        .columns
        .iter()
        .filter_map(|column| column.about.as_ref().map(|about| (column, about)))
        .map(|(column, about)| {
            let line = format!("{}: {}", one_line(&column.name), one_line(about));
            indented(&look.paint(Tone::Faint, &line), 2, look)
        })
        .collect()
}

// ---- the model ----

/// The model, its parameters, its source and what it leaves out.
fn model_lines(model: &ModelReport, look: &Look) -> String {
    let mut head = format!("model: {}", one_line(&model.name));
    if model.by_default {
        head.push_str(" (assumed, for the sheet names none)");
    }
    let parameters: Vec<_> = model
        .parameters
        .iter()
        .map(|parameter| set(parameter, look))
        .collect();
    let mut text = hanging("", &head, look);
    for line in [
        parameters.join(", "),
        model.source.clone(),
        model.notes.join("; "),
    ] {
        if !line.is_empty() {
            text.push_str(&indented(&line, 7.min(look.width / 6), look));
        }
    }
    text.replace('\u{a0}', " ")
        .lines()
        .map(|line| format!("{}\n", look.paint(Tone::Faint, line)))
        .collect()
}

fn set((name, value, unit): &(String, Numbers, String), look: &Look) -> String {
    // No-break spaces: one parameter is not torn apart between lines.
    let value = number::numbers(value, look).replace(' ', "\u{a0}");
    let unit = with_gap(unit).replace(' ', "\u{a0}");
    format!("{name}\u{a0}=\u{a0}{value}{unit}")
}

#[cfg(test)]
mod tests {
    use super::*;

    fn shown(name: &str, value: f64, unit: &str, about: &str) -> Shown {
        Shown {
            name: name.into(),
            value: Numbers::Scalar(value),
            unit: unit.into(),
            dimension: "a length".into(),
            about: (!about.is_empty()).then(|| about.into()),
            ..Shown::default()
        }
    }

    fn text(items: Vec<Item>, look: &Look) -> String {
        render(
            &Report {
                items,
                evaluated: true,
                ..Report::default()
            },
            look,
        )
    }

    #[test]
    fn results_align_on_the_equals_sign() {
        let items = vec![
            Item::Result(shown("R_obs", 46.196_312_34, "Gly", "radius")),
            Item::Result(shown("v", 0.8, "c", "")),
            Item::Result(shown("Ωm", 0.3, "", "matter")),
        ];
        assert_eq!(
            text(items, &Look::PLAIN),
            "R_obs = 46.1963 Gly  radius\nv     = 0.8 c\nΩm    = 0.3          matter\n"
        );
    }

    #[test]
    fn comoving_is_said_in_words() {
        let mut value = shown("D", 3.0, "Gly", "");
        value.frame = Frame::Comoving;
        assert_eq!(
            text(vec![Item::Printed(value)], &Look::PLAIN),
            "D = 3 Gly (comoving)\n"
        );
    }

    #[test]
    fn descriptions_go_below_on_a_narrow_terminal() {
        let look = Look {
            width: 30,
            ..Look::PLAIN
        };
        let about = "radius of the observable universe";
        let items = vec![Item::Result(shown("R_obs", 46.196_312_34, "Gly", about))];
        assert_eq!(
            text(items, &look),
            "R_obs = 46.1963 Gly\n    radius of the observable\n    universe\n"
        );
    }

    #[test]
    fn a_disagreeing_claim_shows_quoted_computed_and_ratio() {
        let claim = ClaimReport {
            place: "abstract".into(),
            source: "R is 40 Gly".into(),
            agrees: Some(false),
            quoted: "40 Gly".into(),
            quoted_value: Some(40.0),
            computed: Numbers::Scalar(50.0),
            unit: "Gly".into(),
            tolerance: Some(0.5),
            slips: Vec::new(),
            searched: false,
        };
        assert_eq!(
            text(vec![Item::Claim(claim)], &Look::PLAIN),
            "disagrees  abstract: R is 40 Gly\n           quoted 40 Gly, computed 50 Gly, quoted/computed 0.8\n"
        );
    }

    #[test]
    fn tables_have_head_unit_and_aligned_numbers() {
        let column = |name: &str, unit: &str, values: &[f64]| TableColumn {
            name: name.into(),
            unit: unit.into(),
            about: None,
            values: values.into(),
        };
        let table = TableReport {
            path: None,
            columns: vec![
                column("z", "", &[0.5, 1.0, 10.0]),
                column("D_L(z)", "Gpc", &[2.812_345_6, 6.8, 104.5]),
            ],
        };
        assert_eq!(
            text(vec![Item::Table(table)], &Look::PLAIN),
            "   z   D_L(z)\n        [Gpc]\n 0.5    2.812\n 1.0    6.800\n10.0  104.500\n"
        );
    }

    #[test]
    fn the_model_stands_below_only_where_it_was_used() {
        let mut report = Report {
            items: vec![Item::Result(shown("a", 1.0, "", ""))],
            model: Some(ModelReport {
                name: "flat".into(),
                used: false,
                parameters: vec![("H0".into(), Numbers::Scalar(70.0), "km/s/Mpc".into())],
                notes: vec!["no radiation".into()],
                ..ModelReport::default()
            }),
            ..Report::default()
        };
        assert_eq!(render(&report, &Look::PLAIN), "a = 1\n");
        if let Some(model) = &mut report.model {
            model.used = true;
        }
        let text = render(&report, &Look::PLAIN);
        assert_eq!(
            text,
            "a = 1\n\nmodel: flat\n       H0 = 70 km/s/Mpc\n       no radiation\n"
        );
    }
}
