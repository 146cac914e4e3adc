//! Style sheets, and what holds for one element.

use roxmltree::Node;
use simplecss::{AttributeOperator, PseudoClass, Selector};
use std::cell::Cell;

/// Most rules that are followed, a selector being one; drawings have hundreds.
const MOST_RULES: usize = 20_000;

/// One property set by a style.
#[derive(Clone, Copy)]
struct Declaration<'a> {
    name: &'a str,
    value: &'a str,
    important: bool,
}

struct Rule<'a> {
    selector: Selector<'a>,
    specificity: [u8; 3],
    declarations: std::rc::Rc<[Declaration<'a>]>,
}

/// The rules of all style sheets of a file, weakest first.
#[derive(Default)]
pub(super) struct Sheet<'a> {
    rules: Vec<Rule<'a>>,
    /// What of the sheets is not followed.
    pub(super) unread: Vec<String>,
}

/// Text without its comments, as the stretches between them.
pub(super) fn without_comments(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    let mut rest = text;
    while let Some((before, after)) = rest.split_once("/*") {
        out.push_str(before);
        out.push(' ');
        rest = after.split_once("*/").map_or("", |(_, after)| after);
    }
    out.push_str(rest);
    out
}

/// Where text outside of quotes and round brackets has one of these characters.
fn find_bare(text: &str, wanted: &[u8]) -> Option<usize> {
    let (mut quote, mut depth) = (None, 0_usize);
    let mut bytes = text.bytes().enumerate();
    while let Some((at, byte)) = bytes.next() {
        if byte == b'\\' {
            bytes.next();
        } else if quote.is_some() {
            quote = quote.filter(|&open| open != byte);
        } else {
            match byte {
                b'"' | b'\'' => quote = Some(byte),
                b'(' => depth += 1,
                b')' => depth = depth.saturating_sub(1),
                _ if depth == 0 && wanted.contains(&byte) => return Some(at),
                _ => {}
            }
        }
    }
    None
}

/// Text cut at a character outside of quotes and brackets.
fn cut(text: &str, wanted: u8) -> impl Iterator<Item = &str> {
    let mut rest = Some(text);
    std::iter::from_fn(move || {
        let text = rest.take()?;
        match find_bare(text, &[wanted]) {
            Some(at) => {
                rest = Some(&text[at + 1..]);
                Some(&text[..at])
            }
            None => Some(text),
        }
    })
}

fn declarations(block: &str) -> impl Iterator<Item = Declaration<'_>> {
    cut(block, b';').filter_map(|one| {
        let (name, value) = one.split_once(':')?;
        let value = value.trim();
        let (plain, important) = match value.rsplit_once('!') {
            Some((plain, word)) if word.trim().eq_ignore_ascii_case("important") => {
                (plain.trim_end(), true)
            }
            _ => (value, false),
        };
        Some(Declaration {
            name: name.trim(),
            value: plain,
            important,
        })
    })
}

/// The length of a block behind its opening bracket, brackets within counted.
fn block(text: &str) -> usize {
    let (mut at, mut depth) = (0, 0_usize);
    while let Some(found) = find_bare(&text[at..], b"{}") {
        at += found;
        match (text.as_bytes()[at], depth) {
            (b'{', _) => depth += 1,
            (_, 0) => return at,
            _ => depth -= 1,
        }
        at += 1;
    }
    text.len()
}

impl<'a> Sheet<'a> {
    /// The rules of a style sheet without comments.
    pub(super) fn read(text: &'a str) -> Self {
        let mut sheet = Self::default();
        let mut rest = text;
        loop {
            if sheet.rules.len() + sheet.unread.len() > MOST_RULES {
                sheet.rules.truncate(MOST_RULES);
                sheet
                    .unread
                    .push(format!("what is behind {MOST_RULES} rules"));
                break;
            }
            // What older pages hid their style sheets with.
            rest = rest.trim_start();
            rest = rest.strip_prefix("<!--").unwrap_or(rest);
            rest = rest.strip_prefix("-->").unwrap_or(rest).trim_start();
            let Some(end) = find_bare(rest, b"{;") else {
                if !rest.is_empty() {
                    sheet.unread.push(super::walk::shown(rest));
                }
                break;
            };
            let (head, after) = rest.split_at(end);
            let (bracket, after) = after.split_at(1);
            let rule = head.trim_end();
            if bracket == ";" {
                if !harmless(rule) {
                    sheet.unread.push(super::walk::shown(rule));
                }
                rest = after;
                continue;
            }
            let inside = &after[..block(after)];
            rest = after.get(inside.len() + 1..).unwrap_or_default();
            if rule.starts_with('@') {
                if !harmless(rule) {
                    sheet.unread.push(super::walk::shown(rule));
                }
            } else {
                sheet.rule(rule, inside);
            }
        }
        // Stable: of rules alike in weight the later one is the stronger.
        sheet.rules.sort_by_key(|rule| rule.specificity);
        sheet
    }

    fn rule(&mut self, selectors: &'a str, inside: &'a str) {
        let declarations: std::rc::Rc<[_]> = declarations(inside).collect();
        // One more than may be, so that it shows that there are more.
        for text in cut(selectors, b',').take(MOST_RULES + 1) {
            let text = text.trim();
            // The parser of selectors stops with a fault at one that begins between two elements.
            let begins = text
                .chars()
                .next()
                .is_some_and(|c| !matches!(c, '>' | '+' | '~' | ',' | '{'));
            match begins.then(|| Selector::parse(text)).flatten() {
                Some(selector) => self.rules.push(Rule {
                    specificity: selector.specificity(),
                    selector,
                    declarations: declarations.clone(),
                }),
                None => self.unread.push(super::walk::shown(text)),
            }
        }
    }
}

/// Rules that do not touch what is drawn.
fn harmless(rule: &str) -> bool {
    ["@charset", "@namespace", "@font-face"]
        .iter()
        .any(|name| rule.starts_with(name))
        || rule.is_empty()
}

/// What the styles and attributes of one element say.
pub(super) struct Style<'a, 'i> {
    node: Node<'a, 'i>,
    /// Weakest first.
    declarations: Vec<Declaration<'a>>,
}

impl<'a, 'i> Style<'a, 'i> {
    /// Collects what holds for an element. `left` is the work that may still be done.
    pub(super) fn of(node: Node<'a, 'i>, sheet: &'a Sheet<'_>, left: &Cell<u64>) -> Self {
        let mut all = Vec::new();
        for rule in &sheet.rules {
            spend(left, 1);
            if left.get() == 0 {
                break;
            }
            if rule.selector.matches(&Matched { node, left }) {
                spend(left, 4 * rule.declarations.len() as u64);
                all.extend_from_slice(&rule.declarations);
            }
        }
        all.extend(declarations(node.attribute("style").unwrap_or_default()));
        // What is important stands above all that is not, and keeps its order.
        all.sort_by_key(|declaration| declaration.important);
        Self {
            node,
            declarations: all,
        }
    }

    /// A property from the styles alone.
    pub(super) fn styled(&self, name: &str) -> Option<&'a str> {
        let mut strongest_first = self.declarations.iter().rev();
        let found = strongest_first.find(|one| one.name.eq_ignore_ascii_case(name))?;
        Some(found.value)
    }

    /// A property from the styles or, weaker, from the attribute of its name.
    pub(super) fn get(&self, name: &str) -> Option<&'a str> {
        self.styled(name)
            .or_else(|| self.node.attribute(name))
            .map(str::trim)
    }
}

/// Takes work from what may still be done, down to nothing.
pub(super) fn spend(left: &Cell<u64>, work: u64) {
    left.set(left.get().saturating_sub(work));
}

/// An element as selectors see it; each look costs, because selectors of many steps look back and
/// forth.
struct Matched<'a, 'i, 'w> {
    node: Node<'a, 'i>,
    left: &'w Cell<u64>,
}

impl simplecss::Element for Matched<'_, '_, '_> {
    fn parent_element(&self) -> Option<Self> {
        spend(self.left, 4);
        let node = self.node.parent_element()?;
        (self.left.get() > 0).then_some(Self { node, ..*self })
    }

    fn prev_sibling_element(&self) -> Option<Self> {
        spend(self.left, 4);
        let node = self.node.prev_sibling_element()?;
        (self.left.get() > 0).then_some(Self { node, ..*self })
    }

    fn has_local_name(&self, name: &str) -> bool {
        self.node.tag_name().name() == name
    }

    fn attribute_matches(&self, name: &str, operator: AttributeOperator<'_>) -> bool {
        // The attribute is searched among all of them.
        spend(self.left, self.node.attributes().len() as u64 / 16);
        let Some(value) = self.node.attribute(name) else {
            return false;
        };
        spend(self.left, value.len() as u64 / 8);
        match operator {
            // Any white space parts the names of classes.
            AttributeOperator::Contains(wanted) => {
                value.split_ascii_whitespace().any(|word| word == wanted)
            }
            other => other.matches(value),
        }
    }

    fn pseudo_class_matches(&self, class: PseudoClass<'_>) -> bool {
        match class {
            PseudoClass::FirstChild => self.node.prev_sibling_element().is_none(),
            _ => false,
        }
    }
}
