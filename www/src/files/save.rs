//! Saving what is on the desk as a file.

use tubewright::{Book, Job, book, job};
use wasm_bindgen::JsCast;

/// A file to be saved.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Saved {
    /// Its name.
    pub name: String,
    /// Its media type.
    pub media: &'static str,
    /// What is in it.
    pub text: String,
}

impl Saved {
    /// The job.
    pub fn job(open: &Job) -> Self {
        Self {
            name: file_name(&open.name, "job", "json"),
            media: "application/json",
            text: job::write(open),
        }
    }

    /// The whole book.
    pub fn book(open: &Book) -> Self {
        Self {
            name: file_name(&open.name, "book", "json"),
            media: "application/json",
            text: book::write(open),
        }
    }

    /// The supplies of a book as a list.
    pub fn supplies(open: &Book) -> Self {
        Self {
            name: file_name(&open.name, "supplies", "csv"),
            media: "text/csv",
            text: book::write_supplies(&open.supplies),
        }
    }

    /// The tube types of a book as a list.
    pub fn tubes(open: &Book) -> Self {
        Self {
            name: file_name(&open.name, "tubes", "csv"),
            media: "text/csv",
            text: book::write_tubes(&open.tubes),
        }
    }

    /// A text that was kept and could not be read, as it is.
    pub fn as_kept(name: &str, text: String) -> Self {
        Self {
            name: format!("{name}.json"),
            media: "application/json",
            text,
        }
    }
}

/// A name any file system takes: letters, digits, and dashes for all else.
fn file_name(name: &str, what: &str, ending: &str) -> String {
    let mut plain = String::new();
    for c in name.chars().take(60) {
        if c.is_alphanumeric() {
            plain.extend(c.to_lowercase());
        } else if !plain.ends_with('-') && !plain.is_empty() {
            plain.push('-');
        }
    }
    let plain = plain.trim_end_matches('-');
    if plain.is_empty() {
        format!("{what}.{ending}")
    } else {
        format!("{plain}.{what}.{ending}")
    }
}

/// Hands a file to the browser to be saved.
///
/// # Errors
/// A sentence when the browser refuses.
pub fn save(file: &Saved) -> Result<(), String> {
    hand_over(file).map_err(|_| format!("The browser refused to save {}.", file.name))
}

fn hand_over(file: &Saved) -> Result<(), wasm_bindgen::JsValue> {
    let document = web_sys::window().and_then(|window| window.document());
    let document = document.ok_or(wasm_bindgen::JsValue::UNDEFINED)?;
    let parts = js_sys::Array::of1(&file.text.as_str().into());
    let kind = web_sys::BlobPropertyBag::new();
    kind.set_type(file.media);
    let blob = web_sys::Blob::new_with_str_sequence_and_options(&parts, &kind)?;
    let address = web_sys::Url::create_object_url_with_blob(&blob)?;
    let link = document
        .create_element("a")?
        .dyn_into::<web_sys::HtmlAnchorElement>()?;
    link.set_href(&address);
    link.set_download(&file.name);
    link.click();
    // Some browsers take hold of the data only a moment after the click.
    leptos::prelude::set_timeout(
        move || {
            let _ = web_sys::Url::revoke_object_url(&address);
        },
        core::time::Duration::from_mins(1),
    );
    Ok(())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn file_names_are_plain() {
        assert_eq!(
            file_name("Fennel & Fig, front", "job", "json"),
            "fennel-fig-front.job.json"
        );
        assert_eq!(file_name("../../etc", "job", "json"), "etc.job.json");
        assert_eq!(file_name("Ωμέγα 2", "book", "json"), "ωμέγα-2.book.json");
        assert_eq!(file_name("…", "tubes", "csv"), "tubes.csv");
    }
}
