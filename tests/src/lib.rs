//! Helpers that the integration tests share.
