//! Files as text, and what is wrong with JSON in plain words.

use crate::measure::quoted;

/// The text of a file: UTF-8 with or without a mark, else Latin-1.
///
/// # Errors
/// A sentence for a file that is text of another kind, or none.
pub fn text_of(bytes: &[u8]) -> Result<String, String> {
    const SAVE: &str = "save it as UTF-8 (in a spreadsheet, as “CSV UTF-8”)";
    if bytes.starts_with(&[0xff, 0xfe]) || bytes.starts_with(&[0xfe, 0xff]) {
        return Err(format!("The file is text in UTF-16: {SAVE}."));
    }
    if bytes.contains(&0) {
        return Err(format!(
            "The file is not plain text in UTF-8 or Latin-1: {SAVE}."
        ));
    }
    Ok(match core::str::from_utf8(bytes) {
        Ok(text) => without_mark(text).to_owned(),
        // Every byte is a Latin-1 character.
        Err(_) => bytes.iter().map(|&byte| char::from(byte)).collect(),
    })
}

/// The text without the byte-order mark some editors put before it.
pub(crate) fn without_mark(text: &str) -> &str {
    text.trim_start_matches('\u{feff}')
}

/// What is wrong with a JSON file and where, as the end of a sentence.
pub(crate) fn json_trouble(error: &serde_json::Error) -> String {
    let (line, column) = (error.line(), error.column());
    let told = error.to_string();
    let place = format!(" at line {line} column {column}");
    let what = in_plain_words(told.strip_suffix(&place).unwrap_or(&told));
    if line == 0 {
        what
    } else {
        format!("{what} (line {line}, column {column})")
    }
}

/// The commonest messages of the JSON reader in the user's words; any other as it is.
fn in_plain_words(told: &str) -> String {
    let name = |from: &str| quoted(from.split('`').nth(1).unwrap_or_default());
    if told.starts_with("EOF") {
        return "the file ends too early".to_owned();
    }
    for (begins, says) in [
        ("missing field", "is missing"),
        ("duplicate field", "is there twice"),
    ] {
        if told.starts_with(begins) {
            return format!("{} {says}", name(told));
        }
    }
    if told.starts_with("unknown field") {
        return format!("unknown field {}", name(told));
    }
    if told.starts_with("unknown variant") {
        // The word is found between the first backticks, the words that would do between the others.
        let known: Vec<&str> = told.split('`').skip(3).step_by(2).collect();
        return format!("expected {}, but found {}", known.join(" or "), name(told));
    }
    for begins in ["invalid type: ", "invalid value: "] {
        if let Some((found, expected)) = told
            .strip_prefix(begins)
            .and_then(|rest| rest.rsplit_once(", expected "))
        {
            return format!("expected {}, but found {}", wanted(expected), there(found));
        }
    }
    match told {
        "trailing comma" => "a comma stands before a closing bracket".to_owned(),
        "trailing characters" => "something follows after its end".to_owned(),
        "key must be a string" => "the name of a field must stand in quotes".to_owned(),
        "expected value" | "expected ident" => "no value stands there".to_owned(),
        "number out of range" => "a number is too large".to_owned(),
        "recursion limit exceeded" => "its brackets stand in each other too deeply".to_owned(),
        _ => match told.strip_prefix("expected ") {
            // "expected `,` or `}`"
            Some(rest) if rest.starts_with('`') => {
                let signs: Vec<String> = rest.split('`').skip(1).step_by(2).map(quoted).collect();
                format!("{} is missing", signs.join(" or "))
            }
            _ => told.to_owned(),
        },
    }
}

/// What would have been right.
fn wanted(expected: &str) -> &str {
    match expected {
        "f64" | "f32" => "a number",
        "u32" | "u64" => "a whole number from 0 on",
        "i32" | "i64" => "a whole number",
        "a string" => "text in quotes",
        "a boolean" => "true or false",
        "a sequence" => "a list in square brackets",
        "a map" => "fields in curly brackets",
        _ if expected.starts_with("struct ") || expected.contains("enum ") => {
            "fields in curly brackets"
        }
        _ if expected.starts_with("a Decimal") => "an amount such as \"12.50\"",
        _ => expected,
    }
}

/// What stands there instead.
fn there(found: &str) -> String {
    match found {
        "map" => "fields in curly brackets".to_owned(),
        "sequence" => "a list".to_owned(),
        "null" => "nothing (null)".to_owned(),
        _ => match found.split_once(' ') {
            Some(("string", text)) => quoted(text.trim_matches('"')),
            _ => found
                .split('`')
                .nth(1)
                .map_or_else(|| found.to_owned(), quoted),
        },
    }
}
