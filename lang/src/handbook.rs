//! The handbook.

use crate::output::Look;

/// A page.
pub fn page(topic: &[String], look: &Look) -> Result<String, String> {
    let _ = look;
    Err(format!("help {}: not yet", topic.join(" ")))
}
