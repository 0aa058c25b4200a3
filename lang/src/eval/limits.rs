//! How much is too much. Every loop of the evaluator ends at one of these,
//! with an error of its own.

/// Points in a range: what a table or a sum may reasonably run over, 80 MB.
pub(super) const RANGE_POINTS: usize = 10_000_000;

/// Numbers kept in memory at once in all series: 1 GiB.
pub(super) const NUMBERS_KEPT: usize = 1 << 27;

/// Evaluations of bodies of binding forms in one sheet: half a minute of work,
/// and a thousand for each of a million rows.
pub(super) const BODY_EVALUATIONS: u64 = 2_000_000_000;

/// Binding forms within binding forms.
pub(super) const NESTED_FORMS: usize = 16;

/// Models remembered by their settings; each holds its own tables.
pub(super) const MODELS_KEPT: usize = 64;

/// Panels of an adaptive integral.
pub(super) const PANELS: usize = 2000;

/// Steps of a bracketed search; the method halves the bracket at worst every
/// third step, and a bracket has at most 2100 halvings.
pub(super) const SEARCH_STEPS: usize = 500;

/// Roots listed in an error.
pub(super) const ROOTS_LISTED: usize = 6;

/// Lanes of a chunk: 2 KiB a register.
pub(super) const CHUNK_LANES: usize = 256;
