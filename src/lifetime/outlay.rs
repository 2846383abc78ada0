//! What a system costs to put in and to keep.

/// One part of a system that is bought, wears out and is bought again.
#[derive(Debug, Clone, PartialEq)]
pub struct Part {
    /// What it is.
    pub label: String,
    /// What it costs, put in.
    pub amount: f64,
    /// Years it lasts, at least 1.
    pub life_years: usize,
    /// Years until it is bought for the first time: 0 for what a choice brings, the years left for what is there today.
    pub due_in: usize,
}

impl Part {
    /// Whether it is bought at the end of a year of a comparison over `years`; nothing is bought at the very end.
    pub fn is_bought(&self, year: usize, years: usize) -> bool {
        year < years
            && year >= self.due_in
            && (year - self.due_in).is_multiple_of(self.life_years.max(1))
    }

    /// What is left of it after `years`, straight-line: the unused share of the life of the one bought last.
    pub fn left_after(&self, years: usize) -> f64 {
        let life = self.life_years.max(1);
        if years <= self.due_in {
            return 0.0;
        }
        let used = (years - self.due_in - 1) % life + 1;
        self.amount * (life - used) as f64 / life as f64
    }
}

/// What a system costs to put in and to keep.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Outlay {
    /// Its parts.
    pub parts: Vec<Part>,
    /// What others pay towards it at the beginning.
    pub grant: f64,
    /// Maintenance of a year.
    pub maintenance: f64,
}

impl Outlay {
    /// What is paid at the beginning, before the grant.
    pub fn capital(&self) -> f64 {
        let now = self.parts.iter().filter(|part| part.due_in == 0);
        // An empty sum of floats is −0, which would be printed with its sign.
        now.fold(0.0, |sum, part| sum + part.amount)
    }

    /// The same with another capital, its parts in the same proportions; nothing to scale where there is none.
    pub fn with_capital(&self, capital: f64) -> Self {
        let now = self.capital();
        let mut outlay = self.clone();
        if now > 0.0 {
            for part in outlay.parts.iter_mut().filter(|part| part.due_in == 0) {
                part.amount *= capital / now;
            }
        }
        outlay
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn part(life_years: usize, due_in: usize) -> Part {
        Part {
            label: "machine".into(),
            amount: 6000.0,
            life_years,
            due_in,
        }
    }

    fn bought(part: &Part, years: usize) -> Vec<usize> {
        (0..=years)
            .filter(|&year| part.is_bought(year, years))
            .collect()
    }

    #[test]
    fn a_part_is_bought_again_when_it_is_worn_out_and_not_at_the_very_end() {
        assert_eq!(bought(&part(15, 0), 20), [0, 15]);
        assert_eq!(bought(&part(10, 0), 20), [0, 10]);
        assert_eq!(bought(&part(15, 4), 20), [4, 19]);
        assert_eq!(bought(&part(15, 25), 20), [0_usize; 0]);
    }

    #[test]
    fn what_is_left_is_the_unused_share_of_the_last_one() {
        // Bought in year 15 for 15 years, 5 used: 10/15 are left.
        assert!((part(15, 0).left_after(20) - 4000.0).abs() < 1e-9);
        assert_eq!(part(10, 0).left_after(20), 0.0);
        // Bought in year 19, one year used.
        assert!((part(15, 4).left_after(20) - 5600.0).abs() < 1e-9);
        assert_eq!(part(15, 25).left_after(20), 0.0);
    }
}
