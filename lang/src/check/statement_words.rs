//! The words of the language with a few words on each, for completion.

/// Words that begin a statement.
pub const STATEMENTS: &[(&str, &str)] = &[
    ("assume", "the cosmological model of the sheet"),
    ("model", "names a model"),
    ("given", "an input"),
    ("result", "a named output"),
    ("claim", "a quoted number to check"),
    ("table", "rows of values"),
    ("figure", "a plot"),
    ("read", "brings in a data table"),
    ("include", "another sheet's definitions"),
    ("tally", "counting units"),
    ("correlate", "the correlation of two inputs"),
    ("explain", "where a value comes from"),
    ("help", "what a name means"),
];

/// Words within expressions.
pub const KEYWORDS: &[(&str, &str)] = &[
    ("and", "both conditions"),
    ("or", "either condition"),
    ("not", "the contrary of a condition"),
    ("if", "if CONDITION then A else B"),
    ("then", "if CONDITION then A else B"),
    ("else", "if CONDITION then A else B"),
    ("under", "EXPR under MODEL: in another model"),
    ("where", "local names"),
    ("with", "replaces parameters of a model"),
    ("is", "what a claim asserts"),
    ("within", "the tolerance of a claim"),
    ("every", "the step of a range"),
];
