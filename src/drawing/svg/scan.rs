//! A first look at the text of a file, before anything is built from it.
//!
//! The XML reader is sound, but some of its work grows with the square of what a tag holds, so
//! what no drawing has is refused here, where one pass over the text finds it.

use super::{DEEPEST, MOST_BYTES};
use crate::measure::quoted;

/// Most attributes of one element.
const MOST_ATTRIBUTES: usize = 1_000;
/// Most namespaces that are declared at one place of the file, counted with all around it.
const MOST_NAMESPACES: usize = 100;

/// The next place of `wanted` from `from` on, and the end of it.
fn past(text: &str, from: usize, wanted: &str) -> Option<usize> {
    Some(from + text.get(from..)?.find(wanted)? + wanted.len())
}

/// Where a tag ends that begins at `from`, behind its bracket; quoted text may hold brackets.
fn tag_end(text: &str, from: usize) -> Option<usize> {
    let bytes = text.as_bytes();
    let mut at = from;
    loop {
        match bytes.get(at)? {
            b'>' => return Some(at + 1),
            quote @ (b'"' | b'\'') => {
                let close = bytes[at + 1..].iter().position(|byte| byte == quote)?;
                at += close + 2;
            }
            _ => at += 1,
        }
    }
}

/// How many attributes and how many declarations of namespaces a tag has.
fn attributes(tag: &str) -> (usize, usize) {
    let (mut all, mut spaces) = (0, 0);
    let mut rest = tag;
    while let Some((before, after)) = rest.split_once('=') {
        all += 1;
        let name = before.trim_end().rsplit(char::is_whitespace).next();
        spaces += usize::from(name.is_some_and(|name| name.starts_with("xmlns")));
        let value = after.trim_start();
        let quote = value.chars().next().filter(|c| matches!(c, '"' | '\''));
        // What is not quoted is not XML, and the reader will say so.
        let closed = quote.and_then(|quote| value[1..].split_once(quote));
        rest = closed.map_or(after, |(_, rest)| rest);
    }
    (all, spaces)
}

/// Refuses what is too much, before it is read.
pub(super) fn check(text: &str) -> Result<(), String> {
    if text.len() > MOST_BYTES {
        return Err(format!(
            "An SVG file must have at most {} MB, but this one has {:.1} MB.",
            MOST_BYTES / 1_000_000,
            // A length in bytes is far below what a double holds exactly.
            std::time::Duration::from_micros(text.len() as u64).as_secs_f64()
        ));
    }
    if text.trim().is_empty() {
        return Err("expected an SVG drawing, but the file is empty".to_owned());
    }
    let line = |at: usize| text[..at].matches('\n').count() + 1;
    // Of each open element, how many namespaces are declared in it and around it.
    let mut open: Vec<usize> = Vec::new();
    let mut at = 0;
    while let Some(begin) = text[at..].find('<').map(|found| at + found) {
        let tag = &text[begin..];
        let end = if tag.starts_with("<!--") {
            past(text, begin + 4, "-->")
        } else if tag.starts_with("<![CDATA[") {
            past(text, begin, "]]>")
        } else if tag.starts_with("<?") {
            past(text, begin, "?>")
        } else if tag.starts_with("<!") {
            let end = tag_end(text, begin);
            // Entities grow without bounds when they name each other, and drawings do not need them.
            if text[begin..end.unwrap_or(text.len())].contains('[') {
                return Err(format!(
                    "The file declares entities of its own at line {}, and those are not followed; \
                     save it as plain SVG.",
                    line(begin)
                ));
            }
            end
        } else {
            let end = tag_end(text, begin);
            let tag = &text[begin..end.unwrap_or(text.len())];
            if tag.starts_with("</") {
                open.pop();
            } else {
                let (all, spaces) = attributes(tag);
                let spaces = spaces + open.last().unwrap_or(&0);
                if all > MOST_ATTRIBUTES || spaces > MOST_NAMESPACES {
                    return Err(format!(
                        "The element at line {} has more than {MOST_ATTRIBUTES} attributes or \
                         {MOST_NAMESPACES} namespaces, and no drawing needs as many.",
                        line(begin)
                    ));
                }
                if !tag.ends_with("/>") {
                    open.push(spaces);
                }
                if open.len() > DEEPEST {
                    return Err(too_deep(line(begin)));
                }
            }
            end
        };
        // What does not end is broken, and the reader says so better.
        let Some(end) = end else { break };
        at = end;
    }
    Ok(())
}

/// The sentence for elements too far within each other.
pub(super) fn too_deep(line: usize) -> String {
    format!(
        "Elements must be at most {DEEPEST} deep within each other, but at line {line} they are \
         deeper; ungroup the drawing."
    )
}

/// The sentence for a file that is not XML.
pub(super) fn broken(error: &roxmltree::Error) -> String {
    use roxmltree::Error as E;
    let why = match error {
        E::UnexpectedCloseTag(open, close, _) => format!(
            "{} ends with {}",
            quoted(&format!("<{open}>")),
            quoted(&format!("</{close}>"))
        ),
        E::DuplicatedAttribute(name, _) => format!("{} is given twice", quoted(name)),
        E::UnknownNamespace(name, _) => format!("{} is not declared", quoted(name)),
        E::UnknownEntityReference(name, _) => {
            format!("{} is not declared", quoted(&format!("&{name};")))
        }
        E::NoRootNode => "it holds no element".to_owned(),
        E::UnclosedRootNode => "it breaks off before its end".to_owned(),
        E::NodesLimitReached | E::AttributesLimitReached | E::NamespacesLimitReached => {
            return "The file has more elements than any drawing, and is not read.".to_owned();
        }
        _ => "it is not whole XML".to_owned(),
    };
    let place = error.pos();
    match error {
        E::NoRootNode | E::UnclosedRootNode => format!("expected an SVG drawing, but {why}"),
        _ => format!(
            "expected an SVG drawing, but {why} (at line {}, character {})",
            place.row, place.col
        ),
    }
}
