//! Sheets nobody would write: the reader refuses or reads, the fit refuses or gives a monotone machine, and nothing panics.

#![cfg(test)] // so that the lints know the code below for test code

use proptest::prelude::*;
use winterledger::heatpump::{Sheet, carnot, fit, typical_files};

fn header(source: &str, refrigerant: &str, speed: &str) -> String {
    format!(
        "[machine]\nlabel = \"Any\"\nsource = \"{source}\"\nrefrigerant = \"{refrigerant}\"\nspeed = \"{speed}\"\n"
    )
}

/// A monotone and faithful map, or findings that say where the points forbade it.
fn holds(sheet: &Sheet) -> Result<(), TestCaseError> {
    let Ok(fitted) = fit(sheet) else {
        return Ok(());
    };
    let pump = &fitted.heat_pump;
    let told = |what: &str| fitted.report.findings.iter().any(|f| f.what.contains(what));
    prop_assert!(told("not monotone") || pump.map().is_monotone(pump.limits()));
    // The shipped sheets' own bound is 0.1 %, tested with them; other places than those of the finding are looked at here.
    let error = pump
        .map()
        .error(pump.machine(), pump.limits(), 300)
        .unwrap();
    prop_assert!(
        told("map is up to") || error.cop.max(error.output) < 0.004,
        "{error:?}"
    );
    Ok(())
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(40))]

    /// A shipped sheet with every COP up to 5 % off, as a sloppy datasheet might have it.
    #[test]
    fn a_sloppy_sheet_gives_a_monotone_machine(which in 0..6usize, errors in prop::collection::vec(-0.05..0.05f64, 20)) {
        let (_, text) = typical_files().nth(which).unwrap();
        let mut error = errors.iter().cycle();
        let changed: String = text
            .lines()
            .map(|line| match line.strip_prefix("cop = ") {
                Some(cop) => format!("cop = {:.3}\n", cop.parse::<f64>().unwrap() * (1.0 + error.next().unwrap())),
                None => format!("{line}\n"),
            })
            .collect();
        if let Ok(sheet) = Sheet::parse("sloppy.toml", &changed) {
            holds(&sheet)?;
        }
    }

    /// One to four points anywhere, at any speed, of any refrigerant.
    #[test]
    fn any_points_give_a_machine_or_a_refusal(
        refrigerant in prop::sample::select(vec!["R290", "R32", "R410A", "R134a", "R1234yf", "R600a"]),
        source in prop::sample::select(vec!["air", "brine", "water"]),
        speed in prop::sample::select(vec!["variable", "fixed"]),
        points in prop::collection::vec(
            (-20.0..20.0f64, 25.0..70.0f64, 1.0..30.0f64, 0.2..0.68f64,
             prop::sample::select(vec!["maximum", "part", "least", "unknown"])),
            1..4,
        ),
    ) {
        let mut text = header(source, refrigerant, speed);
        for (source_c, flow_c, heat_kw, share, at) in points {
            let cop = share * carnot(source_c, flow_c);
            text += &format!(
                "[[tested]]\nsource = \"{source_c:.1} °C\"\nflow = \"{flow_c:.1} °C\"\noutput = \"{heat_kw:.2} kW\"\ncop = {cop:.2}\nat = \"{at}\"\n"
            );
        }
        if let Ok(sheet) = Sheet::parse("any.toml", &text) {
            holds(&sheet)?;
        }
    }
}

proptest! {
    #[test]
    fn any_text_is_read_or_refused(
        text in "(\\[machine\\]|\\[\\[tested\\]\\]|\\[limits\\]|highest_flow|source|flow|output|cop|at|=|\"|°C|kW|\n|\\{|\\}|\\[|\\]|,|[0-9.-]| )*",
    ) {
        if let Err(problems) = Sheet::parse("any.toml", &text) {
            prop_assert!(!problems.is_empty());
        }
    }

    /// A shipped sheet with a piece cut out or doubled.
    #[test]
    fn a_torn_sheet_is_read_or_refused(which in 0..6usize, from in 0.0..1.0f64, length in 0..120usize, double in any::<bool>()) {
        let (_, text) = typical_files().nth(which).unwrap();
        let characters: Vec<char> = text.chars().collect();
        let start = (from * characters.len() as f64) as usize;
        let end = (start + length).min(characters.len());
        let middle: String = characters[start..end].iter().collect();
        let before: String = characters[..start].iter().collect();
        let after: String = characters[end..].iter().collect();
        let torn = if double { format!("{before}{middle}{middle}{after}") } else { format!("{before}{after}") };
        if let Err(problems) = Sheet::parse("torn.toml", &torn) {
            prop_assert!(!problems.is_empty());
        }
    }
}
