//! Constants of nature and of astronomy.

use crate::catalogue::Entry;

pub mod values;

/// The entries of this chapter.
pub static ENTRIES: &[Entry] = &[];
