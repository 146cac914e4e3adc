//! A finding: one limit met or missed, as data. The page and the papers only print findings.

/// How grave a finding is, lightest first.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Grade {
    /// Good to know.
    Note,
    /// A person must decide.
    Look,
    /// Do not build it.
    Stop,
}

impl Grade {
    /// The grade as a word.
    pub const fn word(self) -> &'static str {
        match self {
            Self::Note => "note",
            Self::Look => "look",
            Self::Stop => "stop",
        }
    }
}

/// Where a finding belongs. Numbers count from 0, in the order of the [`crate::Workup`].
#[derive(Debug, Clone, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Place {
    /// The job as a whole.
    Job,
    /// A row of the job.
    Row(usize),
    /// A piece of glass.
    Piece(usize),
    /// A circuit of the plan.
    Circuit(usize),
    /// A supply of the book, by name.
    Supply(String),
    /// A tube type of the book, by name.
    Tube(String),
    /// An electrode of the book, by name.
    Electrode(String),
    /// A rule set of the book, by name.
    Rules(String),
    /// The price.
    Price,
}

/// Where a limit comes from.
#[derive(Debug, Clone, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Source {
    /// Clause, where the source has clauses.
    pub clause: String,
    /// Rule set and edition, or "shop book", "common practice", "electrical model", or which entry.
    pub from: String,
    /// How the limit is known.
    pub standing: &'static str,
}

impl Source {
    /// A setting of the shop book.
    pub fn shop() -> Self {
        Self {
            clause: String::new(),
            from: "shop book".to_owned(),
            standing: "shop setting",
        }
    }

    /// The electrical model this program works with.
    pub fn model() -> Self {
        Self {
            clause: String::new(),
            from: "electrical model".to_owned(),
            standing: "derived",
        }
    }

    /// Custom of the trade, no published source.
    pub fn practice() -> Self {
        Self {
            clause: String::new(),
            from: "common practice".to_owned(),
            standing: "common practice, no source",
        }
    }

    /// A threshold this program draws itself, where no code and no custom is known.
    pub fn own_choice() -> Self {
        Self {
            clause: String::new(),
            from: "this program's choice".to_owned(),
            standing: "this program's choice, no source",
        }
    }

    /// Readings at the shop's own bench.
    pub fn bench() -> Self {
        Self::entry("bench readings")
    }

    /// What was entered itself, in a word for which entry it is: "as typed in the row", "the supply's
    /// entry".
    pub fn entry(which: &'static str) -> Self {
        Self {
            clause: String::new(),
            from: which.to_owned(),
            standing: which,
        }
    }

    /// In a few words, for a caption.
    pub fn words(&self) -> String {
        if self.clause.is_empty() {
            self.from.clone()
        } else {
            format!("{}, {}", self.from, self.clause)
        }
    }
}

/// One limit met or missed.
#[derive(Debug, Clone, PartialEq)]
pub struct Finding {
    /// How grave.
    pub grade: Grade,
    /// Where.
    pub place: Place,
    /// What, as a sentence.
    pub says: String,
    /// The figure found, in `unit`.
    pub value: Option<f64>,
    /// The limit it was held against, in `unit`.
    pub limit: Option<f64>,
    /// Unit of both.
    pub unit: &'static str,
    /// Where the limit comes from.
    pub source: Source,
}

impl Finding {
    /// A finding with no figures.
    pub fn new(grade: Grade, place: Place, says: impl Into<String>, source: Source) -> Self {
        Self {
            grade,
            place,
            says: says.into(),
            value: None,
            limit: None,
            unit: "",
            source,
        }
    }

    /// The same with the figure and the limit.
    #[must_use]
    pub fn with(mut self, value: f64, limit: f64, unit: &'static str) -> Self {
        (self.value, self.limit, self.unit) = (Some(value), Some(limit), unit);
        self
    }

    /// The same, elsewhere.
    #[must_use]
    pub fn at(mut self, place: Place) -> Self {
        self.place = place;
        self
    }

    /// The gravest of some findings.
    pub fn gravest<'f>(findings: impl IntoIterator<Item = &'f Self>) -> Option<Grade> {
        findings.into_iter().map(|finding| finding.grade).max()
    }
}
