//! Sums of many numbers without loss of digits.

/// Running sum that keeps what each addition would have rounded away.
///
/// Source: A. Neumaier, "Rundungsfehleranalyse einiger Verfahren zur Summation endlicher Summen", ZAMM 54 (1974) 39-51.
#[derive(Clone, Copy, Debug)]
pub(crate) struct CompensatedSum {
    sum: f64,
    lost: f64,
}

impl CompensatedSum {
    pub(crate) fn zero() -> Self {
        Self { sum: 0.0, lost: 0.0 }
    }

    pub(crate) fn add(&mut self, term: f64) {
        let next = self.sum + term;
        self.lost += if self.sum.abs() >= term.abs() { (self.sum - next) + term } else { (term - next) + self.sum };
        self.sum = next;
    }

    pub(crate) fn value(&self) -> f64 {
        self.sum + self.lost
    }
}

/// Sum of all terms, in the order given.
pub(crate) fn sum_of(terms: impl Iterator<Item = f64>) -> f64 {
    let mut sum = CompensatedSum::zero();
    for term in terms {
        sum.add(term);
    }
    sum.value()
}

/// Arithmetic mean of a list that is not empty.
///
/// Works on differences from the first value and corrects once, so that a list of equal values has exactly that value as mean.
pub(crate) fn mean_of(values: &[f64]) -> f64 {
    let count = values.len() as f64;
    let first = values[0];
    let near = first + sum_of(values.iter().map(|x| x - first)) / count;
    near + sum_of(values.iter().map(|x| x - near)) / count
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Neumaier's point: 1 + 1e100 + 1 - 1e100 is 2, where plain addition gives 0.
    #[test]
    fn nothing_is_rounded_away() {
        assert_eq!(sum_of([1.0, 1e100, 1.0, -1e100].into_iter()), 2.0);
        assert_eq!(sum_of([0.1; 10].into_iter()), 1.0);
    }
}
