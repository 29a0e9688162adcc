//! Statistics against the outside: certified data, handbook tables and examples, other libraries, closed forms, sweeps.
//!
//! What each value rests on is written beside it; `README.md` in this folder says where the stored files come from.

mod charts;
mod compare;
mod coverage;
mod draws;
mod forecast;
mod lines;
mod splits;
mod stored_sets;
mod sweeps;
mod tolerance;
mod trend;
mod univariate;
