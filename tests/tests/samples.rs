//! A published sample run through the language: 1701 type Ia light curves of
//! Pantheon+ and SH0ES (Brout et al. 2022, ApJ 938, 110; Scolnic et al. 2022,
//! ApJ 938, 113). The file has no licence and is not part of the repository;
//! where it lies in the shared data beside the checkout it is read, elsewhere
//! there is nothing to test.

use std::path::PathBuf;
use zij_tests::{repository, subject};

/// The sample as comma-separated values with the columns that are used.
fn sample() -> Option<String> {
    let path: PathBuf = repository::root().join("../shared/data/Pantheon+SH0ES.dat");
    let text = std::fs::read_to_string(path).ok()?;
    let wanted = ["zHD", "zHEL", "MU_SH0ES", "MU_SH0ES_ERR_DIAG"];
    let mut lines = text
        .lines()
        .map(|line| line.split_whitespace().collect::<Vec<_>>());
    let head = lines.next()?;
    let places: Vec<usize> = wanted
        .iter()
        .map(|name| head.iter().position(|known| known == name))
        .collect::<Option<_>>()?;
    let rows = lines.map(|row| {
        places
            .iter()
            .map(|place| row[*place])
            .collect::<Vec<_>>()
            .join(",")
    });
    let head = "zHD,zHEL,mu [mag],e_mu [mag]".to_owned();
    Some(std::iter::once(head).chain(rows).collect::<Vec<_>>().join("\n"))
}

/// The value of an expression over the sample.
fn value(sample: &'static str, expression: &str) -> f64 {
    let sheet = format!(
        r#"
assume flat with H0 = 73.04 km/s/Mpc, Ωm = 0.334
read "sample.csv" as sn only zHD > 0.01
d_L = (1 + sn.zHEL) * D_M(sn.zHD)
off = sn.mu - 5*log10(d_L / (10 pc))
{expression}
"#
    );
    let report = subject::run_with(subject::Folder(vec![("sample.csv", sample)]), &sheet);
    subject::last_number(&report).unwrap_or_else(|| panic!("{}", subject::said(&report)))
}

#[test]
fn supernovae_lie_on_the_hubble_diagram_of_their_paper() {
    let Some(sample) = sample() else { return };
    let sample: &'static str = Box::leak(sample.into_boxed_str());
    // Computed apart from us with Simpson's rule over 200 intervals, and in the
    // collection of published values to these digits.
    assert_eq!(value(sample, "count(off)"), 1590.0);
    let offset = value(sample, "sum(off / sn.e_mu^2) / sum(1 / sn.e_mu^2) [mag]");
    assert!((offset - -0.0043).abs() < 5e-5, "{offset}");
    let rms = value(
        sample,
        "sqrt(sum((off - sum(off)/count(off))^2) / count(off)) [mag]",
    );
    assert!((rms - 0.1533).abs() < 1e-4, "{rms}");
}
