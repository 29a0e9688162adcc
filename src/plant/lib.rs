//! What is kept: the plant folder on disk.
