//! The pairs of lines a DXF file is made of: a group code, then its value.

use crate::measure::quoted;

/// No coordinate of artwork is larger; beyond it a length would lose its digits.
pub(super) const LARGEST: f64 = 1e9;

/// A code with its value.
#[derive(Clone, Copy, Debug)]
pub(super) struct Group<'a> {
    pub(super) code: i32,
    /// Without blanks around it.
    pub(super) value: &'a [u8],
    /// The line of the value, from 1.
    pub(super) line: usize,
}

impl Group<'_> {
    /// The value as text. Newer files are UTF-8; in what is not, each byte is a letter of Latin-1:
    /// a wrong letter in the name of a layer is better than a file that is not read.
    pub(super) fn text(&self) -> String {
        text(self.value)
    }

    /// The value as a figure, or why it is none.
    pub(super) fn number(&self) -> Result<f64, String> {
        let text = self.text();
        match text.parse::<f64>() {
            Ok(number) if number.abs() <= LARGEST => Ok(number),
            Ok(number) if number.is_nan() => Err(self.is_no("number")),
            Ok(_) => Err(format!(
                "{} in line {} is too large",
                quoted(&text),
                self.line
            )),
            Err(_) => Err(self.is_no("number")),
        }
    }

    /// The value as a whole number, or why it is none.
    pub(super) fn whole(&self) -> Result<i64, String> {
        self.text().parse().map_err(|_| self.is_no("whole number"))
    }

    fn is_no(&self, what: &str) -> String {
        format!(
            "{} in line {} is no {what}",
            quoted(&self.text()),
            self.line
        )
    }
}

/// Bytes of a file as text.
pub(super) fn text(bytes: &[u8]) -> String {
    match std::str::from_utf8(bytes) {
        Ok(text) => text.to_owned(),
        Err(_) => bytes.iter().copied().map(char::from).collect(),
    }
}

/// Reads group after group.
pub(super) struct Groups<'a> {
    rest: &'a [u8],
    line: usize,
}

impl<'a> Groups<'a> {
    pub(super) fn new(bytes: &'a [u8]) -> Self {
        Self {
            rest: bytes.strip_prefix(b"\xEF\xBB\xBF").unwrap_or(bytes),
            line: 0,
        }
    }

    /// How many lines have been read.
    pub(super) fn lines(&self) -> usize {
        self.line
    }

    /// The next group; nothing at the end of the file, or where a code has no value any more.
    ///
    /// # Errors
    /// A line that should be a code and is no number: from there on codes and values may have
    /// changed places, and nothing behind it could be trusted.
    pub(super) fn next(&mut self) -> Result<Option<Group<'a>>, String> {
        loop {
            // Blank lines and the mark that old systems put at the end of a file.
            if self.rest.iter().all(|&byte| byte <= b' ') {
                return Ok(None);
            }
            let Some(code) = self.line() else {
                return Ok(None);
            };
            let Some(code) = std::str::from_utf8(code)
                .ok()
                .and_then(|code| code.parse().ok())
            else {
                return Err(format!(
                    "Line {} should be a group code and is {}: the file is damaged, or no ASCII \
                     DXF.",
                    self.line,
                    quoted(&text(code))
                ));
            };
            let Some(value) = self.line() else {
                return Ok(None);
            };
            // 999 is a remark.
            if code != 999 {
                return Ok(Some(Group {
                    code,
                    value,
                    line: self.line,
                }));
            }
        }
    }

    /// The next line without blanks around it. A line ends with LF, CR LF or CR.
    fn line(&mut self) -> Option<&'a [u8]> {
        if self.rest.is_empty() {
            return None;
        }
        self.line += 1;
        let end = self.rest.iter().position(|byte| b"\r\n".contains(byte));
        let end = end.unwrap_or(self.rest.len());
        let (line, rest) = self.rest.split_at(end);
        let after = if rest.starts_with(b"\r\n") { 2 } else { 1 };
        self.rest = rest.get(after..).unwrap_or_default();
        Some(line.trim_ascii())
    }
}
