//! The years of a buried loop: what earlier ones leave behind, and each year of its life.

use std::sync::Arc;

use super::case::{Case, Contender};
use crate::fault::{self, Fault};
use crate::lifetime::Running;
use crate::source::{BuriedLoop, Memory, Source};
use crate::year::{MachineSystem, Row, Sink, State, run};

/// Year of the loop's life that a comparison shows when the brief does not say: the fall of the ground is by then nearly done
/// (a single bore falls as much again from year 1 to 2 as from 10 to 25), and most of its life is like it. A choice of ours.
pub const SHOWN_YEAR: u32 = 15;

/// The ground as earlier years leave it to the year that is shown.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Aged {
    /// Year that is shown, from 1.
    pub year: u32,
    /// What the ground remembers at its beginning.
    pub memory: Memory,
    /// Net heat drawn in a year of that history, kWh.
    pub drawn_kwh: f64,
    /// Whether the system was changed after the history was made, so that the history is to be scaled to the new draw.
    pub moved: bool,
}

/// How the past of a loop of another length is made.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Ageing {
    /// Every year before the one that is shown is run.
    YearByYear,
    /// By the geometric sum of equal years, which takes two of them whatever the age; the draw a year is known for is left as it was.
    Settled,
}

impl Aged {
    /// The memory for a system that draws a number of kWh a year: the ground is linear, so the history is scaled.
    pub fn for_draw(&self, drawn_kwh: f64) -> Memory {
        if self.drawn_kwh > 0.0 {
            self.memory.times(drawn_kwh / self.drawn_kwh)
        } else {
            self.memory
        }
    }
}

/// The ground at the beginning of a year of its life (from 1), if every year before had drawn what a year of such ground draws.
///
/// The history of equal years is a geometric sum, so that a life takes a few years' work. Nothing when the system has no ground that
/// remembers.
pub(super) fn settled(case: &Case, contender: &Contender, year: u32) -> Option<Memory> {
    /// Times that draw and ground are brought into line; the draw hardly depends on the ground.
    const PASSES: usize = 2;
    let machine = contender.remembering()?;
    let Source::Buried(buried) = &machine.source else {
        return None;
    };
    let first = case.site.years.first()?.1.start;
    let last = case.site.years.last()?.1.end;
    let rounds = f64::from(year.saturating_sub(1)) / case.site.years.len() as f64;
    let mut memory = Memory::default();
    for _ in 0..PASSES {
        let mut state = State {
            ground: memory,
            ..State::at_rest(&contender.system, contender.indoor_c)
        };
        let mut fresh = Remembering {
            buried,
            memory: Memory::default(),
        };
        run(
            &case.site,
            &contender.system,
            &contender.plan,
            first..last,
            &mut state,
            &mut fresh,
        );
        memory = buried
            .response()
            .repeated(&fresh.memory, (last - first) as f64, rounds);
    }
    Some(memory)
}

/// What fresh ground would remember of the draws of a run.
struct Remembering<'a> {
    buried: &'a BuriedLoop,
    memory: Memory,
}

impl Sink for Remembering<'_> {
    fn take(&mut self, hour: usize, row: &Row) {
        self.buried.drawn(hour, row.extracted_kwh, &mut self.memory);
    }
}

/// Net heat drawn from the ground.
#[derive(Debug, Clone, Copy, Default)]
struct Drawn(f64);

impl Sink for Drawn {
    fn take(&mut self, _: usize, row: &Row) {
        self.0 += row.extracted_kwh - row.returned_kwh;
    }
}

impl Contender {
    /// Says that the system draws otherwise than when its ground was aged.
    pub(super) fn moved(&mut self) {
        if let Some(aged) = &mut self.aged {
            aged.moved = true;
        }
    }

    /// Its machine and source, where it draws on ground that remembers.
    pub fn remembering(&self) -> Option<&MachineSystem> {
        let machine = self.system.heating.machine()?;
        machine.source.remembers().then_some(machine)
    }
}

impl Case {
    /// Ages the ground of every system that has such, so that its run shows a year of its life; where its outlay is known, each year
    /// of that life is counted as well.
    pub fn age_grounds(&mut self) {
        for i in 0..self.contenders.len() {
            let year = self.contenders[i].shown_year;
            let aged = self.aged(&self.contenders[i], year);
            self.contenders[i].aged = aged;
            self.contenders[i].life = self.life(&self.contenders[i]);
        }
    }

    /// What a system uses in each year of its life; nothing where its years are all alike or nobody asks what they cost together.
    pub(super) fn life(&self, contender: &Contender) -> Option<Arc<[Running]>> {
        contender.remembering()?;
        contender
            .outlay
            .as_ref()
            .filter(|outlay| !outlay.parts.is_empty())?;
        let years = self.terms.years.max(contender.shown_year as usize);
        // A bill that cannot be made is told when the case is run.
        self.yearly_running(contender, years).ok().map(Arc::from)
    }

    /// The ground of a system as it is at the beginning of a year of its life, from 1; nothing when it has none that remembers.
    ///
    /// The weather is gone through again and again, its years in their order.
    pub fn aged(&self, contender: &Contender, year: u32) -> Option<Aged> {
        contender.remembering()?;
        let mut state = State::at_rest(&contender.system, contender.indoor_c);
        let mut drawn = Drawn::default();
        let years = if fault::on(Fault::FirstYearLoop) {
            0
        } else {
            year.saturating_sub(1)
        };
        for i in 0..years {
            drawn = Drawn::default();
            let (_, hours) = self.weather_year(i)?;
            run(
                &self.site,
                &contender.system,
                &contender.plan,
                hours,
                &mut state,
                &mut drawn,
            );
        }
        Some(Aged {
            year,
            memory: state.ground,
            drawn_kwh: drawn.0,
            moved: false,
        })
    }

    /// The weather of a year of a loop's life, from 0.
    pub(super) fn weather_year(&self, year: u32) -> Option<(i32, std::ops::Range<usize>)> {
        let years = &self.site.years;
        years.get(year as usize % years.len().max(1)).cloned()
    }
}
