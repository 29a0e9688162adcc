//! When the window is to be drawn next. Nothing is drawn without a reason.

use std::time::{Duration, Instant};

/// A hidden window needs no pictures; its app is still asked this often at most.
const HIDDEN_INTERVAL: Duration = Duration::from_millis(100);

/// How long to wait for the window system to let a requested picture be drawn. Wayland compositors
/// hold back windows that cannot be seen, without saying so; the app's logic goes on then.
const PATIENCE: Duration = Duration::from_millis(250);

/// What is due.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Due {
    /// Ask the window system to draw.
    Redraw,
    /// Run the app's logic without a picture.
    LogicOnly,
}

/// The times at which something is to happen.
#[derive(Debug, Default)]
pub(super) struct Schedule {
    repaint: Option<Instant>,
    /// When a requested redraw counts as withheld.
    withheld: Option<Instant>,
}

impl Schedule {
    /// Wants a picture at `when`, or earlier if one is wanted earlier already.
    pub(super) fn repaint_at(&mut self, when: Instant) {
        self.repaint = Some(self.repaint.map_or(when, |earlier| earlier.min(when)));
    }

    /// The window system lets a picture be drawn now.
    pub(super) fn redraw_granted(&mut self) {
        self.withheld = None;
    }

    /// Takes what is due at `now`. Requests for a hidden window are answered with logic only, and
    /// the next of them waits a while. The window system is
    /// asked whether the window is hidden only when that matters.
    pub(super) fn take_due(&mut self, now: Instant, hidden: impl FnOnce() -> bool) -> Option<Due> {
        if self.repaint.is_some_and(|when| when <= now) {
            self.repaint = None;
            if hidden() {
                return Some(Due::LogicOnly);
            }
            self.withheld.get_or_insert(now + PATIENCE);
            return Some(Due::Redraw);
        }
        if self.withheld.is_some_and(|when| when <= now) {
            self.withheld = None;
            return Some(Due::LogicOnly);
        }
        None
    }

    /// Slows down a window that is hidden: requests made meanwhile wait at least a while.
    pub(super) fn hold_back(&mut self, now: Instant) {
        if let Some(when) = &mut self.repaint {
            *when = (*when).max(now + HIDDEN_INTERVAL);
        }
    }

    /// When to wake up, if nothing happens before.
    pub(super) fn next(&self) -> Option<Instant> {
        [self.repaint, self.withheld].into_iter().flatten().min()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const MS: Duration = Duration::from_millis(1);

    #[test]
    fn nothing_is_due_without_a_request() {
        let mut schedule = Schedule::default();
        assert_eq!(schedule.take_due(Instant::now(), || false), None);
        assert_eq!(schedule.next(), None);
    }

    #[test]
    fn the_earliest_request_counts_and_is_served_once() {
        let now = Instant::now();
        let mut schedule = Schedule::default();
        schedule.repaint_at(now + 20 * MS);
        schedule.repaint_at(now + 10 * MS);
        schedule.repaint_at(now + 30 * MS);
        assert_eq!(schedule.next(), Some(now + 10 * MS));
        assert_eq!(schedule.take_due(now + 9 * MS, || false), None);
        assert_eq!(schedule.take_due(now + 10 * MS, || false), Some(Due::Redraw));
        schedule.redraw_granted();
        assert_eq!(schedule.take_due(now + 60 * MS, || false), None);
        assert_eq!(schedule.next(), None);
    }

    #[test]
    fn a_withheld_redraw_gives_logic_after_a_while() {
        let now = Instant::now();
        let mut schedule = Schedule::default();
        schedule.repaint_at(now);
        assert_eq!(schedule.take_due(now, || false), Some(Due::Redraw));
        assert_eq!(schedule.next(), Some(now + PATIENCE));
        assert_eq!(schedule.take_due(now + PATIENCE, || false), Some(Due::LogicOnly));
        assert_eq!(schedule.next(), None);
    }

    #[test]
    fn a_hidden_window_runs_its_logic_at_a_slow_pace() {
        let now = Instant::now();
        let mut schedule = Schedule::default();
        schedule.repaint_at(now);
        assert_eq!(schedule.take_due(now, || true), Some(Due::LogicOnly));
        schedule.repaint_at(now);
        schedule.hold_back(now);
        assert_eq!(schedule.take_due(now + 99 * MS, || true), None);
        assert_eq!(schedule.take_due(now + 100 * MS, || true), Some(Due::LogicOnly));
        assert_eq!(schedule.next(), None);
    }
}
