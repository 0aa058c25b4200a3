//! Constants of nature and of astronomy.

use crate::catalogue::Entry;

/// The entries of this chapter.
pub static ENTRIES: &[Entry] = &[];
