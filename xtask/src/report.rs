//! `cargo xtask report JOB [--book BOOK] [--json]`: a job file worked up, on the terminal.
//!
//! Without `--book` the demonstration book is used. A report that holds stops is still a report:
//! the command fails only when a file cannot be read.
//!
//! # The JSON
//!
//! Field names are kept from version to version; `version` counts up when one must change its
//! meaning. Every figure's unit is the last word of its name. What is not known is `null`. Money is
//! a string, so that no cent is lost, in `quote.currency`. Rows, pieces, copies and circuits are
//! numbered from 1, as on paper.
//!
//! | field | what it is |
//! |---|---|
//! | `tubewright` | always `"report"` |
//! | `version` | of this table, 1 |
//! | `job`, `customer`, `book`, `rules` | names; `rules` is null when the book has no such rule set |
//! | `grade` | the gravest of all findings: `"note"`, `"look"`, `"stop"` or null |
//! | `lit_mm`, `glass_mm` | glass that shines; all glass to bend, tails counted, waste not |
//! | `tubes[]` | glass by tube type |
//! | `tubes[].tube`, `.pieces` | its name in the book; how many pieces are of it |
//! | `tubes[].lit_mm`, `.hidden_mm`, `.glass_mm` | shining; painted out; to bend |
//! | `tubes[].volts_per_m`, `.at_ma`, `.pair_volts` | the column's volts at a current; one electrode pair's |
//! | `pieces[]` | the pieces of glass in reading order |
//! | `pieces[].piece`, `.row`, `.copy` | its number; the row of the job and the copy of that row it is from |
//! | `pieces[].label`, `.tube` | what it is called; its tube type |
//! | `pieces[].lit_mm`, `.hidden_mm`, `.tails_mm`, `.glass_mm` | shining; painted out; both tails; all three |
//! | `pieces[].circuit` | the circuit it is on, or null |
//! | `circuits[]` | the circuits in reading order |
//! | `circuits[].circuit`, `.supply`, `.pieces` | its number; its supply's name; its pieces' numbers in order |
//! | `circuits[].grade` | the gravest of its findings |
//! | `circuits[].column_mm` | gas column of all its pieces, electrode to electrode |
//! | `circuits[].no_load_volts` | of its supply, lead to lead |
//! | `circuits[].running_volts`, `.current_ma` | of its string, the heavier of two with a mid-point return |
//! | `circuits[].to_earth_running_volts`, `.to_earth_no_load_volts` | the greatest to earth, lit and unlit |
//! | `circuits[].power_watts`, `.input_va`, `.power_factor` | power in its strings; what an ideal supply draws; the one over the other |
//! | `circuits[].window` | the loading window, in shares of `basis`, which is `"no-load volts"` or `"rated load volts"` |
//! | `circuits[].window.look_below`, `.target_from`, `.target_to`, `.look_above`, `.stop_from` | its bounds, light to heavy |
//! | `circuits[].window.from_plate` | whether the supply's plate gives it |
//! | `circuits[].strings[]` | its string, or the two to the mid-point |
//! | `circuits[].strings[].pieces` | the numbers of its pieces |
//! | `circuits[].strings[].share`, `.zone` | running volts over the window's basis; that share in words |
//! | `circuits[].strings[].strike_volts`, `.strike_from_volts` | peak volts it takes to strike; those there are |
//! | `circuits[].strings[].at_mains`, `.at_low_mains`, `.at_high_mains` | where it runs at rated mains, 90 % and 110 % of it |
//! | `….running_volts`, `.current_ma`, `.power_watts`, `.gaps` | of that point; `gaps`: the current has gaps, it flickers |
//! | `….wanted_volts`, `.given_volts` | instead of the four, where it does not run: what it takes and what there is |
//! | `circuits[].smaller`, `.larger` | the next smaller and larger supply, `supply`, and why not, `says`; or null |
//! | `circuits[].findings[]` | its findings, also among `findings` |
//! | `left_over[]` | pieces no supply runs |
//! | `left_over[].pieces`, `.nearest`, `.would_fit` | their numbers; the nearest supply, `supply`, and what stops it, `says`; what would fit |
//! | `refused[]` | supplies the job cannot use: `supply` and `findings[]` |
//! | `quote` | the first sum |
//! | `quote.currency` | as written before a figure |
//! | `quote.lines[]` | `what`, `quantity` with its unit, `each` and `price` |
//! | `quote.cost`, `.markup`, `.net`, `.tax`, `.total` | the sum and what comes on top |
//! | `findings[]` | all findings, gravest first |
//! | `findings[].grade`, `.says` | how grave, and the sentence |
//! | `findings[].place`, `.at` | `"job"`, `"row"`, `"piece"`, `"circuit"`, `"supply"`, `"tube"`, `"rules"` or `"price"`, and its number or name, or null |
//! | `findings[].value`, `.limit`, `.unit` | the figure found and the limit it was held against |
//! | `findings[].from`, `.clause`, `.standing` | where the limit is from and how it is known |

use std::fmt::Display;
use std::io::Write;
use std::path::{Path, PathBuf};

use serde_json::{Value, json};
use tubewright::circuit::{Basis, Half, Operating, Window};
use tubewright::measure::{Units, glass, length_shown, milliamps_shown, quoted, volts_shown};
use tubewright::workup::CircuitWork;
use tubewright::{Book, Finding, Grade, Job, Place, Workup, book, job, workup};

use crate::{Outcome, files, paths};

/// The command.
///
/// # Errors
/// When the arguments make no sense or a file cannot be read.
pub fn report(arguments: &[String]) -> Outcome {
    std::io::stdout()
        .write_all(printed(arguments)?.as_bytes())
        .map_err(|error| format!("Cannot print the report: {error}."))
}

fn printed(arguments: &[String]) -> Result<String, String> {
    let wanted = Wanted::of(arguments)?;
    let job = read(&wanted.job, job::read)?;
    let book = read(&wanted.book, book::read)?;
    let work = workup(&job, &book);
    Ok(if wanted.json {
        format!("{:#}\n", data(&job, &book, &work))
    } else {
        text(&job, &book, &work)
    })
}

/// What the arguments ask for.
#[derive(Debug, PartialEq)]
struct Wanted {
    job: PathBuf,
    book: PathBuf,
    json: bool,
}

impl Wanted {
    fn of(arguments: &[String]) -> Result<Self, String> {
        let (mut job, mut book, mut json) = (None, None, false);
        let mut arguments = arguments.iter();
        while let Some(argument) = arguments.next() {
            match argument.as_str() {
                "--json" => json = true,
                "--book" => {
                    let file = arguments
                        .next()
                        .ok_or("`--book` needs the book file after it.")?;
                    book = Some(PathBuf::from(file));
                }
                option if option.starts_with("--") => {
                    return Err(format!(
                        "There is no option {option} here; there are `--book BOOK` and `--json`."
                    ));
                }
                file if job.is_none() => job = Some(PathBuf::from(file)),
                file => {
                    return Err(format!(
                        "One job file is reported at a time; “{file}” is a second."
                    ));
                }
            }
        }
        Ok(Self {
            job: job.ok_or("Which job? Expected `report JOB [--book BOOK] [--json]`.")?,
            book: book.unwrap_or_else(|| paths::demo().join("book.json")),
            json,
        })
    }
}

fn read<T>(file: &Path, read: impl Fn(&str) -> Result<T, String>) -> Result<T, String> {
    let text = files::read_text(file)?;
    read(&text).map_err(|says| format!("{}: {says}", file.display()))
}

/// The report as JSON; the head of this file says what is in it.
pub fn data(job: &Job, book: &Book, work: &Workup) -> Value {
    json!({
        "tubewright": "report",
        "version": 1,
        "job": job.name,
        "customer": job.customer,
        "book": book.name,
        "rules": work.rules.as_ref().map(|rules| &rules.name),
        "grade": grade(work.grade()),
        "lit_mm": work.lit().mm(),
        "glass_mm": work.glass().mm(),
        "tubes": list(&work.tubes, |total| json!({
            "tube": total.name,
            "pieces": total.pieces,
            "lit_mm": total.lit.mm(),
            "hidden_mm": total.hidden.mm(),
            "glass_mm": total.glass.mm(),
            "volts_per_m": total.tube.as_ref().map(|tube| tube.volts_per_m),
            "at_ma": total.tube.as_ref().map(|tube| tube.at_ma),
            "pair_volts": total.tube.as_ref().map(|tube| tube.pair_volts),
        })),
        "pieces": work.takeoff.pieces.iter().enumerate().map(|(at, piece)| json!({
            "piece": at + 1,
            "row": piece.row + 1,
            "copy": piece.copy + 1,
            "label": piece.label,
            "tube": piece.tube,
            "lit_mm": piece.lit.mm(),
            "hidden_mm": piece.hidden.mm(),
            "tails_mm": piece.tails.mm(),
            "glass_mm": piece.glass().mm(),
            "circuit": work.circuit_of(at).map(|circuit| circuit + 1),
        })).collect::<Vec<_>>(),
        "circuits": work.circuits.iter().enumerate().map(circuit).collect::<Vec<_>>(),
        "left_over": list(&work.left_over, |left| json!({
            "pieces": numbers(&left.pieces),
            "nearest": other(left.nearest.as_ref()),
            "would_fit": left.would_fit,
        })),
        "refused": list(&work.refused, |refused| json!({
            "supply": refused.supply,
            "findings": list(&refused.findings, finding),
        })),
        "quote": {
            "currency": work.quote.currency,
            "lines": list(&work.quote.lines, |line| json!({
                "what": line.what,
                "quantity": line.quantity,
                "each": line.each.map(|each| each.to_string()),
                "price": line.amount.map(|amount| amount.to_string()),
            })),
            "cost": work.quote.cost.to_string(),
            "markup": work.quote.markup.to_string(),
            "net": work.quote.net.to_string(),
            "tax": work.quote.tax.to_string(),
            "total": work.quote.total.to_string(),
        },
        "findings": list(&work.findings, finding),
    })
}

fn circuit((at, circuit): (usize, &CircuitWork)) -> Value {
    let found = &circuit.assessment;
    let heavier = point(&found.heavier().operating);
    json!({
        "circuit": at + 1,
        "supply": circuit.supply.name,
        "pieces": numbers(&circuit.pieces),
        "grade": grade(circuit.grade()),
        "column_mm": circuit.column.mm(),
        "no_load_volts": circuit.supply.no_load.volts(),
        "running_volts": heavier["running_volts"],
        "current_ma": heavier["current_ma"],
        "to_earth_running_volts": found.to_earth_running.volts(),
        "to_earth_no_load_volts": found.to_earth_no_load.volts(),
        "power_watts": found.watts(),
        "input_va": found.input_va,
        "power_factor": found.power_factor,
        "window": {
            "basis": basis(&found.window),
            "look_below": found.window.look_below,
            "target_from": found.window.target_from,
            "target_to": found.window.target_to,
            "look_above": found.window.look_above,
            "stop_from": found.window.stop_from,
            "from_plate": found.window.from_plate,
        },
        "strings": strings(circuit).map(|(half, pieces)| json!({
            "pieces": numbers(pieces),
            "share": half.share,
            "zone": half.zone.words(),
            "strike_volts": half.strike.volts(),
            "strike_from_volts": half.strike_from.volts(),
            "at_mains": point(&half.operating),
            "at_low_mains": point(&half.at_low_mains),
            "at_high_mains": point(&half.at_high_mains),
        })).collect::<Vec<_>>(),
        "smaller": other(circuit.smaller.as_ref()),
        "larger": other(circuit.larger.as_ref()),
        "findings": list(&circuit.findings, finding),
    })
}

/// The strings of a circuit with their pieces.
fn strings(circuit: &CircuitWork) -> impl Iterator<Item = (&Half, &[usize])> {
    let (first, second) = circuit
        .pieces
        .split_at(circuit.first_string.min(circuit.pieces.len()));
    circuit.assessment.halves.iter().zip([first, second])
}

fn point(operating: &Operating) -> Value {
    match operating {
        Operating::Runs {
            current,
            running,
            watts,
            gaps,
        } => json!({
            "running_volts": running.volts(),
            "current_ma": current.ma(),
            "power_watts": watts,
            "gaps": gaps,
        }),
        Operating::Overloaded { wanted, given } => json!({
            "wanted_volts": wanted.volts(),
            "given_volts": given.volts(),
        }),
    }
}

fn finding(finding: &Finding) -> Value {
    let (place, at) = match &finding.place {
        Place::Job => ("job", Value::Null),
        Place::Row(at) => ("row", json!(at + 1)),
        Place::Piece(at) => ("piece", json!(at + 1)),
        Place::Circuit(at) => ("circuit", json!(at + 1)),
        Place::Supply(name) => ("supply", json!(name)),
        Place::Tube(name) => ("tube", json!(name)),
        Place::Electrode(name) => ("electrode", json!(name)),
        Place::Rules(name) => ("rules", json!(name)),
        Place::Price => ("price", Value::Null),
    };
    json!({
        "grade": finding.grade.word(),
        "place": place,
        "at": at,
        "says": finding.says,
        "value": finding.value,
        "limit": finding.limit,
        "unit": finding.unit,
        "from": finding.source.from,
        "clause": finding.source.clause,
        "standing": finding.source.standing,
    })
}

fn list<T>(all: &[T], each: impl Fn(&T) -> Value) -> Vec<Value> {
    all.iter().map(each).collect()
}

fn grade(grade: Option<Grade>) -> Option<&'static str> {
    grade.map(Grade::word)
}

const fn basis(window: &Window) -> &'static str {
    match window.basis {
        Basis::NoLoad => "no-load volts",
        Basis::RatedLoad => "rated load volts",
    }
}

fn other(other: Option<&(String, String)>) -> Value {
    other.map_or(
        Value::Null,
        |(supply, says)| json!({ "supply": supply, "says": says }),
    )
}

/// Places as people count them.
fn numbers(places: &[usize]) -> Vec<usize> {
    places.iter().map(|at| at + 1).collect()
}

/// The report as lines for a terminal.
pub fn text(job: &Job, book: &Book, work: &Workup) -> String {
    let mut out = Lines(Vec::new());
    out.say(&job.name);
    if !job.customer.is_empty() {
        out.item(format!("for {}", job.customer));
    }
    out.item(format!("shop book: {}", book.name));
    let rules = work.rules.as_ref().map_or("none", |rules| &rules.name);
    out.item(format!("rule set: {rules}"));
    out.item(format!(
        "gravest finding: {}",
        grade(work.grade()).unwrap_or("none")
    ));

    out.heading("Glass");
    for total in &work.tubes {
        out.item(format!(
            "{}: {}, {} lit, {} painted out, {} to bend",
            total.name,
            counted(total.pieces, "piece"),
            glass(total.lit, Units::Metric),
            glass(total.hidden, Units::Metric),
            glass(total.glass, Units::Metric),
        ));
    }
    out.item(format!(
        "in all: {} lit, {} to bend",
        glass(work.lit(), Units::Metric),
        glass(work.glass(), Units::Metric)
    ));

    out.heading("Pieces");
    for (at, piece) in work.takeoff.pieces.iter().enumerate() {
        out.item(format!(
            "{} {}: {} lit, {} painted out, {} to bend, {}",
            at + 1,
            quoted(&piece.label),
            length_shown(piece.lit, Units::Metric),
            length_shown(piece.hidden, Units::Metric),
            length_shown(piece.glass(), Units::Metric),
            work.circuit_of(at).map_or_else(
                || "on no circuit".to_owned(),
                |on| format!("circuit {}", on + 1)
            ),
        ));
    }

    for (at, circuit) in work.circuits.iter().enumerate() {
        out.heading(&format!("Circuit {}", at + 1));
        circuit_lines(circuit, work, &mut out);
    }

    if !work.left_over.is_empty() {
        out.heading("Left over: no supply runs these");
        for left in &work.left_over {
            out.item(labels(&left.pieces, work));
            if let Some((supply, says)) = &left.nearest {
                out.item(format!("  nearest is {supply}: {says}"));
            }
            out.item(format!("  would fit: {}", left.would_fit));
        }
    }
    if !work.refused.is_empty() {
        out.heading("Supplies this job cannot use");
        for refused in &work.refused {
            for finding in &refused.findings {
                out.item(format!("{}: {}", refused.supply, finding.says));
            }
        }
    }

    out.heading("First sum");
    let quote = &work.quote;
    let money = |amount: &dyn Display| format!("{} {amount}", quote.currency);
    for line in &quote.lines {
        let amount = line
            .amount
            .map_or_else(|| "no price".to_owned(), |amount| money(&amount));
        let each = line
            .each
            .map_or_else(String::new, |each| format!(" at {}", money(&each)));
        out.item(format!("{}: {}{each} = {amount}", line.what, line.quantity));
    }
    for (what, amount) in [
        ("cost", quote.cost),
        ("markup", quote.markup),
        ("net", quote.net),
        ("tax", quote.tax),
        ("total", quote.total),
    ] {
        out.item(format!("{what}: {}", money(&amount)));
    }

    for grade in [Grade::Stop, Grade::Look, Grade::Note] {
        let of_it: Vec<&Finding> = work
            .findings
            .iter()
            .filter(|finding| finding.grade == grade)
            .collect();
        if !of_it.is_empty() {
            out.heading(&format!("Findings: {}", grade.word()));
            for finding in of_it {
                let (from, standing) = (finding.source.words(), finding.source.standing);
                let known = if from == standing {
                    from
                } else {
                    format!("{from}; {standing}")
                };
                out.item(format!(
                    "{}: {} ({known})",
                    place(&finding.place, job, work),
                    finding.says,
                ));
            }
        }
    }
    out.0.push(String::new());
    out.0.join("\n")
}

fn circuit_lines(circuit: &CircuitWork, work: &Workup, out: &mut Lines) {
    let found = &circuit.assessment;
    out.item(format!(
        "supply: {} ({})",
        circuit.supply.name,
        circuit.supply.words(work.earth_word())
    ));
    let halves = found.halves.len();
    for (number, (half, pieces)) in strings(circuit).enumerate() {
        let which = if halves > 1 {
            format!("string {}, ", number + 1)
        } else {
            String::new()
        };
        out.item(format!("{which}pieces {}", labels(pieces, work)));
        match half.operating {
            Operating::Runs {
                current,
                running,
                gaps,
                ..
            } => out.item(format!(
                "  runs at {} and {}{}",
                milliamps_shown(current),
                volts_shown(running),
                if gaps {
                    ", with gaps in the current"
                } else {
                    ""
                }
            )),
            Operating::Overloaded { wanted, given } => out.item(format!(
                "  does not run: it takes {}, and there are {}",
                volts_shown(wanted),
                volts_shown(given)
            )),
        }
        out.item(format!(
            "  {:.1} % of {}: {}",
            half.share * 100.0,
            basis(&found.window),
            half.zone.words()
        ));
        out.item(format!(
            "  strikes at {} of the {} peak there are",
            volts_shown(half.strike),
            volts_shown(half.strike_from)
        ));
    }
    let window = &found.window;
    out.item(format!(
        "window: look under {:.0} %, target {:.0} to {:.0} %, look over {:.0} %, stop from {:.0} %{}",
        window.look_below * 100.0,
        window.target_from * 100.0,
        window.target_to * 100.0,
        window.look_above * 100.0,
        window.stop_from * 100.0,
        if window.from_plate { ", from the plate" } else { "" }
    ));
    out.item(format!(
        "to earth: {} running, {} at no load",
        volts_shown(found.to_earth_running),
        volts_shown(found.to_earth_no_load)
    ));
    if let (Some(va), Some(factor)) = (found.input_va, found.power_factor) {
        out.item(format!(
            "input: {va:.0} VA at a power factor of {factor:.2}"
        ));
    }
    for (which, other) in [("smaller", &circuit.smaller), ("larger", &circuit.larger)] {
        match other {
            Some((supply, says)) => out.item(format!("next {which}, {supply}: {says}")),
            None => out.item(format!("next {which}: there is none")),
        }
    }
}

fn labels(pieces: &[usize], work: &Workup) -> String {
    let label = |&at: &usize| {
        let label = work.takeoff.pieces.get(at).map_or("", |piece| &piece.label);
        format!("{} {}", at + 1, quoted(label))
    };
    pieces.iter().map(label).collect::<Vec<_>>().join(", ")
}

fn place(place: &Place, job: &Job, work: &Workup) -> String {
    match place {
        Place::Job => "job".to_owned(),
        Place::Row(at) => {
            let label = job.rows.get(*at).map_or("", |row| row.label());
            format!("row {} {}", at + 1, quoted(label))
        }
        Place::Piece(at) => format!("piece {}", labels(&[*at], work)),
        Place::Circuit(at) => format!("circuit {}", at + 1),
        Place::Supply(name) => format!("supply {name}"),
        Place::Tube(name) => format!("tube {name}"),
        Place::Electrode(name) => format!("electrode {name}"),
        Place::Rules(name) => format!("rule set {name}"),
        Place::Price => "price".to_owned(),
    }
}

fn counted(count: usize, what: &str) -> String {
    if count == 1 {
        format!("1 {what}")
    } else {
        format!("{count} {what}s")
    }
}

/// Lines of a text in sections.
struct Lines(Vec<String>);

impl Lines {
    fn say(&mut self, line: impl Into<String>) {
        self.0.push(line.into());
    }

    fn heading(&mut self, heading: &str) {
        self.say("");
        self.say(heading);
    }

    fn item(&mut self, line: impl Display) {
        self.say(format!("  {line}"));
    }
}

#[cfg(test)]
mod tests {
    use tubewright::book::{OutputEarthing, SupplyEntry, SupplyKind};
    use tubewright::job::{Pieces, Row, StrokesRow};

    use super::*;
    use crate::scratch::Scratch;

    /// Two tubes of a metre each, and one that no supply of the book runs.
    fn small() -> (Job, Book) {
        let tube = "15 mm neon".to_owned();
        let row = |label: &str, strokes: &str| {
            Row::Strokes(StrokesRow {
                label: label.to_owned(),
                strokes: strokes.to_owned(),
                tube: tube.clone(),
                count: 1,
                // The pole is for no supply: it stays in one.
                pieces: Pieces {
                    keep_long: true,
                    ..Pieces::default()
                },
                ..StrokesRow::default()
            })
        };
        let job = Job {
            name: "Two bars".to_owned(),
            rows: vec![row("bar", "1000 mm; 1000 mm"), row("pole", "9000 mm")],
            ..Job::default()
        };
        let mut book = book::starter();
        assert!(book.tubes.iter().any(|entry| entry.name == tube));
        book.supplies.push(SupplyEntry {
            name: "3 kV".to_owned(),
            no_load_volts: Some(3_000.0),
            short_circuit_ma: Some(30.0),
            kind: Some(SupplyKind::Iron),
            earthing: Some(OutputEarthing::MidPoint),
            price: Some("66.10".parse().unwrap()),
            ..SupplyEntry::default()
        });
        book.supplies.push(SupplyEntry {
            name: "no plate".to_owned(),
            ..SupplyEntry::default()
        });
        (job, book)
    }

    #[test]
    fn the_json_has_the_figures_of_the_workup() {
        let (job, book) = small();
        let work = workup(&job, &book);
        // Through text and back, as its readers get it.
        let data: Value = serde_json::from_str(&data(&job, &book, &work).to_string()).unwrap();
        assert_eq!(data["tubewright"], "report");
        assert_eq!(data["job"], "Two bars");
        assert_eq!(data["grade"], "stop");
        assert_eq!(data["lit_mm"], 11_000.0);
        assert_eq!(data["glass_mm"], 11_000.0 + 3.0 * 2.0 * 150.0);
        assert_eq!(data["tubes"][0]["pieces"], 3);
        assert!(data["tubes"][0]["volts_per_m"].as_f64().unwrap() > 100.0);
        assert_eq!(data["pieces"][1]["piece"], 2);
        assert_eq!(data["pieces"][1]["tails_mm"], 300.0);
        assert_eq!(data["pieces"][1]["circuit"], 1);
        assert_eq!(data["pieces"][2]["circuit"], Value::Null);

        let circuit = &data["circuits"][0];
        assert_eq!(circuit["supply"], "3 kV");
        assert_eq!(circuit["pieces"], json!([1, 2]));
        assert_eq!(circuit["column_mm"], 2_000.0);
        assert_eq!(circuit["to_earth_no_load_volts"], 1_500.0);
        let running = circuit["running_volts"].as_f64().unwrap();
        assert_eq!(
            circuit["to_earth_running_volts"].as_f64().unwrap(),
            running / 2.0
        );
        assert_eq!(
            circuit["strings"][0]["share"].as_f64().unwrap(),
            running / 3_000.0
        );
        let current = circuit["current_ma"].as_f64().unwrap();
        assert!(0.0 < current && current < 30.0, "{current}");
        let va = circuit["input_va"].as_f64().unwrap();
        assert!((va - 3.0 * current).abs() < 1e-9, "{va}");
        assert!(circuit["power_factor"].as_f64().unwrap() < 1.0);
        assert_eq!(
            circuit["strings"][0]["at_mains"]["current_ma"],
            circuit["current_ma"]
        );
        assert_eq!(circuit["smaller"], Value::Null);

        assert_eq!(data["left_over"][0]["pieces"], json!([3]));
        assert_eq!(data["left_over"][0]["nearest"]["supply"], "3 kV");
        assert_eq!(data["refused"][0]["supply"], "no plate");
        let lines = data["quote"]["lines"].as_array().unwrap();
        let supply = lines
            .iter()
            .find(|line| line["what"] == "Supply, 3 kV")
            .unwrap();
        assert_eq!(supply["price"], "66.10");
        let stop = &data["findings"][0];
        assert_eq!(
            (&stop["grade"], &stop["place"], &stop["at"]),
            (&json!("stop"), &json!("piece"), &json!(3))
        );
    }

    #[test]
    fn the_documented_fields_are_those_there_are() {
        let (job, book) = small();
        let data = data(&job, &book, &workup(&job, &book));
        let mut names = std::collections::BTreeSet::new();
        field_names(&data, &mut names);
        let documented: Vec<&str> = include_str!("report.rs")
            .lines()
            .filter(|line| line.starts_with("//! | `"))
            .flat_map(|line| line.split('`').skip(1).step_by(2))
            .collect();
        assert!(names.contains("to_earth_no_load_volts") && names.contains("quote"));
        for name in names {
            assert!(
                documented.iter().any(|field| {
                    field
                        .rsplit(['.', '…'])
                        .next()
                        .unwrap()
                        .trim_end_matches("[]")
                        == name
                }),
                "{name} is not in the table at the head of this file"
            );
        }
    }

    fn field_names(value: &Value, names: &mut std::collections::BTreeSet<String>) {
        match value {
            Value::Object(fields) => {
                for (name, value) in fields {
                    names.insert(name.clone());
                    field_names(value, names);
                }
            }
            Value::Array(all) => all.iter().for_each(|value| field_names(value, names)),
            _ => {}
        }
    }

    #[test]
    fn the_text_says_what_matters() {
        let (job, book) = small();
        let text = text(&job, &book, &workup(&job, &book));
        for wanted in [
            "Two bars\n",
            "15 mm neon: 3 pieces, 11.00 m lit, 0.00 m painted out, 11.90 m to bend",
            "2 “bar 2”: 1\u{202f}000 mm lit, 0 mm painted out, 1\u{202f}300 mm to bend, circuit 1",
            "3 “pole”: 9\u{202f}000 mm lit",
            "on no circuit",
            "\nCircuit 1\n  supply: 3 kV (",
            " running, 1\u{202f}500 V at no load",
            "\nLeft over: no supply runs these\n  3 “pole”\n    nearest is 3 kV: ",
            "\nSupplies this job cannot use\n  no plate: ",
            "Supply, 3 kV: 1 at € 66.10 = € 66.10",
            "\nFindings: stop\n  piece 3 “pole”: ",
        ] {
            assert!(text.contains(wanted), "no {wanted:?} in:\n{text}");
        }
    }

    fn words(words: &[&str]) -> Vec<String> {
        words.iter().map(|&word| word.to_owned()).collect()
    }

    #[test]
    fn arguments_name_the_files() {
        let wanted = Wanted::of(&words(&["--json", "a.json", "--book", "b.json"])).unwrap();
        let (job, book) = (PathBuf::from("a.json"), PathBuf::from("b.json"));
        assert_eq!(
            wanted,
            Wanted {
                job,
                book,
                json: true
            }
        );
        let wanted = Wanted::of(&words(&["a.json"])).unwrap();
        assert!(!wanted.json && wanted.book.ends_with("catalog-demo/book.json"));
        for (wrong, says) in [
            (&[][..], "Which job?"),
            (&["a", "b"], "“b” is a second"),
            (&["a", "--book"], "needs the book file"),
            (&["a", "--yaml"], "no option --yaml"),
        ] {
            let said = Wanted::of(&words(wrong)).unwrap_err();
            assert!(said.contains(says), "{said}");
        }
    }

    #[test]
    fn a_file_that_cannot_be_read_is_named() {
        let (job, book) = small();
        let dir = Scratch::with(&[
            ("job.json", &job::write(&job)),
            ("book.json", &book::write(&book)),
        ]);
        let file = |name: &str| dir.path().join(name).to_str().unwrap().to_owned();
        let report = |job: &str, book: &str| printed(&[file(job), "--book".into(), file(book)]);
        assert!(
            report("job.json", "book.json")
                .unwrap()
                .starts_with("Two bars\n")
        );
        let said = report("none.json", "book.json").unwrap_err();
        assert!(said.contains("none.json"), "{said}");
        let said = report("job.json", "job.json").unwrap_err();
        assert!(said.contains("job.json: Expected a book file"), "{said}");
    }
}
