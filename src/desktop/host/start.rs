//! Starting libraries that may panic: quietly, and with the panic as an answer.

use std::any::Any;
use std::cell::Cell;
use std::panic::{self, AssertUnwindSafe};

type PanicHook = Box<dyn Fn(&panic::PanicHookInfo<'_>) + Sync + Send + 'static>;

/// Silence about panics while something starts.
///
/// A library that panics because a part of the system is missing would print a message no user can
/// read; the caller explains it instead.
pub(super) struct Start {
    hook: Cell<Option<PanicHook>>,
}

impl Start {
    /// The start has succeeded: panics are reported again as before, and are no longer caught.
    pub(super) fn done(&self) {
        if let Some(hook) = self.hook.take() {
            panic::set_hook(hook);
        }
    }

    /// Whether [`Self::done`] has not been called yet.
    pub(super) fn pending(&self) -> bool {
        let hook = self.hook.take();
        let pending = hook.is_some();
        self.hook.set(hook);
        pending
    }
}

/// Runs `body`. A panic before it has called [`Start::done`] is returned as text; a later one goes
/// on its way.
pub(super) fn attempt<R>(body: impl FnOnce(&Start) -> R) -> Result<R, String> {
    let start = Start { hook: Cell::new(Some(panic::take_hook())) };
    panic::set_hook(Box::new(|_| {}));
    // What `body` leaves half done is only used to be dropped.
    let result = panic::catch_unwind(AssertUnwindSafe(|| body(&start)));
    let pending = start.pending();
    start.done();
    match result {
        Ok(result) => Ok(result),
        Err(panic) if pending => Err(text(panic.as_ref())),
        Err(panic) => panic::resume_unwind(panic),
    }
}

fn text(panic: &(dyn Any + Send)) -> String {
    if let Some(text) = panic.downcast_ref::<&str>() {
        (*text).to_owned()
    } else if let Some(text) = panic.downcast_ref::<String>() {
        text.clone()
    } else {
        "a library of the window system broke off".to_owned()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_panic_while_starting_is_an_answer_and_a_later_one_is_a_panic() {
        assert_eq!(attempt(|_| 5), Ok(5));
        assert_eq!(attempt(|_| panic!("no x")), Err::<(), _>("no x".to_owned()));
        assert_eq!(attempt(|_| panic!("no {}", "y")), Err::<(), _>("no y".to_owned()));
        // The later panic is reported by the hook in force; keep this test's output clean.
        let late = attempt(|_| {
            panic::catch_unwind(|| {
                attempt(|start| {
                    start.done();
                    panic!("late");
                })
            })
            .is_err()
        });
        assert_eq!(late, Ok(true));
    }
}
