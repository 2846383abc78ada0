//! Drawing samples: whole blocks on all cores, progress on a terminal, an honest end when somebody presses Ctrl-C.

use std::sync::Arc;
use std::sync::atomic::{AtomicBool, Ordering};

use indicatif::{ProgressBar, ProgressStyle};

use crate::problem::Problems;
use crate::study::odds::{Chance, Sample, Sampler};

/// Fewest blocks whose scatter is taken for an error.
const LEAST_BLOCKS: usize = 8;
/// Samples that are drawn side by side, in whole blocks, so that small blocks keep many cores busy. The number is fixed: where it stops
/// must not depend on the machine.
const TOGETHER: usize = 100;

/// Whether somebody has asked to stop, by Ctrl-C or as a system ends a program.
pub(super) struct Stop(Arc<AtomicBool>);

impl Stop {
    /// Listens from now on; a second request ends the program at once, with the status a shell gives a program that was interrupted.
    pub fn listen() -> Self {
        /// 128 and the number of the signal.
        const INTERRUPTED: i32 = 130;
        use signal_hook::consts::{SIGINT, SIGTERM};
        let asked = Arc::new(AtomicBool::new(false));
        for signal in [SIGINT, SIGTERM] {
            // Where the system gives no signals the program simply runs on.
            let twice = Arc::clone(&asked);
            let _ = signal_hook::flag::register_conditional_shutdown(signal, INTERRUPTED, twice);
            let _ = signal_hook::flag::register(signal, Arc::clone(&asked));
        }
        Self(asked)
    }

    fn asked(&self) -> bool {
        self.0.load(Ordering::Relaxed)
    }
}

/// The blocks that were drawn.
pub(super) struct Drawing {
    /// Whole blocks, from the first on.
    pub blocks: Vec<Vec<Sample>>,
    /// Whether somebody asked to stop before all were there.
    pub interrupted: bool,
}

/// Draws blocks until there are enough, every chance against today's system is known to `precision` (a fraction), or somebody asks
/// to stop: then the blocks that were begun are finished, since only whole blocks are fair.
pub(super) fn draw(
    sampler: &Sampler,
    most: usize,
    precision: Option<f64>,
    stop: Option<&Stop>,
) -> Result<Drawing, Problems> {
    // The library itself draws nothing where stderr is no terminal.
    let progress = ProgressBar::new(most as u64).with_style(
        ProgressStyle::with_template("{bar:30} {pos} of {len} blocks of samples, {eta} left")
            .unwrap_or_else(|_| ProgressStyle::default_bar()),
    );
    let mut blocks: Vec<Vec<Sample>> = Vec::with_capacity(most);
    let mut interrupted = false;
    let together = (TOGETHER / sampler.points()).max(1);
    while blocks.len() < most {
        interrupted = !blocks.is_empty() && stop.is_some_and(Stop::asked);
        let enough = precision.is_some_and(|precision| is_precise(&blocks, precision));
        if interrupted || enough {
            break;
        }
        let next = blocks.len()..most.min(blocks.len() + together);
        blocks.extend(sampler.blocks(next)?);
        progress.set_position(blocks.len() as u64);
    }
    progress.finish_and_clear();
    Ok(Drawing {
        blocks,
        interrupted,
    })
}

/// Whether every choice's chance against today is known well enough.
fn is_precise(blocks: &[Vec<Sample>], precision: f64) -> bool {
    let Some(systems) = blocks
        .first()
        .and_then(|block| block.first())
        .map(|sample| sample.systems.len())
    else {
        return false;
    };
    let error = |place: usize| {
        let saving: Vec<Vec<f64>> = blocks
            .iter()
            .map(|block| {
                let saving = |sample: &Sample| sample.systems[0].cost - sample.systems[place].cost;
                block.iter().map(saving).collect()
            })
            .collect();
        let chance = Chance::of(saving.iter().map(Vec::as_slice), |saving| saving > 0.0);
        let error = chance.and_then(|chance| chance.error);
        error.unwrap_or(f64::INFINITY)
    };
    blocks.len() >= LEAST_BLOCKS && (1..systems).all(|place| error(place) <= precision)
}
