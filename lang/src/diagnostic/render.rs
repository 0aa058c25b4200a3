//! Diagnostics as a person sees them: the only file that knows ariadne.
