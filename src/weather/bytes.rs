//! From the bytes of a file to text: unpacking, encoding, and telling what is no text at all.

use std::borrow::Cow;
use std::io::Read;
use std::sync::Arc;

use encoding_rs::{Encoding, UTF_8, UTF_16BE, UTF_16LE, WINDOWS_1252};
use flate2::read::MultiGzDecoder;

use super::options::{MAX_EXPANDED_BYTES, ReadOptions};
use crate::problem::{Finding, Place, Problem, Severity};

const GZIP: &[u8] = &[0x1f, 0x8b];
/// How far into a file zero bytes are looked for; further in they make a row that cannot be read.
const LOOKED_AT_BYTES: usize = 1 << 16;
const ZIP: &[u8] = b"PK\x03\x04";

/// The text of a file.
///
/// # Errors
/// Compressed data that is broken or unpacks to more than the stated limit, an archive, binary data, an encoding that is
/// not known or that the bytes do not follow.
pub(super) fn text<'a>(
    name: &Arc<str>,
    bytes: &'a [u8],
    options: &ReadOptions,
    findings: &mut Vec<Finding>,
) -> Result<Cow<'a, str>, Problem> {
    let place = Place::file(Arc::clone(name));
    let problem = |found: String, allowed: &str, remedy: &str| {
        Err(Problem::new(place.clone(), found, allowed, remedy))
    };
    if bytes.starts_with(ZIP) {
        return problem(
            "the file is a zip archive or a spreadsheet".to_owned(),
            "plain text with one reading a line, or the same packed with gzip",
            "export the sheet as CSV, or unpack the archive",
        );
    }
    let bytes = if bytes.starts_with(GZIP) {
        Cow::Owned(unpack(&place, bytes, options)?)
    } else {
        Cow::Borrowed(bytes)
    };
    if bytes.is_empty() {
        return problem(
            "the file is empty".to_owned(),
            "a heading line and one reading a line",
            "",
        );
    }
    let top = bytes[..bytes.len().min(200)]
        .trim_ascii_start()
        .to_ascii_lowercase();
    if top.starts_with(b"<!doctype html") || top.starts_with(b"<html") {
        return problem(
            "the file is a web page".to_owned(),
            "a heading line and one reading a line",
            "fetch the file itself, not the page about it",
        );
    }
    if let Some(label) = &options.encoding {
        let Some(encoding) = Encoding::for_label(label.as_bytes()) else {
            return problem(
                format!("the encoding \"{label}\" is not known"),
                "a label of the WHATWG Encoding Standard, such as utf-8, windows-1252 or utf-16le",
                "",
            );
        };
        let (text, used, malformed) = encoding.decode(&bytes);
        if malformed {
            return problem(
                format!("the bytes are not {}", used.name()),
                "bytes in the encoding that was declared",
                "declare the encoding in which the file was saved",
            );
        }
        return Ok(Cow::Owned(text.into_owned()));
    }
    if let Some((encoding, _)) = Encoding::for_bom(&bytes)
        && encoding != UTF_8
    {
        let (text, _) = encoding.decode_with_bom_removal(&bytes);
        findings.push(
            Finding::new(
                Severity::Note,
                format!("the file is encoded as {}", encoding.name()),
                "decoded by its byte-order mark",
            )
            .at(&place),
        );
        return Ok(Cow::Owned(text.into_owned()));
    }
    if let Some(zero) = bytes[..bytes.len().min(LOOKED_AT_BYTES)]
        .iter()
        .position(|&byte| byte == 0)
    {
        let encoding = if looks_like_utf16(&bytes, 1) {
            UTF_16LE
        } else if looks_like_utf16(&bytes, 0) {
            UTF_16BE
        } else {
            return Err(Problem::new(
                place.clone().at_line(line_at(&bytes, zero)),
                "a zero byte: this is not text",
                "plain text with one reading a line, or the same packed with gzip",
                "export the readings as CSV",
            ));
        };
        return problem(
            format!("the file looks like {} without its mark", encoding.name()),
            "UTF-8, or a declared encoding",
            &format!("declare the encoding {}", encoding.name().to_lowercase()),
        );
    }
    let without_mark = |text: &'a str| text.strip_prefix('\u{feff}').unwrap_or(text);
    match bytes {
        Cow::Borrowed(bytes) => match std::str::from_utf8(bytes) {
            Ok(text) => Ok(Cow::Borrowed(without_mark(text))),
            Err(error) => Ok(Cow::Owned(guess(
                &place,
                bytes,
                error.valid_up_to(),
                findings,
            ))),
        },
        Cow::Owned(bytes) => match String::from_utf8(bytes) {
            Ok(text) => Ok(Cow::Owned(match text.strip_prefix('\u{feff}') {
                Some(rest) => rest.to_owned(),
                None => text,
            })),
            Err(error) => {
                let valid = error.utf8_error().valid_up_to();
                Ok(Cow::Owned(guess(&place, error.as_bytes(), valid, findings)))
            }
        },
    }
}

fn unpack(place: &Place, bytes: &[u8], options: &ReadOptions) -> Result<Vec<u8>, Problem> {
    let limit = options.max_expanded_bytes.unwrap_or(MAX_EXPANDED_BYTES);
    let mut unpacked = Vec::new();
    let mut reader = MultiGzDecoder::new(bytes).take(limit.saturating_add(1));
    if let Err(error) = reader.read_to_end(&mut unpacked) {
        return Err(Problem::new(
            place.clone(),
            format!("the gzip data is broken: {error}"),
            "a whole gzip file",
            "fetch or pack the file again",
        ));
    }
    if unpacked.len() as u64 > limit {
        return Err(Problem::new(
            place.clone(),
            format!("the gzip data unpacks to more than {}", size(limit)),
            format!("at most {} unpacked", size(limit)),
            "unpack the file yourself: a plain file may have 512 MiB",
        ));
    }
    Ok(unpacked)
}

/// The line that holds a byte, from 1.
fn line_at(bytes: &[u8], at: usize) -> usize {
    bytes[..at].iter().filter(|&&byte| byte == b'\n').count() + 1
}

fn size(bytes: u64) -> String {
    const MIB: u64 = 1024 * 1024;
    if bytes >= MIB && bytes.is_multiple_of(MIB) {
        format!("{} MiB", bytes / MIB)
    } else {
        format!("{bytes} bytes")
    }
}

/// Whether almost every second byte, from `first`, is zero, as in UTF-16 text of Latin letters and digits.
fn looks_like_utf16(bytes: &[u8], first: usize) -> bool {
    let start = &bytes[..bytes.len().min(1000)];
    let zeros = start
        .iter()
        .skip(first)
        .step_by(2)
        .filter(|&&b| b == 0)
        .count();
    let others = start
        .iter()
        .skip(1 - first)
        .step_by(2)
        .filter(|&&b| b == 0)
        .count();
    start.len() >= 4 && zeros * 10 >= start.len() / 2 * 9 && others * 10 <= start.len() / 2
}

/// Bytes that are not UTF-8 and were not declared are read as Windows-1252, in which every byte is a letter.
fn guess(place: &Place, bytes: &[u8], bad: usize, findings: &mut Vec<Finding>) -> String {
    let line = line_at(bytes, bad);
    findings.push(
        Finding::new(
            Severity::Note,
            "the file is not UTF-8 and no encoding is declared",
            "read as windows-1252; only headings and units can be affected",
        )
        .at(&place.clone().at_line(line)),
    );
    WINDOWS_1252
        .decode_without_bom_handling(bytes)
        .0
        .into_owned()
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::io::Write;

    fn read(bytes: &[u8], options: &ReadOptions) -> (Result<String, String>, usize) {
        let mut findings = Vec::new();
        let text = text(&Arc::from("w.csv"), bytes, options, &mut findings);
        (
            text.map(Cow::into_owned).map_err(|p| p.found),
            findings.len(),
        )
    }

    fn gzip(bytes: &[u8]) -> Vec<u8> {
        let mut encoder = flate2::write::GzEncoder::new(Vec::new(), flate2::Compression::best());
        encoder.write_all(bytes).unwrap();
        encoder.finish().unwrap()
    }

    #[test]
    fn plain_marked_and_packed_text_reads_the_same() {
        let text = "time,temp (°C)\n";
        let marked = [b"\xef\xbb\xbf", text.as_bytes()].concat();
        let wide: Vec<u8> = std::iter::once(0xfeff)
            .chain(text.encode_utf16())
            .flat_map(u16::to_le_bytes)
            .collect();
        let options = ReadOptions::default();
        for bytes in [text.as_bytes(), &marked, &gzip(&marked), &wide] {
            assert_eq!(read(bytes, &options).0.as_deref(), Ok(text));
        }
    }

    #[test]
    fn bytes_that_are_not_utf8_are_read_as_windows_1252_and_said_so() {
        let (text, findings) = read(b"temp (\xb0C)", &ReadOptions::default());
        assert_eq!((text.as_deref(), findings), (Ok("temp (°C)"), 1));
        let declared = ReadOptions {
            encoding: Some("utf-8".to_owned()),
            ..Default::default()
        };
        assert_eq!(
            read(b"temp (\xb0C)", &declared).0,
            Err("the bytes are not UTF-8".to_owned())
        );
    }

    #[test]
    fn a_bomb_stops_at_the_limit() {
        let bomb = gzip(&vec![b'0'; 2_000_000]);
        let options = ReadOptions {
            max_expanded_bytes: Some(1_048_576),
            ..Default::default()
        };
        assert_eq!(
            read(&bomb, &options).0,
            Err("the gzip data unpacks to more than 1 MiB".to_owned())
        );
        assert!(read(&bomb, &ReadOptions::default()).0.is_ok());
    }
}
