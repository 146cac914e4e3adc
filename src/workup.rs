//! The one function: a job and a book in, every figure and every finding out.
//!
//! Same inputs, same output. It never fails as a whole: what cannot be worked out carries its own
//! finding and the rest still counts.

use std::collections::HashSet;

use crate::book::Book;
use crate::circuit::{Assessment, Profile, Protection, assumed, profile, protect};
use crate::feed::{self, FeedWork};
use crate::job::Job;
use crate::measure::{Length, Milliamps, quoted, small_first};
use crate::plan::{self, Candidate, Task};
use crate::quote::{self, GlassPart, Parts, Quote};
use crate::rules::{EarthWord, Finding, Grade, Place, RuleSet, Source};
use crate::supply::{self, Rating};
use crate::takeoff::{Piece, Takeoff, against_shop, takeoff};
use crate::tube::{Known, TubeType};
use crate::wiring::{self, Leads};

/// Everything worked out of a job and a book.
#[derive(Debug, Clone)]
pub struct Workup {
    /// Rows and pieces, measured and placed.
    pub takeoff: Takeoff,
    /// Glass by tube type, in the order of the rows.
    pub tubes: Vec<TubeTotal>,
    /// Circuits in reading order.
    pub circuits: Vec<CircuitWork>,
    /// Pieces no supply can run.
    pub left_over: Vec<LeftOverWork>,
    /// Supplies of the book that this job cannot use, with the reasons.
    pub refused: Vec<Refused>,
    /// What is said of the leads of all circuits, gravest first.
    pub wiring: Vec<Finding>,
    /// What feeds the supplies.
    pub feed: FeedWork,
    /// The first sum.
    pub quote: Quote,
    /// The rule set the job is held against.
    pub rules: Option<RuleSet>,
    /// All findings, gravest first.
    pub findings: Vec<Finding>,
}

/// Glass of one tube type.
#[derive(Debug, Clone, PartialEq)]
pub struct TubeTotal {
    /// Name in the book.
    pub name: String,
    /// The tube type; None when the book has none of that name, or a contradictory one.
    pub tube: Option<TubeType>,
    /// Pieces of it.
    pub pieces: usize,
    /// Glass that shines.
    pub lit: Length,
    /// Glass painted out.
    pub hidden: Length,
    /// All glass to bend, tails counted, waste not.
    pub glass: Length,
}

/// A circuit of the plan.
#[derive(Debug, Clone)]
pub struct CircuitWork {
    /// Its pieces in order, places in the takeoff.
    pub pieces: Vec<usize>,
    /// How many of them are in the first string; all but with a mid-point return.
    pub first_string: usize,
    /// Its supply.
    pub supply: Rating,
    /// Worked up.
    pub assessment: Assessment,
    /// Volts to earth along it.
    pub profile: Profile,
    /// What its supply's protection sees of it, and what it cannot.
    pub protection: Protection,
    /// What its figures lean on that nobody gave, a sentence each.
    pub assumed: Vec<String>,
    /// Its leads and jumpers.
    pub leads: Leads,
    /// Glass column of all its pieces.
    pub column: Length,
    /// The next smaller supply of the book by name, and what it fails by.
    pub smaller: Option<(String, String)>,
    /// The next larger one, and what speaks against it.
    pub larger: Option<(String, String)>,
    /// Findings at this circuit and of its supply, gravest first.
    pub findings: Vec<Finding>,
}

impl CircuitWork {
    /// The gravest finding.
    pub fn grade(&self) -> Option<Grade> {
        Finding::gravest(&self.findings)
    }
}

/// Pieces no supply can run.
#[derive(Debug, Clone)]
pub struct LeftOverWork {
    /// The pieces, places in the takeoff.
    pub pieces: Vec<usize>,
    /// The nearest supply by name, and what stops it.
    pub nearest: Option<(String, String)>,
    /// What would make it fit.
    pub would_fit: String,
}

/// A supply this job cannot use.
#[derive(Debug, Clone)]
pub struct Refused {
    /// Name in the book.
    pub supply: String,
    /// Why.
    pub findings: Vec<Finding>,
}

impl Workup {
    /// Glass that shines.
    pub fn lit(&self) -> Length {
        self.tubes.iter().map(|total| total.lit).sum()
    }

    /// All glass to bend.
    pub fn glass(&self) -> Length {
        self.tubes.iter().map(|total| total.glass).sum()
    }

    /// The gravest grade of all findings.
    pub fn grade(&self) -> Option<Grade> {
        Finding::gravest(&self.findings)
    }

    /// The word of the rule set the job is held against.
    pub fn earth_word(&self) -> EarthWord {
        self.rules
            .as_ref()
            .map_or_else(EarthWord::default, |rules| rules.earth_word)
    }

    /// The circuit a piece is on.
    pub fn circuit_of(&self, piece: usize) -> Option<usize> {
        self.circuits
            .iter()
            .position(|circuit| circuit.pieces.contains(&piece))
    }
}

/// Works a job up with a book.
pub fn workup(job: &Job, book: &Book) -> Workup {
    let mut findings = Vec::new();
    let rules = rule_set(job, book, &mut findings);
    let loading = loading(book, &mut findings);

    let off = takeoff(job, &book.allowances);
    findings.extend(off.findings.iter().cloned());
    findings.extend(against_shop(&off, job, book));

    let tubes = tube_totals(job, book, &off.pieces, &mut findings);
    let (candidates, refused) = candidates(job, book, rules.as_ref(), &mut findings);

    let placed: Vec<(usize, &Piece, &TubeType)> = off
        .pieces
        .iter()
        .enumerate()
        .filter_map(|(at, piece)| {
            let total = tubes.iter().find(|total| total.name == piece.tube)?;
            Some((at, piece, total.tube.as_ref()?))
        })
        .collect();
    let pieces: Vec<(&Piece, &TubeType)> = placed
        .iter()
        .map(|&(_, piece, tube)| (piece, tube))
        .collect();
    let task = Task {
        pieces: &pieces,
        candidates: &candidates,
        loading: &loading,
        wish: job.wish,
        cold: job.site.cold,
        rules: rules.as_ref(),
    };
    let planned = plan::plan(&task);

    let place = |range: std::ops::Range<usize>| -> Vec<usize> {
        placed[range].iter().map(|&(at, ..)| at).collect()
    };
    let named = |candidate: usize| candidates[candidate].rating.name.clone();
    let profiles: Vec<Profile> = planned
        .circuits
        .iter()
        .map(|circuit| {
            profile(
                &pieces[circuit.pieces.clone()],
                first_string(circuit),
                &circuit.assessment,
                &candidates[circuit.candidate].rating,
                job.site.cold,
            )
        })
        .collect();
    let wired = wire(
        job,
        book,
        rules.as_ref(),
        &off,
        (&task, &planned, &profiles),
    );
    let mut wiring = wired.findings;
    gravest_first(&mut wiring);
    findings.extend(wiring.iter().cloned());
    let circuits: Vec<CircuitWork> = planned
        .circuits
        .into_iter()
        .zip(profiles)
        .zip(wired.circuits)
        .enumerate()
        .map(|(number, ((circuit, profile), leads))| {
            let rating = candidates[circuit.candidate].rating.clone();
            let string = &pieces[circuit.pieces.clone()];
            let protection = protect(
                string,
                &circuit.assessment,
                &profile,
                &rating,
                leads.difference_ma.map(Milliamps::from_ma),
                rules
                    .as_ref()
                    .map_or_else(EarthWord::default, |rules| rules.earth_word),
            );
            let mut found = circuit.assessment.findings.clone();
            found.extend(protection.findings.iter().cloned());
            found.extend(leads.findings.iter().cloned());
            found.extend(rules.iter().flat_map(|rules| rating.against_rules(rules)));
            found.extend(rating.against_site(&job.site));
            found.extend(over_plate(&rating, circuit.assessment.input_va));
            for finding in &mut found {
                finding.place = Place::Circuit(number);
            }
            gravest_first(&mut found);
            findings.extend(found.iter().cloned());
            CircuitWork {
                first_string: first_string(&circuit),
                column: string.iter().map(|(p, _)| p.column()).sum(),
                profile,
                protection,
                assumed: assumed(
                    &string.iter().map(|&(_, tube)| tube).collect::<Vec<_>>(),
                    &circuit.assessment,
                    &rating,
                    &loading,
                    job.site.cold,
                ),
                pieces: place(circuit.pieces),
                supply: rating,
                smaller: circuit
                    .smaller
                    .map(|other| (named(other.candidate), other.says)),
                larger: circuit
                    .larger
                    .map(|other| (named(other.candidate), other.says)),
                assessment: circuit.assessment,
                leads,
                findings: found,
            }
        })
        .collect();
    let left_over: Vec<LeftOverWork> = planned
        .left_over
        .into_iter()
        .map(|left| {
            let stranded = LeftOverWork {
                pieces: place(left.pieces),
                nearest: left.nearest.map(|nearest| {
                    let stop = nearest.findings.first().map(|finding| finding.says.clone());
                    (named(nearest.candidate), stop.unwrap_or_default())
                }),
                would_fit: left.would_fit,
            };
            findings.push(no_supply(&stranded, &off.pieces));
            stranded
        })
        .collect();

    findings.extend(unknown_mains(job, &circuits));
    let feed = feed(job, rules.as_ref(), &circuits);
    findings.extend(feed.findings.iter().cloned());
    let parts = parts(book, &tubes, &circuits, off.pieces.len());
    let mut quote = quote::quote(&parts, &book.rates);
    let left_out = not_in_sum(job, &off, &circuits, &findings);
    quote.findings.splice(0..0, left_out);
    findings.extend(short_of(book, &parts));
    findings.extend(quote.findings.iter().cloned());
    findings.extend(model_notes(&tubes));
    gravest_first(&mut findings);
    Workup {
        takeoff: off,
        tubes,
        circuits,
        left_over,
        refused,
        wiring,
        feed,
        quote,
        rules,
        findings,
    }
}

/// How many of a circuit's pieces are in its first string.
fn first_string(circuit: &plan::Circuit) -> usize {
    circuit.second_from.unwrap_or(circuit.pieces.end) - circuit.pieces.start
}

/// The leads of the circuits of a plan.
fn wire(
    job: &Job,
    book: &Book,
    rules: Option<&RuleSet>,
    off: &Takeoff,
    (task, planned, profiles): (&Task, &plan::Plan, &[Profile]),
) -> wiring::Wired {
    let strung: Vec<wiring::Strung> = planned
        .circuits
        .iter()
        .zip(profiles)
        .map(|(circuit, profile)| wiring::Strung {
            pieces: &task.pieces[circuit.pieces.clone()],
            first_string: first_string(circuit),
            rating: &task.candidates[circuit.candidate].rating,
            assessment: &circuit.assessment,
            profile,
        })
        .collect();
    wiring::wire(job, book, rules, off.bounds, &strung)
}

/// The feed of the supplies of a plan.
fn feed(job: &Job, rules: Option<&RuleSet>, circuits: &[CircuitWork]) -> FeedWork {
    let drawing: Vec<feed::Drawing> = circuits
        .iter()
        .map(|circuit| feed::Drawing {
            rating: &circuit.supply,
            worked_va: circuit.assessment.input_va,
            watts: circuit.assessment.watts(),
        })
        .collect();
    feed::feed(&job.feed, &job.site, rules, &drawing)
}

fn gravest_first(findings: &mut [Finding]) {
    findings.sort_by_key(|finding| std::cmp::Reverse(finding.grade));
}

fn rule_set(job: &Job, book: &Book, findings: &mut Vec<Finding>) -> Option<RuleSet> {
    let found = book.rule_sets.iter().find(|set| set.name == job.rules);
    match found {
        Some(set) => {
            findings.extend(supply::blanks(set));
            findings.extend(without_rules(set));
        }
        None if job.rules.is_empty() => findings.push(Finding::new(
            Grade::Look,
            Place::Job,
            "No rule set is chosen: no limit of any code is checked.",
            Source::entry("the job's choice of rules"),
        )),
        None => findings.push(Finding::new(
            Grade::Stop,
            Place::Job,
            format!(
                "The rule set {} is not in the shop book: no limit of it is checked.",
                quoted(&job.rules)
            ),
            Source::entry("the job's choice of rules"),
        )),
    }
    found.cloned()
}

/// A code's rule set that lacks limits, as one kept in an older book does: what is not in it is not
/// checked, and nothing may count as meeting it.
fn without_rules(set: &RuleSet) -> Option<Finding> {
    let says = match set.lacks().len() {
        0 if set.edition.is_empty() || set.rules.iter().any(|rule| rule.limits.of_wiring()) => {
            return None;
        }
        0 => {
            "Not checked: leads, distances and branch circuits. The set has no limits on them."
                .to_owned()
        }
        1 => {
            "Not checked: a limit that this set has by now and the one in the shop book has not. Add \
              it there, under Rules."
                .to_owned()
        }
        count => format!(
            "Not checked: {count} limits that this set has by now and the one in the shop book has not. \
             Add them there, under Rules."
        ),
    };
    Some(Finding::new(
        Grade::Look,
        Place::Rules(set.name.clone()),
        says,
        Source::entry("the rule set's entry"),
    ))
}

/// The book's windows, or the defaults where they contradict themselves.
fn loading(book: &Book, findings: &mut Vec<Finding>) -> crate::book::Loading {
    let set = &book.loading;
    let default = crate::book::Loading::default();
    let rising = |shares: &[f64]| shares.is_sorted_by(|a, b| a <= b);
    let fine = rising(&[0.0, set.look_below, set.target_from, set.neon_target_to])
        && rising(&[
            set.target_from,
            set.mercury_target_to,
            set.mercury_look_above,
        ])
        && rising(&[
            set.neon_target_to,
            set.neon_look_above,
            set.stop_from,
            default.stop_from,
        ])
        && rising(&[set.mercury_look_above, set.stop_from])
        && set.target_from > 0.0
        && (1.0..=4.0).contains(&set.strike_factor);
    if fine {
        return set.clone();
    }
    findings.push(Finding::new(
        Grade::Look,
        Place::Job,
        format!(
            "The loading windows of the shop book contradict themselves (they must rise from light \
             to heavy, end at {} at most, with a strike factor of 1 to 4): the defaults are used.",
            default.stop_from
        ),
        Source::shop(),
    ));
    default
}

fn tube_totals(
    job: &Job,
    book: &Book,
    pieces: &[Piece],
    findings: &mut Vec<Finding>,
) -> Vec<TubeTotal> {
    let mut totals: Vec<TubeTotal> = Vec::new();
    let named = |(at, row): (usize, &crate::job::Row)| -> Vec<(usize, String)> {
        row.tubes()
            .into_iter()
            .map(|name| (at, name.to_owned()))
            .collect()
    };
    for (at, name) in job.rows.iter().enumerate().flat_map(named) {
        let name = name.as_str();
        if totals.iter().any(|total| total.name == name) {
            continue;
        }
        let mut entries = book.tubes.iter().filter(|entry| entry.name == name);
        let tube = match entries
            .next()
            .map(|entry| TubeType::of_book(entry, &book.electrodes))
        {
            Some(Ok(tube)) => {
                findings.extend(tube.findings.iter().cloned());
                Some(tube)
            }
            Some(Err(wrong)) => {
                findings.extend(wrong);
                None
            }
            None => {
                findings.push(Finding::new(
                    Grade::Stop,
                    Place::Row(at),
                    format!(
                        "The tube type {} is not in the shop book: glass is counted, volts are not.",
                        quoted(name)
                    ),
                    Source::entry("as typed in the row"),
                ));
                None
            }
        };
        if entries.next().is_some() {
            findings.push(Finding::new(
                Grade::Look,
                Place::Tube(name.to_owned()),
                format!(
                    "Two tube types are called {}: the first is used.",
                    quoted(name)
                ),
                Source::entry("the tubes' entries"),
            ));
        }
        totals.push(TubeTotal {
            name: name.to_owned(),
            tube,
            pieces: 0,
            lit: Length::ZERO,
            hidden: Length::ZERO,
            glass: Length::ZERO,
        });
    }
    for piece in pieces {
        if let Some(total) = totals.iter_mut().find(|total| total.name == piece.tube) {
            total.pieces += 1;
            total.lit += piece.lit;
            total.hidden += piece.hidden;
            total.glass += piece.glass();
        }
    }
    totals.retain(|total| total.pieces > 0);
    totals
}

fn candidates(
    job: &Job,
    book: &Book,
    rules: Option<&RuleSet>,
    findings: &mut Vec<Finding>,
) -> (Vec<Candidate>, Vec<Refused>) {
    let (mut candidates, mut refused) = (Vec::new(), Vec::new());
    let mut names = HashSet::new();
    for (entry, supply) in book.supplies.iter().enumerate() {
        if !names.insert(supply.name.as_str()) {
            findings.push(Finding::new(
                Grade::Look,
                Place::Supply(supply.name.clone()),
                format!(
                    "Two supplies are called {}: the first is used.",
                    quoted(&supply.name)
                ),
                Source::entry("the supplies' entries"),
            ));
            continue;
        }
        let rating = match Rating::read(supply) {
            Ok(rating) => rating,
            Err(wrong) => {
                refused.push(Refused {
                    supply: supply.name.clone(),
                    findings: wrong,
                });
                continue;
            }
        };
        let mut said = rating.against_site(&job.site);
        said.extend(rules.iter().flat_map(|rules| rating.against_rules(rules)));
        if Finding::gravest(&said) == Some(Grade::Stop) {
            said.retain(|finding| finding.grade == Grade::Stop);
            refused.push(Refused {
                supply: supply.name.clone(),
                findings: said,
            });
        } else {
            let look = Finding::gravest(&said) == Some(Grade::Look);
            candidates.push(Candidate {
                entry,
                rating,
                look,
            });
        }
    }
    (candidates, refused)
}

fn no_supply(left: &LeftOverWork, pieces: &[Piece]) -> Finding {
    let label = |at: Option<&usize>| {
        at.and_then(|&at| pieces.get(at))
            .map_or_else(String::new, |piece| quoted(&piece.label))
    };
    let which = if left.pieces.len() == 1 {
        format!("the piece {}", label(left.pieces.first()))
    } else {
        format!(
            "any of the {} pieces from {} to {}",
            left.pieces.len(),
            label(left.pieces.first()),
            label(left.pieces.last())
        )
    };
    let rest = match &left.nearest {
        Some((name, stop)) => format!(
            "Nearest is {name}: {stop} Would fit: {}",
            small_first(&left.would_fit)
        ),
        None => left.would_fit.clone(),
    };
    let at = left.pieces.first().copied().unwrap_or_default();
    Finding::new(
        Grade::Stop,
        Place::Piece(at),
        format!("No supply runs {which}. {rest}"),
        Source::model(),
    )
}

/// Volt-amperes drawn may be worked out this much above the plate's before something must be wrong
/// with either (the model leaves out the supply's losses and its capacitor).
const OVER_PLATE: f64 = 0.10;

/// A circuit that is worked out to draw more than its supply's plate says.
fn over_plate(rating: &Rating, drawn: Option<f64>) -> Option<Finding> {
    let (drawn, plate) = (drawn?, rating.input_va?);
    (drawn > (1.0 + OVER_PLATE) * plate).then(|| {
        Finding::new(
            Grade::Look,
            Place::Supply(rating.name.clone()),
            format!(
                "It is worked out to draw {drawn:.0} VA from the mains, more than the {plate} VA of \
                 its plate: one of the plate's figures may be wrong, and the feed must carry it."
            ),
            Source::entry("the supply's entry"),
        )
        .with(drawn, plate, "VA")
    })
}

/// What is not known of the supplies of a plan where the site's mains volts are not given.
fn unknown_mains(job: &Job, circuits: &[CircuitWork]) -> Vec<Finding> {
    if job.site.mains_volts.is_some() || circuits.is_empty() {
        return Vec::new();
    }
    let mut found = vec![Finding::new(
        Grade::Look,
        Place::Job,
        "Mains volts are not given, so it was not checked that the supplies suit them.",
        Source::entry("the job's site"),
    )];
    let made_for = circuits
        .iter()
        .filter_map(|circuit| circuit.supply.input_volts);
    let least = made_for.clone().fold(f64::INFINITY, f64::min);
    let most = made_for.fold(0.0, f64::max);
    if !supply::one_mains(least, most) {
        found.push(Finding::new(
            Grade::Stop,
            Place::Job,
            format!(
                "The plan takes supplies for {least} V and for {most} V: no mains suit both. Give \
                 the mains volts, and only supplies for them are taken."
            ),
            Source::entry("the job's site"),
        ));
    }
    found
}

/// Where the volts of a tube came from the default model, by how much they may be off.
fn model_notes(tubes: &[TubeTotal]) -> Vec<Finding> {
    tubes
        .iter()
        .filter_map(|total| {
            let tube = total.tube.as_ref()?;
            let Known::Model { percent } = tube.known else {
                return None;
            };
            Some(Finding::new(
                Grade::Note,
                Place::Tube(tube.name.clone()),
                format!(
                    "Volts of {} come from the default model, about ±{percent} %: {:.0} V/m at {} \
                     mA and {:.0} V for each pair of electrodes. Bench readings of your own glass \
                     are better.",
                    tube.name, tube.volts_per_m, tube.at_ma, tube.pair_volts
                ),
                Source::model(),
            ))
        })
        .collect()
}

/// What the sum is without: a customer is not to be told a price that leaves out half of the sign.
fn not_in_sum(
    job: &Job,
    off: &Takeoff,
    circuits: &[CircuitWork],
    findings: &[Finding],
) -> Vec<Finding> {
    let stopped = |place: &Place| {
        let mut stops = findings.iter().filter(|found| found.grade == Grade::Stop);
        stops.any(|found| found.place == *place)
    };
    let made = |row: usize| off.rows.get(row).map_or(0, |row| row.pieces.len());
    let beyond = |row: usize| row >= off.rows.len();
    let (mut without, mut partly) = (Vec::new(), Vec::new());
    for row in 0..job.rows.len() {
        if beyond(row) || (stopped(&Place::Row(row)) && made(row) == 0) {
            without.push(row);
        } else if stopped(&Place::Row(row)) {
            partly.push(row);
        }
    }
    let on_supplies: usize = circuits.iter().map(|circuit| circuit.pieces.len()).sum();
    let mut says = Vec::new();
    if !without.is_empty() {
        says.push(format!("{} not in this sum.", rows_are(&without)));
    }
    if !partly.is_empty() {
        says.push(format!("{} not wholly in this sum.", rows_are(&partly)));
    }
    // More pieces than a job may have are cut off, and allowances without sense counted as none.
    let job_stops = |found: &Finding| found.grade == Grade::Stop && found.place == Place::Job;
    if off.findings.iter().any(job_stops) {
        says.push("What the stops of the job leave out is not in this sum.".to_owned());
    }
    match off.pieces.len().saturating_sub(on_supplies) {
        0 => {}
        1 => says.push("The supply for 1 piece is not in this sum.".to_owned()),
        pieces => says.push(format!(
            "The supply for {pieces} pieces is not in this sum."
        )),
    }
    says.into_iter()
        .map(|says| Finding::new(Grade::Stop, Place::Price, says, Source::entry("the sum")))
        .collect()
}

/// Rows by number, as they begin a sentence: "Rows 1, 3 and 4 are".
fn rows_are(rows: &[usize]) -> String {
    const MOST_NAMED: usize = 5;
    let mut named: Vec<String> = rows
        .iter()
        .take(MOST_NAMED)
        .map(|row| (row + 1).to_string())
        .collect();
    if rows.len() > MOST_NAMED {
        named.push(format!("{} more", rows.len() - MOST_NAMED));
    }
    match named.pop() {
        Some(last) if named.is_empty() => format!("Row {last} is"),
        Some(last) => format!("Rows {} and {last} are", named.join(", ")),
        None => String::new(),
    }
}

/// Supplies the plan takes more of than are on the shelf, where the book says how many there are.
fn short_of(book: &Book, parts: &Parts) -> Vec<Finding> {
    let short = |(name, taken, _): &(String, usize, _)| {
        // Of two entries with one name the first is used.
        let entry = book.supplies.iter().find(|entry| entry.name == *name)?;
        let stock = usize::try_from(entry.stock?).ok()?;
        let shelf = if stock == 0 {
            "none".to_owned()
        } else {
            stock.to_string()
        };
        (*taken > stock).then(|| {
            Finding::new(
                Grade::Note,
                Place::Supply(name.clone()),
                format!("The plan takes {taken} of {name}; the shelf has {shelf}."),
                Source::shop(),
            )
        })
    };
    parts.supplies.iter().filter_map(short).collect()
}

fn parts(book: &Book, tubes: &[TubeTotal], circuits: &[CircuitWork], pieces: usize) -> Parts {
    let mut supplies: Vec<(String, usize, Option<rust_decimal::Decimal>)> = Vec::new();
    for circuit in circuits {
        match supplies
            .iter_mut()
            .find(|(name, ..)| *name == circuit.supply.name)
        {
            Some((_, count, _)) => *count += 1,
            None => supplies.push((circuit.supply.name.clone(), 1, circuit.supply.price)),
        }
    }
    Parts {
        glass: tubes
            .iter()
            .map(|total| GlassPart {
                tube: total.name.clone(),
                glass: total.glass,
                price_per_m: book
                    .tubes
                    .iter()
                    .find(|entry| entry.name == total.name)
                    .and_then(|entry| entry.price_per_m),
            })
            .collect(),
        pieces,
        circuits: circuits.len(),
        supplies,
        waste_percent: book.allowances.waste_percent,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::book::{OutputEarthing, SupplyEntry, SupplyKind, TubeEntry};
    use crate::job::{Row, StrokesRow};

    /// Three bars that need a supply each, and a book with one supply.
    fn bars() -> (Job, Book) {
        let row = Row::Strokes(StrokesRow {
            label: "bar".to_owned(),
            strokes: "4 m".to_owned(),
            tube: "t".to_owned(),
            count: 3,
            // However long: these are sentences about supplies.
            pieces: crate::job::Pieces {
                keep_long: true,
                ..crate::job::Pieces::default()
            },
            ..StrokesRow::default()
        });
        let job = Job {
            rows: vec![row],
            ..Job::default()
        };
        let book = Book {
            supplies: vec![SupplyEntry {
                name: "4 kV 30 mA".to_owned(),
                kind: Some(SupplyKind::Iron),
                earthing: Some(OutputEarthing::MidPoint),
                no_load_volts: Some(4_000.0),
                short_circuit_ma: Some(30.0),
                ..SupplyEntry::default()
            }],
            tubes: vec![TubeEntry {
                name: "t".to_owned(),
                outer_mm: Some(12.0),
                volts_per_m: Some(550.0),
                pair_volts: Some(200.0),
                ..TubeEntry::default()
            }],
            ..Book::default()
        };
        (job, book)
    }

    #[test]
    fn what_no_supply_runs_is_said_in_whole_sentences() {
        let (job, mut book) = bars();
        book.supplies[0].no_load_volts = Some(2_000.0);
        let says = |book: &Book| {
            let mut found = workup(&job, book).findings;
            found.remove(0).says.replace('\u{202f}', " ")
        };
        assert_eq!(
            says(&book),
            "No supply runs any of the 3 pieces from “bar (1 of 3)” to “bar (3 of 3)”. Nearest is 4 kV 30 mA: \
             Overloaded: the string wants 2 623 V where the supply gives at most 1 519 V; there is \
             no current at which it runs. Would fit: a supply of about 3 800 V no-load at 30 mA, or \
             the longest piece, “bar (1 of 3)”, bent as 3, each with electrodes and a supply of its \
             own, and the others likewise."
        );
        book.supplies.clear();
        assert_eq!(
            says(&book),
            "No supply runs any of the 3 pieces from “bar (1 of 3)” to “bar (3 of 3)”. There is no supply to \
             choose from: add one to the shop book, or see why each was refused."
        );
    }

    #[test]
    fn a_plan_that_takes_more_than_the_shelf_has_says_so() {
        let (job, mut book) = bars();
        let mut of_stock = |stock| {
            book.supplies[0].stock = stock;
            let work = workup(&job, &book);
            assert_eq!(work.circuits.len(), 3, "{:?}", work.findings);
            let place = Place::Supply("4 kV 30 mA".to_owned());
            let mut found = work.findings.into_iter().filter(|f| f.place == place);
            found.next().map(|finding| (finding.grade, finding.says))
        };
        let note = |says: &str| Some((Grade::Note, says.to_owned()));
        assert_eq!(
            of_stock(Some(2)),
            note("The plan takes 3 of 4 kV 30 mA; the shelf has 2.")
        );
        assert_eq!(
            of_stock(Some(0)),
            note("The plan takes 3 of 4 kV 30 mA; the shelf has none.")
        );
        assert_eq!(of_stock(Some(3)), None);
        assert_eq!(of_stock(None), None, "not counted");
    }
}
