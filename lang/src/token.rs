//! Tokens: text cut into words, numbers and signs.
//!
//! A token is a kind and a place, nothing else; its text stays in the source.
//! The lexer never fails: what it cannot read becomes a token of a kind that
//! [`TokenKind::is_fault`] knows, and the parser says what is wrong with it.
//! No token holds a line break, so a text may be lexed in pieces cut at line
//! breaks, which is how a big sheet keeps several cores busy.

use crate::source::Span;
use logos::Logos;
use rayon::prelude::*;

/// A piece of text of one kind.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Token {
    /// What it is.
    pub kind: TokenKind,
    /// Its place.
    pub span: Span,
}

/// What a token is.
#[derive(Logos, Clone, Copy, Debug, PartialEq, Eq, Hash)]
#[logos(skip(r"\s+"))]
pub enum TokenKind {
    /// `46.5`, `1.2e-5`
    #[regex(r"[0-9]+(\.[0-9]+)?([eE][+\-−]?[0-9]+)?")]
    #[regex(r"\.[0-9]+([eE][+\-−]?[0-9]+)?")]
    Number,
    /// `67.4(5)`, `1.234(12)e-5`: a number with its uncertainty in the last digits.
    #[regex(r"([0-9]+(\.[0-9]+)?|\.[0-9]+)\([0-9]+(\.[0-9]+)?\)([eE][+\-−]?[0-9]+)?")]
    Concise,
    /// `"text"`
    #[regex("\"[^\"\n]*\"")]
    String,
    /// `⁻¹`
    #[regex("[⁺⁻]?[⁰¹²³⁴⁵⁶⁷⁸⁹]+")]
    Superscript,

    /// A name: of a value, a function, a unit.
    // The middle dot counts as a letter in Unicode's eyes, for Catalan; here
    // it multiplies. Subscript digits and the signs of Sun and Earth count as
    // none, and are letters here: `z₁`, `M_⊙`.
    #[regex(r"[\p{XID_Start}_][[\p{XID_Continue}₀-₉⊙☉⊕]--[·\u{387}]]*")]
    Word,

    // Words that mean something only in their place, and never name a unit.
    /// `at`
    #[token("at")]
    At,
    /// `every`
    #[token("every")]
    Every,
    /// `in`
    #[token("in")]
    In,
    /// `by`
    #[token("by")]
    By,
    /// `via`
    #[token("via")]
    Via,
    /// `for`
    #[token("for")]
    For,
    /// `as`
    #[token("as")]
    As,
    /// `only`
    #[token("only")]
    Only,
    /// `today`
    #[token("today")]
    Today,
    /// `hand`
    #[token("hand")]
    Hand,
    /// `points`
    #[token("points")]
    Points,
    /// `steps`
    #[token("steps")]
    Steps,
    /// `log`
    #[token("log")]
    Log,
    /// `within`
    #[token("within")]
    Within,
    /// `about`
    #[token("about")]
    About,
    /// `above`
    #[token("above")]
    Above,
    /// `below`
    #[token("below")]
    Below,
    /// `between`
    #[token("between")]
    Between,
    /// `least`
    #[token("least")]
    Least,
    /// `most`
    #[token("most")]
    Most,
    /// `never`
    #[token("never")]
    Never,
    /// `sigma`
    #[token("sigma")]
    Sigma,

    // Reserved words.
    /// `and`
    #[token("and")]
    And,
    /// `or`
    #[token("or")]
    Or,
    /// `not`
    #[token("not")]
    Not,
    /// `if`
    #[token("if")]
    If,
    /// `then`
    #[token("then")]
    Then,
    /// `else`
    #[token("else")]
    Else,
    /// `under`
    #[token("under")]
    Under,
    /// `where`
    #[token("where")]
    Where,
    /// `with`
    #[token("with")]
    With,
    /// `is`
    #[token("is")]
    Is,

    // Statement words, reserved as well.
    /// `assume`
    #[token("assume")]
    Assume,
    /// `model`
    #[token("model")]
    Model,
    /// `given`
    #[token("given")]
    Given,
    /// `result`
    #[token("result")]
    Result,
    /// `claim`
    #[token("claim")]
    Claim,
    /// `table`
    #[token("table")]
    Table,
    /// `figure`
    #[token("figure")]
    Figure,
    /// `read`
    #[token("read")]
    Read,
    /// `include`
    #[token("include")]
    Include,
    /// `tally`
    #[token("tally")]
    Tally,
    /// `correlate`
    #[token("correlate")]
    Correlate,
    /// `explain`
    #[token("explain")]
    Explain,
    /// `help`
    #[token("help")]
    Help,

    /// `∞`, `infinity`
    #[token("∞")]
    #[token("infinity")]
    Infinity,

    /// `+`
    #[token("+")]
    Plus,
    /// `-`, `−`
    #[token("-")]
    #[token("−")]
    Minus,
    /// `*`
    #[token("*")]
    Star,
    /// `/`
    #[token("/")]
    Slash,
    /// `^`
    #[token("^")]
    Caret,
    /// `**`
    #[token("**")]
    DoubleStar,
    /// `·`
    #[token("·")]
    #[token("\u{387}")]
    #[token("⋅")]
    #[token("∙")]
    Middot,
    /// `×`
    #[token("×")]
    Times,
    /// `±`, `+-`
    #[token("±")]
    #[token("+-")]
    #[token("+/-")]
    PlusMinus,
    /// `%`
    #[token("%")]
    Percent,
    /// `<`
    #[token("<")]
    Less,
    /// `<=`, `≤`
    #[token("<=")]
    #[token("≤")]
    LessOrEqual,
    /// `>`
    #[token(">")]
    Greater,
    /// `>=`, `≥`
    #[token(">=")]
    #[token("≥")]
    GreaterOrEqual,
    /// `=`
    #[token("=")]
    Equal,
    /// `,`
    #[token(",")]
    Comma,
    /// `:`
    #[token(":")]
    Colon,
    /// `.`
    #[token(".")]
    Dot,
    /// `..`
    #[token("..")]
    DotDot,
    /// `(`
    #[token("(")]
    LeftParenthesis,
    /// `)`
    #[token(")")]
    RightParenthesis,
    /// `[`
    #[token("[")]
    LeftBracket,
    /// `]`
    #[token("]")]
    RightBracket,
    /// `{`
    #[token("{")]
    LeftBrace,
    /// `}`
    #[token("}")]
    RightBrace,

    /// `# …`
    #[regex("#[^\n]*", allow_greedy = true)]
    Comment,

    // What cannot be read.
    /// `1.2.3`
    #[regex(r"[0-9]+(\.[0-9]+){2,}")]
    BadNumber,
    /// A string that its line does not end.
    #[regex("\"[^\"\n]*")]
    OpenString,
    /// An operator of other languages: `==`, `!=`, `&&`, `:=` and the like.
    #[token("==")]
    #[token("===")]
    #[token("!=")]
    #[token("≠")]
    #[token("<>")]
    #[token("=>")]
    #[token("->")]
    #[token(":=")]
    #[token("&&")]
    #[token("||")]
    #[token("//")]
    #[token("++")]
    #[token("+=")]
    #[token("-=")]
    #[token("*=")]
    #[token("/=")]
    Foreign,
    /// A character with no meaning here.
    #[regex(".", priority = 0)]
    Unknown,
}

impl TokenKind {
    /// Whether it is an error in itself.
    #[must_use]
    pub fn is_fault(self) -> bool {
        matches!(
            self,
            TokenKind::BadNumber | TokenKind::OpenString | TokenKind::Foreign | TokenKind::Unknown
        )
    }

    /// Whether it may name something: a word that is not reserved.
    #[must_use]
    pub fn is_name(self) -> bool {
        self as u8 >= TokenKind::Word as u8 && self as u8 <= TokenKind::Sigma as u8
    }

    /// Whether it is a word with a meaning of its own in some place.
    #[must_use]
    pub fn is_contextual(self) -> bool {
        self as u8 > TokenKind::Word as u8 && self as u8 <= TokenKind::Sigma as u8
    }

    /// Whether it is reserved.
    #[must_use]
    pub fn is_reserved(self) -> bool {
        self as u8 >= TokenKind::And as u8 && self as u8 <= TokenKind::Infinity as u8
    }

    /// Whether it is a word of any sort.
    #[must_use]
    pub fn is_word(self) -> bool {
        self.is_name() || self.is_reserved()
    }

    /// Whether it begins a statement of its own kind.
    #[must_use]
    pub fn is_statement_word(self) -> bool {
        self as u8 >= TokenKind::Assume as u8 && self as u8 <= TokenKind::Help as u8
    }

    /// `(`, `[` or `{`
    #[must_use]
    pub fn is_opening(self) -> bool {
        matches!(
            self,
            TokenKind::LeftParenthesis | TokenKind::LeftBracket | TokenKind::LeftBrace
        )
    }

    /// `)`, `]` or `}`
    #[must_use]
    pub fn is_closing(self) -> bool {
        matches!(
            self,
            TokenKind::RightParenthesis | TokenKind::RightBracket | TokenKind::RightBrace
        )
    }

    /// The closing bracket of an opening one.
    #[must_use]
    pub fn partner(self) -> Option<TokenKind> {
        match self {
            TokenKind::LeftParenthesis => Some(TokenKind::RightParenthesis),
            TokenKind::LeftBracket => Some(TokenKind::RightBracket),
            TokenKind::LeftBrace => Some(TokenKind::RightBrace),
            _ => None,
        }
    }

    /// Whether it joins or changes operands, so that a tree grows one deeper
    /// and a line that ends in it goes on.
    #[must_use]
    pub fn is_operator(self) -> bool {
        matches!(
            self,
            TokenKind::Plus
                | TokenKind::Minus
                | TokenKind::Star
                | TokenKind::Slash
                | TokenKind::Caret
                | TokenKind::DoubleStar
                | TokenKind::Middot
                | TokenKind::Times
                | TokenKind::PlusMinus
                | TokenKind::Less
                | TokenKind::LessOrEqual
                | TokenKind::Greater
                | TokenKind::GreaterOrEqual
                | TokenKind::DotDot
                | TokenKind::And
                | TokenKind::Or
                | TokenKind::Not
                | TokenKind::If
                | TokenKind::Then
                | TokenKind::Else
                | TokenKind::Under
                | TokenKind::Is
        )
    }
}

/// Below this a text is lexed at once: threads cost more than they save.
const PARALLEL_BYTES: usize = 1 << 18;
/// How much one thread takes at a time.
const PIECE_BYTES: usize = 1 << 16;

/// The byte order mark that some editors put first.
const BYTE_ORDER_MARK: &str = "\u{feff}";

/// Where the text proper starts: after a byte order mark.
#[must_use]
pub fn text_start(text: &str) -> usize {
    if text.starts_with(BYTE_ORDER_MARK) {
        BYTE_ORDER_MARK.len()
    } else {
        0
    }
}

/// The tokens of a text, without comments.
#[must_use]
pub fn lex(text: &str) -> Vec<Token> {
    let start = text_start(text);
    if text.len() < PARALLEL_BYTES {
        return lex_piece(text, start, text.len());
    }
    let pieces: Vec<Vec<Token>> = cut_at_lines(text, start)
        .into_par_iter()
        .map(|(from, to)| lex_piece(text, from, to))
        .collect();
    pieces.concat()
}

/// The tokens of a text, with comments, for colouring and laying out.
#[must_use]
pub fn lex_all(text: &str) -> Vec<Token> {
    let start = text_start(text);
    tokens_of(text, start, text.len()).collect()
}

/// Ranges of whole lines that cover the text from `start`.
fn cut_at_lines(text: &str, start: usize) -> Vec<(usize, usize)> {
    let bytes = text.as_bytes();
    let mut pieces = Vec::new();
    let mut from = start;
    while from < bytes.len() {
        let wanted = (from + PIECE_BYTES).min(bytes.len());
        let to = bytes[wanted..]
            .iter()
            .position(|byte| *byte == b'\n')
            .map_or(bytes.len(), |at| wanted + at + 1);
        pieces.push((from, to));
        from = to;
    }
    pieces
}

fn lex_piece(text: &str, from: usize, to: usize) -> Vec<Token> {
    // A token takes some three and a half bytes in a usual sheet.
    let mut tokens = Vec::with_capacity((to - from) / 4 + 4);
    tokens.extend(tokens_of(text, from, to).filter(|token| token.kind != TokenKind::Comment));
    tokens
}

fn tokens_of(text: &str, from: usize, to: usize) -> impl Iterator<Item = Token> + '_ {
    TokenKind::lexer(&text[from..to])
        .spanned()
        .map(move |(kind, range)| Token {
            kind: kind.unwrap_or(TokenKind::Unknown),
            span: Span::new(from + range.start, from + range.end),
        })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn kinds(text: &str) -> Vec<TokenKind> {
        lex_all(text).into_iter().map(|token| token.kind).collect()
    }

    #[test]
    fn middle_dot_is_no_letter() {
        use TokenKind::{Middot, Superscript, Word};
        assert_eq!(kinds("km·s⁻¹"), [Word, Middot, Word, Superscript]);
        assert_eq!(kinds("km⋅s"), [Word, Middot, Word]);
    }

    #[test]
    fn names_take_subscripts_and_the_signs_of_sun_and_earth() {
        for name in [
            "z₁", "M_⊙", "L_☉", "R_⊕", "σ8", "Ωm", "ΩΛ", "kₓ", "_a", "H₀", "T_CMB",
        ] {
            assert_eq!(kinds(name), [TokenKind::Word], "{name}");
        }
    }

    #[test]
    fn two_dots_are_a_range_even_when_tight() {
        use TokenKind::{DotDot, Number};
        assert_eq!(kinds("0..3"), [Number, DotDot, Number]);
        assert_eq!(kinds("0.5..3.5"), [Number, DotDot, Number]);
    }

    #[test]
    fn faults_are_tokens() {
        assert_eq!(kinds("1.2.3"), [TokenKind::BadNumber]);
        assert_eq!(kinds("\"open"), [TokenKind::OpenString]);
        assert_eq!(kinds("=="), [TokenKind::Foreign]);
        assert_eq!(kinds("$"), [TokenKind::Unknown]);
    }

    #[test]
    fn a_keyword_inside_a_name_is_a_name() {
        for name in ["isotropic", "in_flow", "within2", "infinity_", "modelled"] {
            assert_eq!(kinds(name), [TokenKind::Word], "{name}");
        }
    }

    #[test]
    fn pieces_give_the_tokens_of_the_whole() {
        let line = "given z₁ = 1.1 \"redshift\" # Ω\r\n";
        let text = format!("\u{feff}{}", line.repeat(20_000));
        let whole = lex_piece(&text, 3, text.len());
        assert_eq!(lex(&text), whole);
        assert_eq!(whole.len(), 5 * 20_000);
    }
}
