//! The stored data sets and what other libraries made of them.

use crate::compare::{number, rows};

/// One data set.
pub struct Set {
    pub x: Vec<f64>,
    pub y: Vec<f64>,
    pub weights: Vec<f64>,
}

pub fn set(name: &str) -> Set {
    let mut set = Set { x: Vec::new(), y: Vec::new(), weights: Vec::new() };
    for row in rows(include_str!("stored/sets.csv")).filter(|row| row[0] == name) {
        set.x.push(number(row[1]));
        set.y.push(number(row[2]));
        set.weights.push(number(row[3]));
    }
    assert!(!set.x.is_empty(), "no set {name}");
    set
}

/// One figure from a library.
pub struct Stored {
    pub set: &'static str,
    pub quantity: &'static str,
    pub argument: &'static str,
    pub value: f64,
    pub label: String,
}

/// All figures whose quantity begins with one of the prefixes.
pub fn stored(prefixes: &[&str]) -> Vec<Stored> {
    rows(include_str!("stored/results.csv"))
        .filter(|row| prefixes.iter().any(|prefix| row[1].starts_with(prefix)))
        .map(|row| Stored {
            set: row[0],
            quantity: row[1],
            argument: row[2],
            value: number(row[3]),
            label: row.join(" "),
        })
        .collect()
}
