//! Data tables: comma-separated values with a head that names the columns and
//! may give their units, `r [Mpc]`.

use std::fmt::Write;

/// A data table as text.
pub struct Data {
    /// Names of the columns with the units written beside them.
    pub columns: Vec<(String, Option<String>)>,
    rows: Vec<(u64, csv::StringRecord)>,
}

/// Bytes of a data file at most.
const MAX_BYTES: usize = 1 << 30;

/// Reads a table; the reason why not is a sentence with the line.
///
/// # Errors
/// A file that is no text, has no head, a column twice, or a row of another
/// length than the head.
pub fn read(path: &str, bytes: &[u8]) -> Result<Data, String> {
    let reason = |what: String| format!("{path}: {what}");
    if bytes.len() > MAX_BYTES {
        return Err(reason("more than 1 GiB".into()));
    }
    if bytes.contains(&0) {
        return Err(reason("a binary file, not a table of text".into()));
    }
    let text = std::str::from_utf8(bytes).map_err(|error| {
        let line = 1 + bytes[..error.valid_up_to()]
            .iter()
            .filter(|byte| **byte == b'\n')
            .count();
        reason(format!("line {line} is not UTF-8 text"))
    })?;
    let text = text.strip_prefix('\u{feff}').unwrap_or(text);
    let mut reader = csv::ReaderBuilder::new()
        .delimiter(delimiter(path, text))
        .comment(Some(b'#'))
        .trim(csv::Trim::All)
        .from_reader(text.as_bytes());
    let head = reader
        .headers()
        .map_err(|error| reason(in_words(&error)))?
        .clone();
    let columns: Vec<(String, Option<String>)> = head.iter().map(name_and_unit).collect();
    if columns.iter().all(|(name, _)| name.is_empty()) {
        return Err(reason("empty: it has no head that names its columns".into()));
    }
    for (place, (name, _)) in columns.iter().enumerate() {
        if columns[..place].iter().any(|(known, _)| known == name) {
            return Err(reason(format!("the column {name:?} is there twice")));
        }
    }
    let mut rows = Vec::new();
    for row in reader.records() {
        let row = row.map_err(|error| reason(in_words(&error)))?;
        rows.push((row.position().map_or(0, csv::Position::line), row));
    }
    Ok(Data { columns, rows })
}

impl Data {
    /// The numbers of a column, times `factor`.
    ///
    /// # Errors
    /// A field that is no number, with its line; a sentence.
    pub fn numbers(&self, path: &str, place: usize, factor: f64) -> Result<Vec<f64>, String> {
        let number = |(line, row): &(u64, csv::StringRecord)| {
            let field = row.get(place).unwrap_or("");
            let value = field.parse::<f64>().ok().filter(|value| value.is_finite());
            value.map(|value| value * factor).ok_or_else(|| {
                let mut shown: String = field.chars().take(40).collect();
                if shown.len() < field.len() {
                    let _ = write!(shown, "…");
                }
                let name = &self.columns[place].0;
                format!("{path}: line {line}, column {name}: {shown:?} is not a number")
            })
        };
        self.rows.iter().map(number).collect()
    }
}

/// Tabs where the name says so or the head has them, else commas.
fn delimiter(path: &str, text: &str) -> u8 {
    let head = text
        .lines()
        .find(|line| !line.starts_with('#') && !line.trim().is_empty())
        .unwrap_or("");
    let tabs = path.ends_with(".tsv") || (head.contains('\t') && !head.contains(','));
    if tabs { b'\t' } else { b',' }
}

/// `r [Mpc]` and `r (Mpc)`.
fn name_and_unit(head: &str) -> (String, Option<String>) {
    for (open, close) in [('[', ']'), ('(', ')')] {
        let inner = head
            .trim_end()
            .strip_suffix(close)
            .and_then(|text| text.split_once(open));
        if let Some((name, unit)) = inner {
            let unit = unit.trim();
            return (
                name.trim().to_owned(),
                (!unit.is_empty()).then(|| unit.to_owned()),
            );
        }
    }
    (head.trim().to_owned(), None)
}

fn in_words(error: &csv::Error) -> String {
    match error.kind() {
        csv::ErrorKind::UnequalLengths {
            pos,
            expected_len,
            len,
        } => {
            let line = pos.as_ref().map_or(0, csv::Position::line);
            format!("line {line} has {len} fields, and the head {expected_len}")
        }
        _ => error.to_string(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_head_names_columns_and_units() {
        let data = read("t.csv", b"name,r [Mpc], v (km/s)\n1,2,3\n").expect("a table");
        let unit = |text: &str| Some(text.to_owned());
        assert_eq!(data.columns[1], ("r".to_owned(), unit("Mpc")));
        assert_eq!(data.columns[2], ("v".to_owned(), unit("km/s")));
        assert_eq!(data.numbers("t.csv", 2, 1e3), Ok(vec![3e3]));
    }

    #[test]
    fn what_is_wrong_is_said_with_its_line() {
        let data = read("t.csv", b"z\n1\nx\n").expect("a table");
        let error = data.numbers("t.csv", 0, 1.0).expect_err("no number");
        assert_eq!(error, "t.csv: line 3, column z: \"x\" is not a number");
        assert!(read("t.csv", b"a,b\n1\n").is_err_and(|error| error.contains("line 2")));
        assert!(read("t.csv", b"a,a\n").is_err_and(|error| error.contains("twice")));
        assert!(read("t.csv", b"a\0").is_err_and(|error| error.contains("binary")));
        assert!(read("t.csv", b"a\n\xff\n").is_err_and(|error| error.contains("line 2")));
    }
}
