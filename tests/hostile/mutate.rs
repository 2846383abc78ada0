//! Mutation by structure: texts are taken apart into lines, fields and values, which are swapped, doubled, dropped, and replaced by
//! what is at the edges of what can be written.

use std::io::Write as _;

use flate2::Compression;
use flate2::write::GzEncoder;

use crate::kinds::{Form, KINDS, Kind};

/// SplitMix64 (Steele, Lea and Flood 2014): a stream for each case.
pub struct Random(u64);

impl Random {
    pub fn new(seed: u64, case: u64) -> Self {
        Self(seed.wrapping_mul(0x2545_f491_4f6c_dd1d) ^ case.wrapping_mul(0x9e37_79b9_7f4a_7c15))
    }

    fn next(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        z ^ (z >> 31)
    }

    /// A number below another, 0 for 0.
    pub fn below(&mut self, count: usize) -> usize {
        if count == 0 {
            0
        } else {
            (self.next() % count as u64) as usize
        }
    }

    pub fn pick<'a, T>(&mut self, from: &'a [T]) -> &'a T {
        &from[self.below(from.len())]
    }
}

/// Values at the edges: of numbers, of units, of dates, of texts, of TOML.
const EDGES: &[&str] = &[
    "0",
    "-0",
    "-1",
    "1",
    "1e308",
    "-1e308",
    "1e-308",
    "5e-324",
    "1e400",
    "nan",
    "inf",
    "-inf",
    "NaN",
    "9223372036854775807",
    "18446744073709551616",
    "0.1",
    "99999",
    "1e9",
    "",
    " ",
    "\"",
    "\"\"",
    "\"0 W/K\"",
    "\"-5 kW\"",
    "\"1e300 kWh\"",
    "\"nan °C\"",
    "\"inf m\"",
    "\"20 °C\"",
    "\"70 °F\"",
    "\"-273.15 °C\"",
    "\"1000 °C\"",
    "\"0 %\"",
    "\"100 %\"",
    "\"-1 %\"",
    "\"0 years\"",
    "\"100 years\"",
    "\"1 h\"",
    "\"0 L\"",
    "\"1e12 L\"",
    "\"0 m\"",
    "\"500 m\"",
    "\"0.001 m\"",
    "\"air-source\"",
    "\"ground-source\"",
    "\"gas-boiler\"",
    "\"by-cost\"",
    "\"timer\"",
    "\"none\"",
    "true",
    "false",
    "[]",
    "{}",
    "[[]]",
    "[1, 2]",
    "{ a = 1 }",
    "{ low = \"1 kW\", likely = \"2 kW\", high = \"0 kW\" }",
    "2024-02-30",
    "2024-12-31T24:00",
    "2024-03-31T02:30",
    "2024-10-27T02:30",
    "0000-01-01",
    "9999-12-31",
    "-0001-01-01T00:00",
    "31/12/2024",
    "12/31/24 11:59 PM",
    "1e3",
    "1,5",
    "1.234,5",
    "١٢",
    "\u{feff}",
    "\u{202e}",
    "é",
    "°",
    "𝟙",
    "\u{0}",
    "#",
    "=",
    ",",
    ";",
    "\t",
    "\r",
    "\n\n",
    "'''",
    "\"\"\"",
    "\\u0000",
    "\"00:00\"",
    "\"24:00\"",
    "\"23:59\"",
    "\"25:61\"",
    "\"Europe/London\"",
    "\"Antarctica/Troll\"",
    "\"Africa/Monrovia\"",
    "\"Pacific/Apia\"",
    "\"monday\"",
    "\"GBP\"",
    "\"JPY\"",
];

/// The text of a kind, or bytes, after a handful of mutations.
pub fn mutated(random: &mut Random, kind: &Kind) -> Vec<u8> {
    // A packed file that is damaged is told at once: every other one is packed after its text was mutated.
    if kind.form == Form::Packed
        && random.below(2) == 0
        && let Some(plain) = KINDS.iter().find(|kind| kind.name == "weather")
    {
        let mut packed = GzEncoder::new(Vec::new(), Compression::fast());
        packed.write_all(&mutated(random, plain)).unwrap();
        return packed.finish().unwrap();
    }
    let seed = random.pick(kind.seeds()).clone();
    if kind.form == Form::Packed {
        let mut bytes = seed;
        for _ in 0..=random.below(4) {
            scramble(random, &mut bytes);
        }
        return bytes;
    }
    let text = String::from_utf8_lossy(&seed).into_owned();
    let mut lines: Vec<String> = text.lines().map(str::to_owned).collect();
    // Half of them gently, so that many are read and what is behind the door is tried too.
    let gently = random.below(2) == 0;
    let rounds = 1 + random.below(5);
    for _ in 0..rounds {
        if gently {
            nudge(random, &mut lines);
        } else {
            change(random, kind.form, &mut lines);
        }
    }
    if gently {
        return (lines.join("\n") + "\n").into_bytes();
    }
    let end = *random.pick(&["\n", "\n", "\n", "\n", "\r\n", "\r"]);
    let mut bytes = lines.join(end).into_bytes();
    if random.below(12) == 0 {
        scramble(random, &mut bytes);
    }
    bytes
}

fn change(random: &mut Random, form: Form, lines: &mut Vec<String>) {
    if lines.is_empty() {
        lines.push(String::new());
    }
    // In a long table most lines are alike: the head is looked at as often as all the rest.
    let at = if random.below(2) == 0 {
        random.below(lines.len().min(12))
    } else {
        random.below(lines.len())
    };
    match random.below(12) {
        0 => {
            lines.remove(at);
        }
        1 => {
            let line = lines[at].clone();
            let to = random.below(lines.len());
            lines.insert(to, line);
        }
        2 => {
            let other = random.below(lines.len());
            lines.swap(at, other);
        }
        3 => {
            let until = at + random.below(lines.len() - at);
            lines.drain(at..until);
        }
        4 => {
            let cut = boundary(&lines[at], random);
            lines[at].truncate(cut);
        }
        5 => {
            let cut = boundary(&lines[at], random);
            let edge = *random.pick(EDGES);
            lines[at].insert_str(cut, edge);
        }
        6 => {
            let many = *random.pick(&[10, 300, 3000]);
            let text = (*random.pick(&["[", "{ a = ", "9", ",", "a.", "\"", "é"])).repeat(many);
            lines[at].push_str(&text);
        }
        _ => value(random, form, &mut lines[at]),
    }
}

/// A change after which most texts can still be read: another number of its size or a line less.
fn nudge(random: &mut Random, lines: &mut Vec<String>) {
    if lines.is_empty() {
        return;
    }
    let at = random.below(lines.len());
    if random.below(8) == 0 {
        lines.remove(at);
        return;
    }
    if let Some(place) = number_within(random, &lines[at]) {
        let held: f64 = lines[at][place.clone()].parse().unwrap_or(1.0);
        let digits = lines[at][place.clone()]
            .split_once('.')
            .map_or(0, |(_, after)| after.len());
        let factor = *random.pick(&[0.0, 0.5, 0.8, 0.95, 1.05, 1.25, 2.0, 5.0]);
        lines[at].replace_range(place, &format!("{:.digits$}", held * factor));
    }
}

/// Replaces one value of a line: the part behind an equals sign, a field of a table, or a number within.
fn value(random: &mut Random, form: Form, line: &mut String) {
    let edge = *random.pick(EDGES);
    if random.below(3) == 0 {
        return number(random, line);
    }
    match form {
        Form::Toml => {
            if let Some((key, _)) = line.split_once('=') {
                *line = format!("{key}= {edge}");
            }
        }
        Form::Csv => {
            let delimiter = if line.contains(';') { ";" } else { "," };
            let mut fields: Vec<&str> = line.split(delimiter).collect();
            let at = random.below(fields.len());
            fields[at] = edge;
            *line = fields.join(delimiter);
        }
        Form::Packed => {}
    }
}

/// Where one of a line's numbers stands.
fn number_within(random: &mut Random, line: &str) -> Option<std::ops::Range<usize>> {
    let starts: Vec<usize> = line
        .char_indices()
        .filter(|&(i, c)| {
            c.is_ascii_digit() && !line[..i].ends_with(|b: char| b.is_ascii_digit() || b == '.')
        })
        .map(|(i, _)| i)
        .collect();
    let &start = starts.get(random.below(starts.len()))?;
    let length = line[start..]
        .find(|c: char| !c.is_ascii_digit() && c != '.')
        .unwrap_or(line.len() - start);
    Some(start..start + length)
}

/// Puts another number in place of one of a line, its unit kept.
fn number(random: &mut Random, line: &mut String) {
    let Some(place) = number_within(random, line) else {
        return;
    };
    let held = &line[place.clone()];
    let new = match random.below(8) {
        0 => "0".to_owned(),
        1 => format!("-{held}"),
        2 => "1e300".to_owned(),
        3 => "nan".to_owned(),
        4 => "1e-300".to_owned(),
        _ => {
            let held: f64 = held.parse().unwrap_or(1.0);
            let factor = *random.pick(&[0.001, 0.1, 0.5, 0.9, 1.1, 2.0, 10.0, 1000.0]);
            format!("{}", held * factor)
        }
    };
    line.replace_range(place, &new);
}

fn boundary(line: &str, random: &mut Random) -> usize {
    let mut at = random.below(line.len() + 1);
    while !line.is_char_boundary(at) {
        at -= 1;
    }
    at
}

fn scramble(random: &mut Random, bytes: &mut Vec<u8>) {
    if bytes.is_empty() {
        return;
    }
    let at = random.below(bytes.len());
    match random.below(4) {
        0 => bytes[at] ^= 1 << random.below(8),
        1 => bytes.truncate(at),
        2 => bytes[at] = *random.pick(&[0, 0xff, 0xfe, 0x80, b'\n', 0x1f]),
        _ => {
            let until = (at + 1 + random.below(64)).min(bytes.len());
            let piece = bytes[at..until].to_vec();
            let to = random.below(bytes.len());
            bytes.splice(to..to, piece);
        }
    }
}
