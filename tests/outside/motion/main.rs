//! The stop model against the outside: closed forms, handbook examples, an independent solver, and statistics of the fit.

mod closed_forms;
mod drives;
mod fit;
mod handbook;
mod independent_solver;
mod map;
mod model;
mod refusals;
mod tolerance;
