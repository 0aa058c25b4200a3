//! Piecewise polynomials over many octaves of a positive variable.
//!
//! A function of `s > 0` is fitted on pieces that are an eighth of an octave
//! wide or, where it is not smooth enough, halves of that, and halves again:
//!
//! ```text
//!   s:   1       1.125     1.25      1.375  …        2       2.25
//!        |---------|----|----|--|--|----|---  …   ----|---------|
//! ```
//!
//! The eighth is read off the bits of `s`, so that finding a piece costs no
//! logarithm and no search. On a piece the fit is the Chebyshev interpolant of
//! degree 10 through the Lobatto points, kept as a polynomial in
//! `t = (s − middle)/half`: smooth functions of `s` have their singularities
//! near `s ≤ 0`, seventeen half-widths away, so the coefficients fall by a
//! factor of 34 from one to the next and the conversion is harmless.
//!
//! A [`Cumulative`] holds the integral of what was fitted. It can be read from
//! `s = 1`, from the upper end or from the lower end. The two pieces that meet
//! at `s = 1` are written in powers of `s − 1`, so an integral from 1 to
//! `1 + 1e-12` keeps all its digits.

/// Degree of the fit on a piece.
const DEGREE: usize = 10;
const NODES: usize = DEGREE + 1;
/// Pieces per octave before any halving, as a power of two.
const CELL_BITS: u32 = 3;
/// Halvings of a cell: a jump is then confined to 1e-12 of it.
const MAX_DEPTH: u32 = 40;
/// Pieces a table may have: smooth histories need 500, a kink 40 more. A
/// function that wants more than this is noise.
const MAX_PIECES: usize = 40_000;
/// Values below this are not resolved: what is tabulated is of order one.
const NEGLIGIBLE: f64 = 1e-40;
/// Size of the last coefficients, relative to the largest, that passes.
const TOLERANCE: f64 = 4e-15;

/// Why no table could be made.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Failure {
    /// The function has no finite value here.
    NotFinite(f64),
    /// The function varies too fast near here.
    TooRough(f64),
}

/// A piece: Chebyshev coefficients between two ends.
struct Piece {
    lower: f64,
    upper: f64,
    chebyshev: [f64; NODES],
}

/// A fitted function.
pub struct Fit {
    grid: Grid,
    leaves: Vec<[f64; NODES + 2]>,
}

/// The integral of a fitted function.
pub struct Cumulative {
    grid: Grid,
    leaves: Vec<Leaf>,
    /// Between the lower end and 1, between 1 and the upper end.
    below_one: f64,
    above_one: f64,
}

/// A polynomial and the integrals at the point where it is zero.
#[derive(Clone)]
struct Leaf {
    origin: f64,
    scale: f64,
    from_one: f64,
    from_upper: f64,
    from_lower: f64,
    coefficients: [f64; NODES + 1],
}

/// Finds the piece that holds a point.
struct Grid {
    first_cell: u64,
    /// The first piece of each cell.
    pieces: Vec<u32>,
    /// The upper end of each piece.
    uppers: Vec<f64>,
    lower: f64,
    upper: f64,
}

impl Grid {
    fn new(pieces: &[Piece]) -> Grid {
        let (lower, upper) = (pieces[0].lower, pieces[pieces.len() - 1].upper);
        let first_cell = cell(lower);
        let mut places = Vec::new();
        let mut place = 0;
        for number in first_cell..=cell(upper) {
            while place + 1 < pieces.len()
                && cell(pieces[place].upper) <= number
                && pieces[place].upper <= floor(number)
            {
                place += 1;
            }
            places.push(place as u32);
        }
        Grid {
            first_cell,
            pieces: places,
            uppers: pieces.iter().map(|piece| piece.upper).collect(),
            lower,
            upper,
        }
    }

    /// The piece that holds `s`, which must be between the ends.
    #[inline]
    fn find(&self, s: f64) -> usize {
        let offset = (cell(s) - self.first_cell) as usize;
        let mut place = self.pieces[offset.min(self.pieces.len() - 1)] as usize;
        while s > self.uppers[place] && place + 1 < self.uppers.len() {
            place += 1;
        }
        place
    }

    #[inline]
    fn holds(&self, s: f64) -> bool {
        self.lower <= s && s <= self.upper
    }
}

/// The number of the eighth of an octave in which `s` lies.
#[inline]
fn cell(s: f64) -> u64 {
    s.to_bits() >> (52 - CELL_BITS)
}

/// Where a cell begins.
fn floor(cell: u64) -> f64 {
    f64::from_bits(cell << (52 - CELL_BITS))
}

impl Fit {
    /// Fits `f` between `lower` and `upper`, both positive. The table starts
    /// from whole octaves, for functions that are dear to call.
    ///
    /// # Errors
    /// [`Failure`] where `f` has no value or is too rough.
    pub fn new(lower: f64, upper: f64, f: impl FnMut(f64) -> f64) -> Result<Fit, Failure> {
        let pieces = fit(lower, upper, CELL_BITS, f)?;
        let grid = Grid::new(&pieces);
        let leaves = pieces.iter().map(function_leaf).collect();
        Ok(Fit { grid, leaves })
    }

    /// The fitted value; `None` outside the table.
    #[inline]
    pub fn value(&self, s: f64) -> Option<f64> {
        let leaf = &self.leaves[self.inside(s)?];
        let t = (s - leaf[NODES]) * leaf[NODES + 1];
        Some(leaf[..NODES].iter().rev().fold(0.0, |sum, c| sum * t + c))
    }

    /// The slope of the fit; `None` outside the table.
    pub fn slope(&self, s: f64) -> Option<f64> {
        let leaf = &self.leaves[self.inside(s)?];
        let t = (s - leaf[NODES]) * leaf[NODES + 1];
        let terms = leaf[1..NODES].iter().enumerate().rev();
        let sum = terms.fold(0.0, |sum, (power, c)| sum * t + (power + 1) as f64 * c);
        Some(sum * leaf[NODES + 1])
    }

    fn inside(&self, s: f64) -> Option<usize> {
        self.grid.holds(s).then(|| self.grid.find(s))
    }
}

impl Cumulative {
    /// Integrates `f` between `lower < 1` and `upper > 1`, both positive.
    ///
    /// # Errors
    /// [`Failure`] where `f` has no value or is too rough.
    pub fn new(lower: f64, upper: f64, f: impl FnMut(f64) -> f64) -> Result<Cumulative, Failure> {
        Ok(Cumulative::of(&fit(lower, upper, 0, f)?))
    }

    /// The same from whole octaves, for functions that are dear to call.
    ///
    /// # Errors
    /// [`Failure`] where `f` has no value or is too rough.
    pub fn sparse(lower: f64, upper: f64, f: impl FnMut(f64) -> f64) -> Result<Cumulative, Failure> {
        Ok(Cumulative::of(&fit(lower, upper, CELL_BITS, f)?))
    }

    fn of(pieces: &[Piece]) -> Cumulative {
        let grid = Grid::new(pieces);
        let mut leaves: Vec<Leaf> = pieces.iter().map(integral_leaf).collect();
        let today = pieces
            .iter()
            .position(|piece| piece.lower >= 1.0)
            .unwrap_or(pieces.len());
        let totals: Vec<f64> = leaves
            .iter()
            .zip(pieces)
            .map(|(leaf, piece)| leaf.total(piece))
            .collect();
        let above_one = Sum::of(&totals[today..]);
        let below_one = Sum::of(&totals[..today]);
        accumulate(&mut leaves, pieces, &totals, today);
        Cumulative {
            grid,
            leaves,
            below_one,
            above_one,
        }
    }

    /// The ends of the table.
    pub fn ends(&self) -> (f64, f64) {
        (self.grid.lower, self.grid.upper)
    }

    /// `∫₁ˢ f`, with `s` given as `s − 1`; `None` outside the table.
    #[inline]
    pub fn from_one(&self, s_minus_one: f64) -> Option<f64> {
        let leaf = self.leaf(s_minus_one)?;
        Some(leaf.from_one + leaf.polynomial(s_minus_one))
    }

    /// The integral from `s` to the upper end.
    #[inline]
    pub fn to_upper(&self, s_minus_one: f64) -> Option<f64> {
        let leaf = self.leaf(s_minus_one)?;
        Some(leaf.from_upper - leaf.polynomial(s_minus_one))
    }

    /// The integral from the lower end to `s`.
    #[inline]
    pub fn to_lower(&self, s_minus_one: f64) -> Option<f64> {
        let leaf = self.leaf(s_minus_one)?;
        Some(leaf.from_lower + leaf.polynomial(s_minus_one))
    }

    /// The integrals from the lower end to 1 and from 1 to the upper end.
    pub fn around_one(&self) -> (f64, f64) {
        (self.below_one, self.above_one)
    }

    #[inline]
    fn leaf(&self, s_minus_one: f64) -> Option<&Leaf> {
        let s = 1.0 + s_minus_one;
        self.grid.holds(s).then(|| &self.leaves[self.grid.find(s)])
    }
}

impl Leaf {
    #[inline]
    fn polynomial(&self, s_minus_one: f64) -> f64 {
        let t = (s_minus_one - self.origin) * self.scale;
        let c = &self.coefficients;
        // Estrin's scheme: half the latency of Horner's, a fixed order.
        let t2 = t * t;
        let t4 = t2 * t2;
        let low = (c[0] + c[1] * t) + (c[2] + c[3] * t) * t2;
        let middle = (c[4] + c[5] * t) + (c[6] + c[7] * t) * t2;
        let high = (c[8] + c[9] * t) + (c[10] + c[11] * t) * t2;
        low + (middle + high * t4) * t4
    }

    fn total(&self, piece: &Piece) -> f64 {
        self.polynomial(piece.upper - 1.0) - self.polynomial(piece.lower - 1.0)
    }
}

/// Sets what each leaf adds to its polynomial, always summing outward from
/// where the integral is zero, so that nothing cancels.
fn accumulate(leaves: &mut [Leaf], pieces: &[Piece], totals: &[f64], today: usize) {
    let start = |leaf: &Leaf, piece: &Piece| leaf.polynomial(piece.lower - 1.0);
    let mut sum = Sum::default();
    for place in today..leaves.len() {
        leaves[place].from_one = sum.value() - start(&leaves[place], &pieces[place]);
        sum.add(totals[place]);
    }
    let mut sum = Sum::default();
    for place in (0..today).rev() {
        let end = leaves[place].polynomial(pieces[place].upper - 1.0);
        leaves[place].from_one = -sum.value() - end;
        sum.add(totals[place]);
    }
    let mut sum = Sum::default();
    for place in 0..leaves.len() {
        leaves[place].from_lower = sum.value() - start(&leaves[place], &pieces[place]);
        sum.add(totals[place]);
    }
    let mut sum = Sum::default();
    for place in (0..leaves.len()).rev() {
        leaves[place].from_upper = sum.value() + leaves[place].polynomial(pieces[place].upper - 1.0);
        sum.add(totals[place]);
    }
}

/// A sum that carries its rounding error along (Kahan & Babuška).
#[derive(Default)]
struct Sum {
    high: f64,
    low: f64,
}

impl Sum {
    fn of(terms: &[f64]) -> f64 {
        let mut sum = Sum::default();
        terms.iter().for_each(|term| sum.add(*term));
        sum.value()
    }

    fn add(&mut self, term: f64) {
        let next = self.high + term;
        self.low += if self.high.abs() >= term.abs() {
            (self.high - next) + term
        } else {
            (term - next) + self.high
        };
        self.high = next;
    }

    fn value(&self) -> f64 {
        self.high + self.low
    }
}

/// Fits `f` piece by piece, from pieces of `2^coarse` cells down.
fn fit(lower: f64, upper: f64, coarse: u32, mut f: impl FnMut(f64) -> f64) -> Result<Vec<Piece>, Failure> {
    let mut pieces = Vec::new();
    let step = 1_u64 << coarse;
    let mut number = cell(lower) & !(step - 1);
    while floor(number) < upper {
        let (start, end) = (floor(number).max(lower), floor(number + step).min(upper));
        // A sliver at an end would only cost digits.
        if end > start {
            split(start, end, MAX_DEPTH + coarse, 1.0, &mut f, &mut pieces)?;
        }
        number += step;
    }
    Ok(pieces)
}

/// Fits one piece, or its halves. `weight` is its share of the first piece:
/// what matters is the error of the integral.
fn split(
    lower: f64,
    upper: f64,
    depth: u32,
    weight: f64,
    f: &mut impl FnMut(f64) -> f64,
    pieces: &mut Vec<Piece>,
) -> Result<(), Failure> {
    let chebyshev = interpolate(lower, upper, f)?;
    let largest = chebyshev.iter().fold(0.0_f64, |most, c| most.max(c.abs()));
    let tail = chebyshev[DEGREE].abs() + 0.1 * chebyshev[DEGREE - 1].abs();
    if tail * weight <= TOLERANCE * largest.max(NEGLIGIBLE) || depth == 0 {
        pieces.push(Piece {
            lower,
            upper,
            chebyshev,
        });
        return Ok(());
    }
    if pieces.len() > MAX_PIECES {
        return Err(Failure::TooRough(lower));
    }
    let middle = 0.5 * (lower + upper);
    split(lower, middle, depth - 1, 0.5 * weight, f, pieces)?;
    split(middle, upper, depth - 1, 0.5 * weight, f, pieces)
}

/// The Chebyshev coefficients of `f` through the Lobatto points.
fn interpolate(lower: f64, upper: f64, f: &mut impl FnMut(f64) -> f64) -> Result<[f64; NODES], Failure> {
    let (middle, half) = (0.5 * (lower + upper), 0.5 * (upper - lower));
    let mut values = [0.0; NODES];
    for (place, value) in values.iter_mut().enumerate() {
        let s = match place {
            0 => upper,
            DEGREE => lower,
            _ => middle + half * COSINES[1][place],
        };
        *value = f(s);
        if !value.is_finite() {
            return Err(Failure::NotFinite(s));
        }
    }
    values[0] *= 0.5;
    values[DEGREE] *= 0.5;
    let mut coefficients = [0.0; NODES];
    for (row, coefficient) in COSINES.iter().zip(&mut coefficients) {
        let sum: f64 = row
            .iter()
            .zip(&values)
            .map(|(cosine, value)| cosine * value)
            .sum();
        *coefficient = 2.0 / DEGREE as f64 * sum;
    }
    coefficients[0] *= 0.5;
    coefficients[DEGREE] *= 0.5;
    Ok(coefficients)
}

/// cos(π j k/10), to the last digit, for j and k from 0 to 10.
static COSINES: [[f64; NODES]; NODES] = cosines();

const fn cosines() -> [[f64; NODES]; NODES] {
    const QUARTER: [f64; 6] = [
        1.0,
        0.951_056_516_295_153_5,
        0.809_016_994_374_947_5,
        0.587_785_252_292_473_1,
        0.309_016_994_374_947_45,
        0.0,
    ];
    let mut table = [[0.0; NODES]; NODES];
    let mut place = 0;
    while place < NODES * NODES {
        let (row, column) = (place / NODES, place % NODES);
        let angle = row * column % (2 * DEGREE);
        let angle = if angle > DEGREE { 2 * DEGREE - angle } else { angle };
        table[row][column] = if angle <= 5 {
            QUARTER[angle]
        } else {
            -QUARTER[DEGREE - angle]
        };
        place += 1;
    }
    table
}

/// The fit as a polynomial in t, its middle and its scale.
fn function_leaf(piece: &Piece) -> [f64; NODES + 2] {
    let mut leaf = [0.0; NODES + 2];
    let powers = powers(&piece.chebyshev);
    leaf[..NODES].copy_from_slice(&powers);
    leaf[NODES] = 0.5 * (piece.lower + piece.upper);
    leaf[NODES + 1] = 2.0 / (piece.upper - piece.lower);
    leaf
}

/// The integral of the fit as a polynomial in t about the middle, or about 1
/// for the pieces that end there.
fn integral_leaf(piece: &Piece) -> Leaf {
    let half = 0.5 * (piece.upper - piece.lower);
    let middle = 0.5 * (piece.lower + piece.upper);
    let mut fit = powers(&piece.chebyshev);
    let mut origin = middle - 1.0;
    let mut scale = 1.0 / half;
    let mut width = half;
    if piece.lower == 1.0 || piece.upper == 1.0 {
        let end = if piece.lower == 1.0 { -1.0 } else { 1.0 };
        fit = shifted(&fit, end);
        origin = 0.0;
        scale = 1.0 / half;
        width = half;
    }
    let mut coefficients = [0.0; NODES + 1];
    for (power, c) in fit.iter().enumerate() {
        coefficients[power + 1] = width * c / (power + 1) as f64;
    }
    Leaf {
        origin,
        scale,
        from_one: 0.0,
        from_upper: 0.0,
        from_lower: 0.0,
        coefficients,
    }
}

/// Chebyshev coefficients to coefficients of powers.
fn powers(chebyshev: &[f64; NODES]) -> [f64; NODES] {
    let mut sum = [0.0; NODES];
    let (mut before, mut this) = ([0.0; NODES], [0.0; NODES]);
    before[0] = 1.0;
    this[1] = 1.0;
    sum[0] = chebyshev[0];
    sum[1] = chebyshev[1];
    for coefficient in &chebyshev[2..] {
        let mut next = [0.0; NODES];
        for power in 0..NODES {
            next[power] = 2.0 * if power > 0 { this[power - 1] } else { 0.0 } - before[power];
            sum[power] += coefficient * next[power];
        }
        (before, this) = (this, next);
    }
    sum
}

/// The polynomial p(t) in powers of t − `end`.
fn shifted(polynomial: &[f64; NODES], end: f64) -> [f64; NODES] {
    let mut result = *polynomial;
    for first in 0..NODES {
        for power in (first..NODES - 1).rev() {
            result[power] += end * result[power + 1];
        }
    }
    result
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn integrals_of_powers_keep_their_digits() {
        let table = Cumulative::new(1e-6, 1e9, |s| libm::pow(s, -1.5)).expect("smooth");
        for z in [
            -0.999, -0.5, -1e-3, -1e-9, 1e-12, 1e-8, 1e-3, 0.06, 0.124, 0.126, 1.0, 20.0, 1e4, 1e8,
        ] {
            let expect = -2.0 * libm::expm1(-0.5 * libm::log1p(z));
            let value = table.from_one(z).expect("inside");
            assert!(
                (value / expect - 1.0).abs() < 2e-14,
                "z = {z}: {value} for {expect}"
            );
        }
    }

    #[test]
    fn integrals_from_both_ends_agree_with_closed_forms() {
        let table = Cumulative::new(0.5, 64.0, |s| 1.0 / (s * s)).expect("smooth");
        for s in [0.5_f64, 0.7, 1.0, 1.0625, 3.3, 60.0] {
            let upper = table.to_upper(s - 1.0).expect("inside");
            let lower = table.to_lower(s - 1.0).expect("inside");
            assert!((upper - (1.0 / s - 1.0 / 64.0)).abs() < 4e-15);
            assert!((lower - (2.0 - 1.0 / s)).abs() < 4e-15);
        }
    }

    #[test]
    fn kinks_and_jumps_are_confined() {
        let table = Cumulative::sparse(0.25, 8.0, |s| if s < 1.7 { 1.0 } else { 2.0 }).expect("bounded");
        assert!((table.from_one(4.0).expect("inside") - (0.7 + 2.0 * 3.3)).abs() < 1e-11);
        let table = Cumulative::new(0.25, 8.0, |s| (s - 1.7).abs()).expect("bounded");
        assert!((table.from_one(1.7).expect("inside") - (0.245 + 0.5)).abs() < 1e-14);
    }

    #[test]
    fn noise_is_refused_and_holes_are_found() {
        let noise = |s: f64| (s.to_bits().wrapping_mul(0x9E37_79B9_7F4A_7C15) >> 11) as f64;
        assert!(matches!(Fit::new(1.0, 1e6, noise), Err(Failure::TooRough(_))));
        assert!(matches!(
            Fit::new(1.0, 8.0, |s| if s > 5.0 { f64::NAN } else { s }),
            Err(Failure::NotFinite(_))
        ));
    }

    #[test]
    fn a_fit_gives_value_and_slope() {
        let fit = Fit::new(0.5, 100.0, libm::log).expect("smooth");
        for s in [0.5, 0.99, 1.0, 7.7, 99.0] {
            assert!((fit.value(s).expect("inside") - libm::log(s)).abs() < 4e-15);
            assert!((fit.slope(s).expect("inside") * s - 1.0).abs() < 1e-11);
        }
        assert_eq!(fit.value(101.0), None);
    }
}
