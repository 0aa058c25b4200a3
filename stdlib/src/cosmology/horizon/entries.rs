//! The entries of this chapter.

use crate::catalogue::Entry;

/// The entries of this chapter.
pub static ENTRIES: &[Entry] = &[];
