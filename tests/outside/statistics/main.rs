//! Statistics against the outside: certified data, handbook tables and examples, other libraries, closed forms, sweeps.
//!
//! What each value rests on is written beside it; `README.md` in this folder says where the stored files come from.

mod compare;
mod tolerance;
mod univariate;
