//! Progress of long work: one line on a terminal, nothing into a file or a pipe.

use indicatif::{ProgressBar, ProgressStyle};

/// A line that says what is being done.
pub(super) struct Progress(ProgressBar);

impl Progress {
    /// Work of so many steps. The library itself draws nothing where stderr is no terminal.
    pub fn new(steps: u64) -> Self {
        let bar = ProgressBar::new(steps);
        if let Ok(style) = ProgressStyle::with_template("{pos}/{len} {wide_msg}") {
            bar.set_style(style);
        }
        Self(bar)
    }

    /// The next step begins.
    pub fn at(&self, what: &str) {
        self.0.inc(1);
        self.0.set_message(crate::chart::plain_line(what));
    }

    /// All is done; the line goes away.
    pub fn done(&self) {
        self.0.finish_and_clear();
    }
}
