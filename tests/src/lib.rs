//! The harness of the test suites.
