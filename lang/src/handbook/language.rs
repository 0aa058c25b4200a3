//! Pages on the language: statements, words, notations, and how zij is run.

/// A page on something of the language.
pub(super) struct LanguagePage {
    /// What it is found under; the first is its head.
    pub names: &'static [&'static str],
    /// The chapter it stands in.
    pub chapter: Chapter,
    /// One line for lists.
    pub about: &'static str,
    /// How it is written, a form a line.
    pub forms: &'static [&'static str],
    /// Sentences.
    pub text: &'static str,
    /// A sheet that uses it; `""` where there is none.
    pub example: &'static str,
}

/// The chapters on the language.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Chapter {
    /// What a sheet is made of.
    Statements,
    /// What statements are made of.
    Notation,
    /// `integral` and the like.
    Binding,
    /// The prompt and the command line.
    Running,
}

impl Chapter {
    /// All of them, in the order of the handbook.
    pub(super) const ALL: [Chapter; 4] = [
        Chapter::Statements,
        Chapter::Notation,
        Chapter::Binding,
        Chapter::Running,
    ];

    /// Its name.
    pub(super) const fn name(self) -> &'static str {
        match self {
            Chapter::Statements => "statements",
            Chapter::Notation => "notation",
            Chapter::Binding => "calculus",
            Chapter::Running => "running",
        }
    }

    /// What is in it.
    pub(super) const fn about(self) -> &'static str {
        match self {
            Chapter::Statements => "what a sheet is made of: given, result, claim and the rest",
            Chapter::Notation => "numbers, units, brackets, frames, conditions, series, models",
            Chapter::Binding => "integrals, sums, roots, extrema, derivatives of any expression",
            Chapter::Running => "the prompt, the command line, the forms of the output",
        }
    }
}

/// All pages.
pub(super) static PAGES: &[LanguagePage] = &[
    // Statements.
    LanguagePage {
        names: &["assume"],
        chapter: Chapter::Statements,
        about: "the cosmological model of the sheet",
        forms: &["assume MODEL"],
        text: "One for a sheet, before anything that needs it. Without one it is planck2018, and the output says so. \
               A single expression is computed in another model by `under`.",
        example: "assume flat with H0 = 70 km/s/Mpc, Ωm = 0.3\nD_L(1.1) [Gpc]",
    },
    LanguagePage {
        names: &["model", "models of one's own"],
        chapter: Chapter::Statements,
        about: "names a model",
        forms: &["model NAME = MODEL"],
        text: "A model is a named one, or one `with` parameters replaced. `flat` closes the budget with dark energy; \
               `general` takes every density and derives the curvature. A parameter replaces what it names and keeps \
               the others that the published set lists.",
        example: "model local = planck2018 with H0 = 73.0(10) km/s/Mpc\nage(0) under local",
    },
    LanguagePage {
        names: &["given", "input"],
        chapter: Chapter::Statements,
        about: "an input, which the command line may override",
        forms: &[
            "given NAME = EXPR \"what it is\"",
            "given NAME [unit] = EXPR \"what it is\"",
        ],
        text: "`zij --given z=1.3 sheet.zij` replaces its value by another of the same dimension. With a unit after \
               the name, that is the unit it is shown in and its dimension is checked.",
        example: "given z = 1.1 \"redshift of the farthest Larkspur galaxy\"\nD_A(z) [Mpc]",
    },
    LanguagePage {
        names: &[
            "definition",
            "value",
            "function",
            "functions of one's own",
            "parameter default",
        ],
        chapter: Chapter::Statements,
        about: "a value or a function of one's own",
        forms: &[
            "NAME = EXPR",
            "NAME [unit] = EXPR where a = EXPR, b = EXPR",
            "NAME(a, b [unit], c = EXPR) [unit] = EXPR",
        ],
        text: "A name is bound once and used below its definition; nothing changes its value. A function needs no \
               annotations: what fits is inferred, so `square(x) = x * x` takes a length as well as a time. A name \
               before ( is a function, otherwise a value; both may exist.",
        example: "recession(d [Mpc]) [km/s] = H0 * d\nrecession(3 Mpc)",
    },
    LanguagePage {
        names: &["where", "local names"],
        chapter: Chapter::Statements,
        about: "local names of a definition",
        forms: &["EXPR where a = EXPR, b [unit] = EXPR"],
        text: "Each local name sees those before it, and nothing outside the statement sees any.",
        example: "growth_time(z) [Gyr] = t2 - t1 where t1 = age(z + 1), t2 = age(z)\ngrowth_time(2)",
    },
    LanguagePage {
        names: &["result", "output"],
        chapter: Chapter::Statements,
        about: "a named output: printed, exported, verified later",
        forms: &[
            "result NAME = EXPR \"what it is\"",
            "result NAME [unit] \"what it is\"",
        ],
        text: "The second form makes a result of a name that is bound already.",
        example: "result R_obs = particle_horizon() [Gly] \"radius of the observable universe\"",
    },
    LanguagePage {
        names: &["claim", "is", "within", "quoted number"],
        chapter: Chapter::Statements,
        about: "a quoted number to check",
        forms: &[
            "claim \"where\": EXPR is 46.5 Gly",
            "claim: EXPR is about 16 Gly",
            "claim: EXPR is EXPR within 2%",
            "claim: EXPR is above EXPR      (below, at least, at most)",
            "claim: EXPR is between EXPR and EXPR",
            "claim: EXPR is never",
            "claim: EXPR < EXPR",
        ],
        text: "`is` agrees when the computed value rounds to the digits as written; `is about` allows half a unit of \
               the last digit that is not zero; `within` sets the tolerance, in percent of the quoted value or as a \
               quantity. A label in quotes says where the number stands. A claim that disagrees gives exit status 1, \
               and is shown with the known slips that would give its digits, or with the word that none does. They \
               are arithmetic, and say nothing of what was really done.",
        example: "assume planck2018\nclaim \"abstract\": 2 * particle_horizon() is 93 Gly within 2%",
    },
    LanguagePage {
        names: &[
            "about", "above", "below", "between", "least", "most", "never", "sigma",
        ],
        chapter: Chapter::Statements,
        about: "words of a claim",
        forms: &[
            "claim: EXPR is about 16 Gly",
            "claim: EXPR is between 1 and 2",
            "claim: EXPR is at least 3",
        ],
        text: "They have meaning after `is` alone and may be names elsewhere; see `help claim`.",
        example: "claim: 2 + 2 is between 3 and 5",
    },
    LanguagePage {
        names: &["table"],
        chapter: Chapter::Statements,
        about: "rows of values",
        forms: &[
            "table x = RANGE: EXPR [unit], EXPR [unit] \"what it is\"",
            "table \"out.csv\" x = RANGE: EXPR, …",
        ],
        text: "With a file in quotes the rows are written there, without one they are shown. A string after a column \
               describes it.",
        example: "table z = 0.5 .. 3 every 0.5: D_C(z) [Gly], D_L(z) [Gpc], age(z) [Gyr]",
    },
    LanguagePage {
        names: &["figure", "plot"],
        chapter: Chapter::Statements,
        about: "a plot (not drawn yet)",
        forms: &["figure \"out.svg\" x = RANGE: EXPR [unit], …"],
        text: "Read and checked today, drawn in a later version.",
        example: "",
    },
    LanguagePage {
        names: &["read", "data", "column", "only", "as", "csv"],
        chapter: Chapter::Statements,
        about: "a table of data",
        forms: &[
            "read \"sample.csv\" as NAME",
            "read \"sample.csv\" as NAME with a [unit], b [unit] only CONDITION",
        ],
        text: "The first line of the file names the columns, each with its unit in brackets, `r [Mpc]`; `with` gives \
               the units that the file lacks. `only` selects rows, and column names stand bare in it. NAME.a is a \
               column, and every function takes one whole.",
        example: "",
    },
    LanguagePage {
        names: &["include"],
        chapter: Chapter::Statements,
        about: "the definitions of another sheet",
        forms: &["include \"definitions.zij\""],
        text: "The path is relative to the sheet and leads nowhere outside its folder.",
        example: "",
    },
    LanguagePage {
        names: &["unit definition", "units of one's own"],
        chapter: Chapter::Statements,
        about: "a unit of one's own",
        forms: &["1 NAME = EXPR"],
        text: "From there on NAME is read after a number and inside brackets.",
        example: "1 beam = 3.2e-4 sr\n2.5 Jy/beam [MJy/sr]",
    },
    LanguagePage {
        names: &["tally", "counting units"],
        chapter: Chapter::Statements,
        about: "counting units, each a dimension of its own",
        forms: &["tally NAME, NAME"],
        text: "`3 galaxy/arcmin^2` is legal then, and `1 galaxy + 1 photon` an error. A square root leaves a \
               counting unit open, for N - sqrt(N) is how one counts.",
        example: "tally galaxy\n12000 galaxy / 2 deg^2 [galaxy/arcmin^2]",
    },
    LanguagePage {
        names: &["explain"],
        chapter: Chapter::Statements,
        about: "where a value comes from",
        forms: &["explain EXPR"],
        text: "The expression with its values filled in, what each name in it is, the formulas of the library, the \
               model and what it leaves out, and the sources of all of it.",
        example: "explain D_L(1.1) [Gpc]",
    },
    LanguagePage {
        names: &["correlate"],
        chapter: Chapter::Statements,
        about: "the correlation of two uncertain inputs (not yet)",
        forms: &["correlate A, B by -0.9"],
        text: "Read today, computed in a later version.",
        example: "",
    },
    LanguagePage {
        names: &["help"],
        chapter: Chapter::Statements,
        about: "a page of this handbook",
        forms: &[
            "help",
            "help NAME",
            "help \"some words\"",
            "zij help NAME",
            "zij help bibtex NAME …",
        ],
        text: "NAME may be a function, a constant, a unit, a model, a parameter, a word of the language, the code of \
               a message, or a chapter. `help bibtex NAME …` gives the works behind names as BibTeX records.",
        example: "help D_L",
    },
    // Notation.
    LanguagePage {
        names: &["numbers", "number", "uncertainty of a number", "±"],
        chapter: Chapter::Notation,
        about: "how numbers are written, with and without an uncertainty",
        forms: &[
            "46.5   1.2e-5   3.0 × 10^5   −0.4   ∞",
            "67.4(5)   67.4 ± 0.5   67.4 (+0.6, -0.5)",
        ],
        text: "What is copied from a paper works: the minus sign, the multiplication sign, superscripts. 67.4(5) is \
               67.4 with a standard uncertainty of 0.5 (GUM 7.2.2). A written 0 and ∞ fit any dimension.",
        example: "67.4 ± 0.5 km/s/Mpc",
    },
    LanguagePage {
        names: &["quantity", "unit", "quantities", "little h", "units in a sheet"],
        chapter: Chapter::Notation,
        about: "a number with its unit",
        forms: &[
            "70 km/s/Mpc   70 km s^-1 Mpc^-1   70 km·s⁻¹·Mpc⁻¹   2%",
            "{0, 0, 0.06} eV",
            "(67.4 ± 0.5) km/s/Mpc",
        ],
        text: "A unit is read only after a number or inside brackets, so h, c, G, m and s may be names of values. It \
               runs on over spaces, tight dots and tight slashes, and ends at a spaced operator or a call. Products \
               of values are always written: `2*x`. `h` in a unit is H0/(100 km/s/Mpc), as in Mpc/h; the hour is hr.",
        example: "30 kpc / D_A(1) [arcsec]",
    },
    LanguagePage {
        names: &["brackets", "bracket", "conversion", "[ ]"],
        chapter: Chapter::Notation,
        about: "in what unit and frame a value is shown",
        forms: &[
            "EXPR [unit]              shown in that unit; the value stays",
            "EXPR [kpc at z]          a comoving length as a proper one at redshift z",
            "EXPR [Gly today]         the same at z = 0",
            "EXPR [Mpc for h]         h settled with the model in force",
            "EXPR [Mpc for h = 0.7]   h settled with the value of a paper",
            "EXPR [cm via c]          across dimensions with the constants named",
            "EXPR [mag via f_AB]      a flux in magnitudes from a zero point, and back: [Jy via f_AB]",
            "EXPR [cMpc by hand]      the frame declared; the value stays",
        ],
        text: "A bracket ends its expression; more arithmetic needs parentheses. It binds looser than + and -, so \
               `a + b [Mpc]` shows the sum. [1] is the unit one. One that changes the value may not follow a bare sum.",
        example: "1420.4058 MHz [cm via c]",
    },
    LanguagePage {
        names: &["at", "today", "for", "via", "by", "hand"],
        chapter: Chapter::Notation,
        about: "words of a bracket that say what it changes",
        forms: &["[kpc at z]   [Gly today]   [Mpc for h]   [cm via c]   [cMpc by hand]"],
        text: "They have meaning inside brackets alone and may be names elsewhere; see `help brackets`.",
        example: "100 cMpc [Mpc at 1]",
    },
    LanguagePage {
        names: &["frames", "frame", "comoving", "proper", "cMpc", "pMpc"],
        chapter: Chapter::Notation,
        about: "comoving and proper lengths, and what keeps them apart",
        forms: &["100 cMpc   100 ckpc   100 pMpc   100 Mpc"],
        text: "D_C, D_M, D_V and comoving volumes are comoving; D_A, D_L and light-travel distances are proper. The \
               two never mix in a sum, a comparison, an argument or a claim: a bracket settles which is meant. A \
               plain literal like 100 Mpc fits the frame it meets first; so do H(z), H0 and (1+z).",
        example: "D_C(1) / (1 + 1) - D_A(1) [Mpc]",
    },
    LanguagePage {
        names: &["angles", "rad", "angle"],
        chapter: Chapter::Notation,
        about: "angles are no numbers",
        forms: &["sin(30 deg)   1.5 arcsec   2 deg^2"],
        text: "A bare number is never an angle. What has another dimension in it leaves the angle open, with rad = 1: \
               `θ * D_A(z)` is a length and `r / D_A(z)` may be an angle.",
        example: "θ = 1.5 arcsec\nθ * D_A(1) [kpc]",
    },
    LanguagePage {
        names: &["magnitudes", "mag", "dex"],
        chapter: Chapter::Notation,
        about: "magnitudes, and which numbers may stand for one",
        forms: &["m + 25   2.5*log10(x) + m   10^(-0.4*(m1 - m2))"],
        text: "A number written in the sheet may stand for magnitudes, a computed one may not. dex is the number 1.",
        example: "m1 = 20.1 mag\nm2 = 18.6 mag\n10^(-0.4*(m1 - m2))",
    },
    LanguagePage {
        names: &["operators", "and", "or", "not", "power", "comparison"],
        chapter: Chapter::Notation,
        about: "arithmetic and conditions",
        forms: &[
            "a + b   a - b   a * b   a / b   a^2   -a",
            "a < b   a ≤ b   a > b   a ≥ b   0 < z < 1",
            "p and q   p or q   not p",
        ],
        text: "^ binds closest, then signs, then * and /, then + and -, then brackets, then comparisons, not, and, \
               or. Powers of something with a dimension are written numbers.",
        example: "if 0 < 0.5 < 1 and not 2 < 1 then 1 else 0",
    },
    LanguagePage {
        names: &["if", "then", "else", "condition"],
        chapter: Chapter::Notation,
        about: "one of two values",
        forms: &["if CONDITION then EXPR else EXPR"],
        text: "Both values have the same dimension. Over a series it chooses for each element.",
        example: "side(x) = if x < 0 then -1 else 1\nside(-3)",
    },
    LanguagePage {
        names: &["under", "with", "another model"],
        chapter: Chapter::Notation,
        about: "an expression in another model",
        forms: &["EXPR under NAME", "EXPR under (planck2018 with H0 = 73 km/s/Mpc)"],
        text: "`under` binds loosest of all. It computes anew every name that EXPR rests on; a given stays what it \
               is. A model with a list of parameters stands in parentheses, unless it ends the statement.",
        example: "age(0) under flat with H0 = 70 km/s/Mpc, Ωm = 0.3",
    },
    LanguagePage {
        names: &["ranges", "every", "in", "steps", "points", "log", "..", "range"],
        chapter: Chapter::Notation,
        about: "a range of values",
        forms: &[
            "0 .. 3 every 0.5            stops at or before the end",
            "0.01 .. 10 every 0.1 dex    by factors",
            "0 .. 1 in 50 steps          51 points, both ends included",
            "0.01 .. 10 in 60 log steps",
            "0 .. 3                      an interval, for integrals and roots",
        ],
        text: "A unit written once, last, serves both ends: `10 .. 1000 kpc`.",
        example: "sum(n^2, n = 1 .. 10 every 1)",
    },
    LanguagePage {
        names: &["series", "list", "{ }", "reductions"],
        chapter: Chapter::Notation,
        about: "several values as one",
        forms: &["{a, b, c}   {1, 2, 3} Mpc   sample.z"],
        text: "Every function of one value takes a series and gives one of the same length. `sum`, `mean`, `median`, \
               `std`, `count`, `min`, `max` and `quantile` make one value of it; `sort` puts it in order.",
        example: "mean(D_C({0.5, 1, 2})) [Mpc]",
    },
    LanguagePage {
        names: &["layout", "comments", "comment", "#", "continuation"],
        chapter: Chapter::Notation,
        about: "lines, continuation, comments",
        forms: &["x = 1 +", "    2          # a comment"],
        text: "A statement starts in the first column. A line that starts with a space continues it, and so does any \
               line inside an open bracket. # starts a comment.",
        example: "x = 1 +\n    2          # a comment\nx",
    },
    // Binding forms.
    LanguagePage {
        names: &["integral", "∫"],
        chapter: Chapter::Binding,
        about: "an integral over a range",
        forms: &["integral(EXPR, x = A .. B)"],
        text: "Either bound may be infinite. The dimension is that of the body times that of the variable.",
        example: "c/H0 * integral(1/E(x), x = 0 .. 1) [Mpc]",
    },
    LanguagePage {
        names: &["root", "solve", "equation"],
        chapter: Chapter::Binding,
        about: "where two sides meet",
        forms: &["root(EXPR = EXPR, x = A .. B)"],
        text: "There must be one such place in the range, and only one.",
        example: "root(D_L(x) = 10 Gpc, x = 0 .. 20)",
    },
    LanguagePage {
        names: &["maximum", "minimum", ".at", "extremum"],
        chapter: Chapter::Binding,
        about: "the largest and the smallest value, and where",
        forms: &[
            "maximum(EXPR, x = A .. B)",
            "maximum(EXPR, x = A .. B).at",
            "minimum(EXPR, x = A .. B)",
        ],
        text: "`.at` is the place instead of the value.",
        example: "maximum(D_A(x), x = 0 .. 10).at",
    },
    LanguagePage {
        names: &["derivative"],
        chapter: Chapter::Binding,
        about: "the derivative at a point",
        forms: &["derivative(EXPR, x = A)"],
        text: "The dimension is that of the body divided by that of the variable.",
        example: "derivative(x^3, x = 2)",
    },
    LanguagePage {
        names: &["sum", "summation", "∑"],
        chapter: Chapter::Binding,
        about: "a sum over a range or a series",
        forms: &["sum(EXPR, n = A .. B every C)", "sum(SERIES)"],
        text: "The range is divided; without a step there is nothing to sum over.",
        example: "sum(1/n^2, n = 1 .. 100 every 1)",
    },
    // Running.
    LanguagePage {
        names: &["prompt", "leave", "names", "strike", "keep", "that"],
        chapter: Chapter::Running,
        about: "talking to zij",
        forms: &["leave", "names", "strike NAME", "keep \"note.zij\"", "help NAME"],
        text: "`zij` alone asks for entries, and names the assumed model each time. Each of the words above stands \
               alone on a line: leave (Ctrl-D), the names bound so far, forgetting one, saving the exchange as a \
               sheet. A later binding replaces an earlier one; `that` is the last value. A line goes on after an \
               open bracket, an operator, a comma, `where` or `with`, and an empty line ends it; Alt-Enter begins a \
               new line anyhow; Tab completes names; Ctrl-C clears the line. While you type, a faint remark says what \
               dimension the line has so far, or what is wrong with it.",
        example: "",
    },
    LanguagePage {
        names: &[
            "command line",
            "zij",
            "options",
            "exit status",
            "check",
            "referee",
            "json",
            "--given",
            "--as",
        ],
        chapter: Chapter::Running,
        about: "the commands of zij and its exit statuses",
        forms: &[
            "zij                       the prompt, or entries from standard input",
            "zij SHEET    zij -        run a sheet, or standard input as one",
            "zij -e 'EXPR'             run one line",
            "zij check SHEET…          check and evaluate nothing",
            "zij referee SHEET…        judge the claims alone, and look for the slips",
            "zij help TOPIC            this handbook",
        ],
        text: "--given NAME=VALUE replaces an input; --as text, json, csv or markdown chooses the form of the \
               output; -o FILE writes it to a file, whole or not at all. Exit status: 0 all is well, 1 a claim \
               disagrees, 2 an error and nothing ran, 3 a value could not be computed.",
        example: "",
    },
];

/// The pages of a chapter.
pub(super) fn of(chapter: Chapter) -> impl Iterator<Item = &'static LanguagePage> {
    PAGES.iter().filter(move |page| page.chapter == chapter)
}

/// The pages found under this name.
pub(super) fn find(name: &str) -> impl Iterator<Item = &'static LanguagePage> + '_ {
    PAGES.iter().filter(move |page| page.names.contains(&name))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::parser::parse;
    use crate::session::{NoFiles, Session};
    use crate::source::Source;
    use crate::token::{TokenKind, lex};

    #[test]
    fn every_example_reads_without_a_complaint() {
        let complaint = |page: &LanguagePage| {
            let found = parse(page.example).diagnostics;
            (!found.is_empty()).then(|| (page.example, found[0].message.clone()))
        };
        let failures: Vec<_> = PAGES.iter().filter_map(complaint).collect();
        assert_eq!(failures, []);
    }

    #[test]
    fn every_example_runs() {
        let complaint = |page: &LanguagePage| {
            let mut session = Session::new(Box::new(NoFiles));
            let report = session.run(&Source::new("example", page.example));
            let found = report.diagnostics.into_iter().find(|(_, one)| one.is_error());
            found.map(|(_, one)| (page.example, one.message))
        };
        let failures: Vec<_> = PAGES.iter().filter_map(complaint).collect();
        assert_eq!(failures, []);
    }

    #[test]
    fn no_name_leads_to_two_pages() {
        for page in PAGES {
            for name in page.names {
                assert_eq!(find(name).count(), 1, "{name}");
            }
        }
    }

    #[test]
    fn every_word_of_the_language_has_a_page() {
        let words = "at every in by via for as only today hand points steps log within about above below between \
                     least most never sigma and or not if then else under where with is assume model given result \
                     claim table figure read include tally correlate explain help";
        for token in lex(words) {
            let word = &words[token.span.range()];
            assert_ne!(token.kind, TokenKind::Word, "{word} is no word of the language");
            assert_eq!(find(word).count(), 1, "{word}");
        }
    }
}
