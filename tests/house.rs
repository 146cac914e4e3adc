//! The rules of the house that no compiler holds, each failing with file, line and what is wrong.
//!
//! What a rule is for stands in DEVELOPERS.md. A rule that has to change changes there and here in
//! one commit.

#![allow(
    clippy::disallowed_methods,
    reason = "the ban is for the core, which reads no files; this test reads the repository"
)]

use std::collections::{BTreeMap, BTreeSet};
use std::fs;
use std::path::{Path, PathBuf};

const MAP: &str = "DEVELOPERS.md";
const README: &str = "README.md";

fn root() -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR"))
}

fn text(file: &str) -> String {
    fs::read_to_string(root().join(file)).unwrap_or_else(|why| panic!("{file}: {why}"))
}

/// Fails with everything that breaks the rule, not only with the first of it.
fn hold(rule: &str, broken: &[String]) {
    assert!(broken.is_empty(), "{rule}:\n  {}", broken.join("\n  "));
}

/// All files under a folder with this ending, as paths from the root, in order.
fn files(folder: &str, ending: &str) -> Vec<String> {
    let (mut found, mut open) = (Vec::new(), vec![folder.to_owned()]);
    while let Some(folder) = open.pop() {
        for entry in fs::read_dir(root().join(&folder)).expect(&folder) {
            let entry = entry.expect(&folder);
            let path = format!("{folder}/{}", entry.file_name().to_string_lossy());
            if entry.path().is_dir() {
                open.push(path);
            } else if path.ends_with(ending) {
                found.push(path);
            }
        }
    }
    assert!(
        !found.is_empty(),
        "{folder}: a rule that looks at no file holds nothing"
    );
    found.sort();
    found
}

/// All Rust files of the core, the page, the commands and their tests.
fn sources() -> Vec<String> {
    [
        "src",
        "www/src",
        "www/tests",
        "xtask/src",
        "tests",
        "benches",
    ]
    .iter()
    .flat_map(|folder| files(folder, ".rs"))
    .collect()
}

/// Names of the rooms in a folder of sources: its folders and its files, but for the front page.
fn rooms(folder: &str) -> BTreeSet<String> {
    let names = fs::read_dir(root().join(folder)).expect(folder);
    let names = names.map(|entry| entry.expect(folder).file_name());
    names
        .map(|name| name.to_string_lossy().trim_end_matches(".rs").to_owned())
        .filter(|name| !matches!(name.as_str(), "lib" | "main"))
        .collect()
}

/// Number of the line, from 1, that a place in a text is on.
fn line_at(text: &str, at: usize) -> usize {
    text[..at].matches('\n').count() + 1
}

/// Lines with their numbers, from 1.
fn numbered(text: &str) -> impl Iterator<Item = (usize, &str)> {
    (1..).zip(text.lines())
}

// Reading Rust.

fn in_word(c: char) -> bool {
    c.is_alphanumeric() || c == '_'
}

/// The word a text begins with; empty where it begins with something else.
fn word(text: &str) -> &str {
    let end = text.find(|c| !in_word(c)).unwrap_or(text.len());
    &text[..end]
}

/// How long the comment, string or character is that a source begins with; 0 where it begins with
/// code.
fn not_code(source: &str) -> usize {
    let up_to = |end: &str, from: usize| {
        source[from..]
            .find(end)
            .map_or(source.len(), |at| from + at + end.len())
    };
    if source.starts_with("//") {
        return source.find('\n').unwrap_or(source.len());
    }
    if source.starts_with("/*") {
        return up_to("*/", 2);
    }
    let raw = source.strip_prefix('b').unwrap_or(source);
    if let Some(hashes) = raw.strip_prefix('r') {
        let count = hashes.len() - hashes.trim_start_matches('#').len();
        if hashes[count..].starts_with('"') {
            let begins = source.len() - hashes.len() + count + 1;
            return up_to(&format!("\"{}", "#".repeat(count)), begins);
        }
    }
    let quote = source.chars().next().filter(|c| matches!(c, '"' | '\''));
    let Some(quote) = quote else { return 0 };
    let mut inside = source.char_indices().skip(1);
    let mut length = 0;
    while let Some((at, c)) = inside.next() {
        length += 1;
        if c == '\\' {
            inside.next();
        } else if c == quote {
            return at + 1;
        } else if quote == '\'' && length > 1 {
            // A lifetime, which nothing closes.
            return 0;
        }
    }
    source.len()
}

/// A source with comments and strings blanked; every line keeps its number.
fn code(source: &str) -> String {
    let (mut out, mut at) = (String::with_capacity(source.len()), 0);
    while let Some(c) = source[at..].chars().next() {
        let skip = match c {
            'r' | 'b' if out.ends_with(in_word) => 0,
            _ => not_code(&source[at..]),
        };
        if skip == 0 {
            out.push(c);
            at += c.len_utf8();
        } else {
            out.push(' ');
            out.extend(source[at..at + skip].chars().filter(|&c| c == '\n'));
            at += skip;
        }
    }
    out
}

/// Code with its test modules blanked. As rustfmt lays them out, they end at the first line that
/// is only a closing brace.
fn without_tests(code: &str) -> String {
    let mut inside = false;
    let mut out = String::with_capacity(code.len());
    for line in code.lines() {
        inside |= line == "#[cfg(test)]";
        if !inside {
            out.push_str(line);
        }
        out.push('\n');
        inside &= line != "}" && !line.ends_with(';') || line.starts_with(' ');
    }
    out
}

/// The names that code takes from the root of its crate, each with its place in the code. `depth`
/// is how many times `super::` leads there.
fn taken_from_root(code: &str, depth: usize) -> Vec<(usize, String)> {
    let mut taken = Vec::new();
    for (at, _) in code
        .match_indices("crate::")
        .chain(code.match_indices("super::"))
    {
        if code[..at].ends_with(|c| in_word(c) || c == ':') {
            continue;
        }
        let path = &code[at..];
        let above = path.trim_start_matches("super::");
        let rest = match path.strip_prefix("crate::") {
            Some(rest) => rest,
            None if path.len() - above.len() >= depth * "super::".len() => above,
            None => continue,
        };
        match rest.strip_prefix('{') {
            Some(list) => taken.extend(heads(list).map(|head| (at, head))),
            None => taken.push((at, word(rest).to_owned())),
        }
    }
    taken
}

/// The first words of the items of a list in braces, from behind its opening brace.
fn heads(list: &str) -> impl Iterator<Item = String> {
    let (mut open, mut heads) = (1, vec![String::new()]);
    for c in list.chars() {
        match c {
            '{' => open += 1,
            '}' => open -= 1,
            ',' if open == 1 => {
                heads.push(String::new());
                continue;
            }
            _ => {}
        }
        if open == 0 {
            break;
        }
        if let Some(head) = heads.last_mut() {
            head.push(c);
        }
    }
    heads
        .into_iter()
        .map(|head| word(head.trim_start()).to_owned())
        .filter(|head| !head.is_empty())
}

/// The room of a file of the core, and how deep in its folder the file is.
fn room_of(file: &str) -> (&str, usize) {
    let inside = file.trim_start_matches("src/").trim_end_matches(".rs");
    let inside = inside.trim_end_matches("/mod");
    (word(inside), inside.split('/').count())
}

// Reading the map.

/// Names of rooms by the room that may use them, in the order of the map, with the line of each.
type Arrows = Vec<(String, usize, BTreeSet<String>)>;

fn arrows() -> Arrows {
    let map = text(MAP);
    numbered(&map)
        .skip_while(|(_, line)| *line != "```arrows")
        .skip(1)
        .take_while(|(_, line)| *line != "```")
        .map(|(number, line)| {
            let (from, to) = line
                .split_once(" -> ")
                .unwrap_or_else(|| panic!("{MAP}:{number}: expected “room -> rooms”: {line}"));
            let to = to.split(", ").filter(|room| *room != "nothing");
            (from.to_owned(), number, to.map(str::to_owned).collect())
        })
        .collect()
}

/// What stands between backticks outside of fenced blocks, word by word, with its line.
fn quoted_words(text: &str) -> Vec<(usize, &str)> {
    let mut fenced = false;
    let mut words = Vec::new();
    for (number, line) in numbered(text) {
        if line.trim_start().starts_with("```") {
            fenced = !fenced;
        } else if !fenced {
            let spans = line.split('`').skip(1).step_by(2);
            words.extend(
                spans
                    .flat_map(str::split_whitespace)
                    .map(|word| (number, word)),
            );
        }
    }
    words
}

/// What a text links to or shows as a picture, with its line.
fn links(text: &str) -> Vec<(usize, &str)> {
    numbered(text)
        .flat_map(|(number, line)| {
            let targets = line.split("](").skip(1);
            targets.filter_map(move |rest| Some((number, rest.split_once(')')?.0)))
        })
        .filter(|(_, target)| !target.starts_with('#') && !target.contains("://"))
        // The pictures are taken from the built page; until there are any there is no folder.
        .filter(|(_, target)| !target.starts_with("docs/") || root().join("docs").exists())
        .collect()
}

/// Endings of names that are meant as files of the repository.
const ENDINGS: [&str; 11] = [
    "rs",
    "md",
    "toml",
    "lock",
    "json",
    "csv",
    "html",
    "css",
    "js",
    "jhf",
    "webmanifest",
];

/// Whether a word is meant as a path of the repository that is there before anything is built.
fn is_path(word: &str) -> bool {
    let plain = |c: char| in_word(c) || matches!(c, '.' | '/' | '-');
    let ending = word.rsplit_once('.').map_or("", |(_, ending)| ending);
    let built = ["dist", "target"].contains(&word.split('/').next().unwrap_or_default());
    let meant = word.contains('/') || ENDINGS.contains(&ending);
    meant && !built && word.chars().all(plain) && !word.starts_with(['/', '-'])
}

// The rules.

#[test]
fn every_source_begins_with_what_it_is() {
    let broken: Vec<String> = sources()
        .into_iter()
        .filter(|file| {
            let first = text(file);
            let first = first.lines().next().unwrap_or_default();
            first
                .strip_prefix("//! ")
                .is_none_or(|says| says.len() < 10)
        })
        .map(|file| format!("{file}:1: no `//!` line saying what it is"))
        .collect();
    hold("Every source begins with what it is", &broken);
}

#[test]
fn rooms_use_only_the_rooms_the_map_allows() {
    let arrows = arrows();
    let mut used: BTreeMap<&str, BTreeSet<String>> = BTreeMap::new();
    let mut broken = Vec::new();
    let rooms = rooms("src");
    for file in files("src", ".rs") {
        let (room, depth) = room_of(&file);
        if room == "lib" {
            continue;
        }
        let code = without_tests(&code(&text(&file)));
        for (at, name) in taken_from_root(&code, depth) {
            let line = line_at(&code, at);
            if name == room {
                continue;
            }
            if !rooms.contains(&name) {
                broken.push(format!(
                    "{file}:{line}: takes “{name}” from the front page; say which room it is of"
                ));
                continue;
            }
            match arrows.iter().find(|(from, ..)| from == room) {
                Some((from, _, to)) if to.contains(&name) => {
                    used.entry(from).or_default().insert(name);
                }
                _ => broken.push(format!(
                    "{file}:{line}: {room} -> {name} is no arrow of {MAP}"
                )),
            }
        }
    }
    for (from, line, to) in &arrows {
        let used = used.get(from.as_str());
        for to in to
            .iter()
            .filter(|to| !used.is_some_and(|used| used.contains(*to)))
        {
            broken.push(format!(
                "{MAP}:{line}: {from} -> {to} is allowed and nobody uses it"
            ));
        }
    }
    hold("Rooms use only the rooms the map allows", &broken);
}

#[test]
fn arrows_point_one_way() {
    let (mut above, mut broken) = (BTreeSet::new(), Vec::new());
    for (from, line, to) in arrows() {
        for to in to.difference(&above) {
            broken.push(format!(
                "{MAP}:{line}: {from} -> {to} does not point to a room above"
            ));
        }
        if !above.insert(from.clone()) {
            broken.push(format!("{MAP}:{line}: {from} has two lines"));
        }
    }
    for room in rooms("src").symmetric_difference(&above) {
        broken.push(format!(
            "{MAP}: {room} is in src/ or among the arrows, not in both"
        ));
    }
    hold("Arrows point to rooms above, one line a room", &broken);
}

#[test]
fn every_path_in_the_readme_and_the_map_exists() {
    let mut broken = Vec::new();
    for file in [README, MAP] {
        let text = text(file);
        let words = quoted_words(&text)
            .into_iter()
            .map(|(line, word)| (line, word.trim_end_matches([',', '.'])))
            .filter(|(_, word)| is_path(word));
        let named: Vec<(usize, &str)> = words.chain(links(&text)).collect();
        assert!(!named.is_empty(), "{file}: names no path");
        for (line, path) in named {
            if !root().join(path).exists() {
                broken.push(format!("{file}:{line}: there is no {path}"));
            }
        }
    }
    hold("Every path in the README and the map exists", &broken);
}

#[test]
fn every_room_is_on_its_front_page_and_on_the_map() {
    let map = text(MAP);
    let mut broken = Vec::new();
    for folder in ["src", "www/src"] {
        let front = text(&format!("{folder}/lib.rs"));
        for room in rooms(folder) {
            let told = |line: &str| {
                line.starts_with("//! | [")
                    && line.split('|').nth(1).is_some_and(|names| {
                        names.contains(&format!("[`{room}`]"))
                            || names.contains(&format!("[`{room}()`]"))
                    })
            };
            if !front.lines().any(told) {
                broken.push(format!("{folder}/lib.rs: its table does not name {room}"));
            }
            let named = [
                format!("`{folder}/{room}/`"),
                format!("`{folder}/{room}.rs`"),
            ];
            if !named.iter().any(|named| map.contains(named)) {
                broken.push(format!("{MAP}: does not name {folder}/{room}"));
            }
        }
    }
    hold("Every room is on its front page and on the map", &broken);
}

#[test]
fn only_what_is_kept_can_be_written_down() {
    let mut broken = Vec::new();
    for file in files("src", ".rs") {
        let (room, _) = room_of(&file);
        let words: &[&str] = match room {
            "book" | "job" => &[],
            "rules" => &["serde_json"],
            _ => &["serde", "serde_json", "Serialize", "Deserialize"],
        };
        for (line, code) in numbered(&code(&text(&file))) {
            let mut said = code.split(|c| !in_word(c));
            if let Some(word) = said.find(|word| words.contains(word)) {
                broken.push(format!("{file}:{line}: {word} in {room}"));
            }
        }
    }
    hold(
        "Only book, job and rules are serialisable, only book and job read JSON",
        &broken,
    );
}

#[test]
fn one_wasm_bindgen_for_the_page_and_the_bundler() {
    let lock = text("Cargo.lock");
    let versions = |package: &str| -> Vec<&str> {
        lock.split("[[package]]")
            .filter(|entry| entry.contains(&format!("\nname = \"{package}\"\n")))
            .filter_map(|entry| entry.split("version = \"").nth(1)?.split('"').next())
            .collect()
    };
    let page = versions("wasm-bindgen");
    assert_eq!(page.len(), 1, "Cargo.lock: wasm-bindgen once, not {page:?}");
    assert_eq!(
        versions("wasm-bindgen-cli-support"),
        page,
        "Cargo.lock: the bundler's version (left) must be the page's wasm-bindgen (right)"
    );
}

#[test]
fn nothing_is_left_to_do_or_passed_over_in_the_code() {
    let mut broken = Vec::new();
    for file in sources() {
        for (line, code) in numbered(&code(&text(&file))) {
            for left in ["todo!", "unimplemented!", "dbg!", "#[ignore"] {
                if code.contains(left) {
                    broken.push(format!("{file}:{line}: {left}"));
                }
            }
        }
    }
    hold(
        "Code holds no unfinished part and no test passed over",
        &broken,
    );
}

/// What a browser may load for the page: its own files.
const ORIGINS: [&str; 3] = ["'none'", "'self'", "'wasm-unsafe-eval'"];

#[test]
fn the_page_allows_itself_only_its_own_files() {
    let page = text("www/index.html");
    let policies: Vec<&str> = page
        .split("http-equiv=\"Content-Security-Policy\" content=\"")
        .skip(1)
        .filter_map(|rest| rest.split('"').next())
        .collect();
    let [policy] = policies[..] else {
        panic!("www/index.html: wanted one policy, found {policies:?}");
    };
    let mut broken = Vec::new();
    for directive in policy.split(';') {
        let mut words = directive.split_whitespace();
        let name = words.next().unwrap_or_default();
        for origin in words.filter(|origin| !ORIGINS.contains(origin)) {
            broken.push(format!("www/index.html: {name} allows {origin}"));
        }
    }
    for wanted in [
        "default-src 'none'",
        "base-uri 'none'",
        "form-action 'none'",
    ] {
        if !policy
            .split(';')
            .any(|directive| directive.trim() == wanted)
        {
            broken.push(format!("www/index.html: the policy does not say {wanted}"));
        }
    }
    hold("The page allows itself only its own files", &broken);
}

#[test]
fn the_page_holds_no_script_or_style_of_its_own() {
    let page = text("www/index.html");
    let mut broken = Vec::new();
    let mut say = |at: usize, what: &str| {
        broken.push(format!("www/index.html:{}: {what}", line_at(&page, at)));
    };
    for (at, _) in page.match_indices("<script") {
        let (tag, rest) = page[at..].split_once('>').unwrap_or_default();
        let body = rest.split("</script>").next().unwrap_or_default();
        if !tag.contains(" src=\"") || !body.trim().is_empty() {
            say(at, "a script in the page");
        }
    }
    for (at, _) in page.match_indices("<style") {
        say(at, "a style in the page");
    }
    for (at, _) in page.match_indices(char::is_whitespace) {
        let attribute = &page[at + 1..];
        let name = attribute.split('=').next().unwrap_or_default();
        let whole = name.chars().all(char::is_alphanumeric) && attribute.contains('=');
        if whole && (name == "style" || name.starts_with("on")) {
            say(at, &format!("{name}= in the page"));
        }
    }
    hold("The page holds no script or style of its own", &broken);
}

#[test]
fn the_page_asks_nothing_of_other_places() {
    let mut broken = Vec::new();
    let shell = [".html", ".js", ".css", ".webmanifest"]
        .iter()
        .flat_map(|ending| files("www", ending));
    for file in shell.chain(files("www/src", ".rs")) {
        for (line, says) in numbered(&text(&file)) {
            if says.contains("http://") || says.contains("https://") {
                broken.push(format!("{file}:{line}: an address elsewhere"));
            }
        }
    }
    hold("The page asks nothing of other places", &broken);
}

#[test]
fn text_is_never_put_into_the_page_as_markup() {
    let mut broken = Vec::new();
    for file in files("www/src", ".rs")
        .into_iter()
        .chain(files("www", ".js"))
    {
        for (line, says) in numbered(&text(&file)) {
            for door in [
                "inner_html",
                "innerHTML",
                "outer_html",
                "outerHTML",
                "insertAdjacent",
            ] {
                if says.contains(door) {
                    broken.push(format!("{file}:{line}: {door}"));
                }
            }
        }
    }
    hold("Text is never put into the page as markup", &broken);
}

#[test]
fn every_reference_says_where_it_is_from() {
    let mut broken = Vec::new();
    for set in rooms("tests/reference") {
        let file = format!("tests/reference/{set}/PROVENANCE.md");
        let says = fs::read_to_string(root().join(&file)).unwrap_or_default();
        for wanted in ["**Origin**", "**Licence**"] {
            if !says.contains(wanted) {
                broken.push(format!("{file}: does not say its {wanted}"));
            }
        }
    }
    hold("Every reference says where it is from", &broken);
}

/// The words after `cargo xtask ` in a text.
fn commands(text: &str) -> BTreeSet<&str> {
    let said = text.split("cargo xtask ").skip(1).map(word);
    said.filter(|word| word.starts_with(|c: char| c.is_ascii_lowercase()))
        .collect()
}

#[test]
fn the_readme_names_the_commands_there_are() {
    let list = text("xtask/src/main.rs");
    let list = list
        .split("const HELP: &str = \"")
        .nth(1)
        .and_then(|rest| rest.split("\";").next())
        .expect("xtask/src/main.rs: the list of commands");
    let there: BTreeSet<&str> = list
        .lines()
        .filter_map(|line| line.strip_prefix("  "))
        .map(word)
        .collect();
    assert!(there.len() > 1, "xtask/src/main.rs: no commands in {list}");
    let (readme, map) = (text(README), text(MAP));
    assert_eq!(
        commands(&readme),
        there,
        "{README} (left) must name the commands of xtask/src/main.rs (right)"
    );
    let unknown: Vec<&str> = commands(&map).difference(&there).copied().collect();
    assert!(
        unknown.is_empty(),
        "{MAP} names commands there are not: {unknown:?}"
    );
    for command in there {
        let file = format!("xtask/src/{command}.rs");
        assert!(Path::new(&root().join(&file)).exists(), "{file} is missing");
    }
}

#[test]
fn this_test_reads_rust_as_meant() {
    let source =
        "let a = \"crate::tube \\\" //\"; // crate::plan\nfn f<'a>() { 'x'; '\\''; r#\"\n\"# }";
    let code = code(source);
    assert_eq!(code, "let a =  ;  \nfn f<'a>() {  ;  ;  \n }");
    let code = "use crate::{book::{Gas, Loading}, job};\nuse super::x;\ncrate::tube::read();";
    let names = |depth| -> Vec<String> {
        let taken = taken_from_root(code, depth);
        taken.into_iter().map(|(_, name)| name).collect()
    };
    assert_eq!(names(2), ["book", "job", "tube"]);
    assert_eq!(
        names(1),
        ["book", "job", "tube", "x"],
        "one step up is the root"
    );
    let tested = "a\n#[cfg(test)]\nmod tests {\n    b;\n}\n#[cfg(test)]\nmod c;\nd\n";
    assert_eq!(
        without_tests(tested).split_whitespace().collect::<String>(),
        "ad"
    );
    assert_eq!(room_of("src/book/sheet.rs"), ("book", 2));
    assert_eq!(room_of("src/book/mod.rs"), ("book", 1));
    assert_eq!(room_of("src/job.rs"), ("job", 1));
}
