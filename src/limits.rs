//! How large an input may be: far above anything real, far below what would exhaust a machine.
//!
//! Tables of tables end at 80 levels, which is the limit of the TOML library.

use std::fs::File;
use std::io::Read;
use std::path::Path;

const MIB: u64 = 1024 * 1024;

/// Largest brief, machine sheet, tariff or file of meter readings, bytes.
pub const LARGEST_TEXT: u64 = 4 * MIB;
/// Largest file of hourly data, bytes: thirty years of minutes would be smaller.
pub const LARGEST_DATA: u64 = 512 * MIB;
/// Longest line of a file of data, bytes: thousands of columns.
pub const LONGEST_LINE: usize = 64 * 1024;
/// Most lines of a file of data: thirty years of minutes.
pub const MOST_LINES: usize = 20_000_000;

/// Reads a file of at most a number of bytes.
///
/// Stops after them, so that a device or a pipe without end is refused like a file that is too large.
///
/// # Errors
/// What was found and what is allowed.
pub fn read_at_most(path: &Path, largest: u64) -> Result<Vec<u8>, Beyond> {
    let unreadable = |error: std::io::Error| Beyond {
        line: None,
        found: format!("cannot be read: {error}"),
        allowed: "a readable file".to_owned(),
    };
    let file = File::open(path).map_err(unreadable)?;
    let mut bytes = Vec::new();
    file.take(largest + 1)
        .read_to_end(&mut bytes)
        .map_err(unreadable)?;
    if bytes.len() as u64 > largest {
        return Err(Beyond {
            line: None,
            found: format!("more than {largest} bytes"),
            allowed: format!("at most {} MiB", largest / MIB),
        });
    }
    Ok(bytes)
}

/// An input beyond a limit, or one that cannot be read.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Beyond {
    /// Line from 1, where it is one.
    pub line: Option<usize>,
    /// What was found.
    pub found: String,
    /// What is allowed.
    pub allowed: String,
}

/// Checks the lines of a file of data.
///
/// # Errors
/// The first line longer than [`LONGEST_LINE`], or that there are more than [`MOST_LINES`].
pub fn check_lines(text: &str) -> Result<(), Beyond> {
    let bytes = text.as_bytes();
    // Carriage returns end lines only where nothing else does.
    let end = if bytes.contains(&b'\n') { b'\n' } else { b'\r' };
    let lines = |bytes: &[u8]| bytes.iter().filter(|&&byte| byte == end).count() + 1;
    // From line end to line end in the longest strides that are allowed, so that hardly a byte of a real file is looked at.
    let mut rest = bytes;
    while let Some(stride) = rest.get(..=LONGEST_LINE) {
        let Some(at) = stride.iter().rposition(|&byte| byte == end) else {
            let length = rest.iter().position(|&byte| byte == end);
            return Err(Beyond {
                line: Some(lines(&bytes[..bytes.len() - rest.len()])),
                found: format!("a line of {} bytes", length.unwrap_or(rest.len())),
                allowed: format!("lines of at most {} KiB", LONGEST_LINE / 1024),
            });
        };
        rest = &rest[at + 1..];
    }
    // A text has no more lines than bytes, but for its last.
    if bytes.len() >= MOST_LINES && lines(bytes) > MOST_LINES {
        return Err(Beyond {
            line: Some(MOST_LINES + 1),
            found: format!("more than {MOST_LINES} lines"),
            allowed: "at most 20 million lines, thirty years of minutes".to_owned(),
        });
    }
    Ok(())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn lines_at_the_limits_pass_and_beyond_are_refused() {
        let longest = "a".repeat(LONGEST_LINE);
        assert_eq!(check_lines(&format!("{longest}\n{longest}")), Ok(()));
        assert_eq!(
            check_lines(&format!("x\n{longest}b")).unwrap_err().line,
            Some(2)
        );
        // Line ends of two bytes are one end, and those of old files are ends too.
        let two = format!("x\r\ny\r\n{longest}b\r\n");
        assert_eq!(check_lines(&two).unwrap_err().line, Some(3));
        assert_eq!(check_lines(&format!("{longest}\r{longest}")), Ok(()));
        assert_eq!(check_lines(&"\n".repeat(MOST_LINES - 1)), Ok(()));
        assert!(check_lines(&"\n".repeat(MOST_LINES)).is_err());
    }

    #[test]
    fn a_file_at_the_limit_is_read_and_a_larger_one_refused() {
        let folder = tempfile::tempdir().unwrap();
        let path = folder.path().join("file");
        std::fs::write(&path, "12345").unwrap();
        assert_eq!(read_at_most(&path, 5).unwrap(), b"12345");
        assert!(read_at_most(&path, 4).is_err());
        let device = Path::new("/dev/zero");
        assert!(!device.exists() || read_at_most(device, 1000).is_err());
    }
}
