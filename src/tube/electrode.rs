//! Electrodes: an entry checked, and whether it fits the glass.

use super::finding;
use crate::book::ElectrodeEntry;
use crate::measure::{Length, Milliamps};
use crate::rules::Finding;

/// A checked electrode type.
#[derive(Debug, Clone, PartialEq)]
pub struct Electrode {
    /// Name in the book.
    pub name: String,
    /// Greatest steady current it is rated for; None: not known.
    pub rated: Option<Milliamps>,
    /// Least outer diameter of glass it fits; None: not known.
    pub least_outer: Option<Length>,
    /// Greatest outer diameter of glass it fits; None: not known.
    pub most_outer: Option<Length>,
}

impl Electrode {
    /// Checks an entry. Everything may be unknown; nothing may contradict itself.
    ///
    /// # Errors
    /// Every contradiction, as findings at the electrode.
    pub fn read(entry: &ElectrodeEntry) -> Result<Self, Vec<Finding>> {
        let wrong = finding::of_electrode(entry);
        if !wrong.is_empty() {
            return Err(wrong);
        }
        Ok(Self {
            name: entry.name.clone(),
            rated: entry.rated_ma.map(Milliamps::from_ma),
            least_outer: entry.least_outer_mm.map(Length::from_mm),
            most_outer: entry.most_outer_mm.map(Length::from_mm),
        })
    }

    /// Whether it fits glass of this outer diameter, as far as is known.
    pub fn fits(&self, outer: Length) -> bool {
        self.least_outer.is_none_or(|least| least <= outer)
            && self.most_outer.is_none_or(|most| outer <= most)
    }

    /// The electrode a tube type names, out of the book's list, and what is to be said of it.
    pub(super) fn of(
        tube: &str,
        outer: Length,
        named: &str,
        list: &[ElectrodeEntry],
    ) -> (Option<Self>, Vec<Finding>) {
        if named.is_empty() {
            return (None, Vec::new());
        }
        let mut entries = list.iter().filter(|entry| entry.name == named);
        let Some(entry) = entries.next() else {
            return (None, vec![finding::no_electrode(tube, named)]);
        };
        let mut findings = Vec::new();
        if entries.next().is_some() {
            findings.push(finding::two_electrodes(named));
        }
        let electrode = match Self::read(entry) {
            Ok(electrode) => electrode,
            Err(wrong) => return (None, wrong),
        };
        if !electrode.fits(outer) {
            findings.push(finding::does_not_fit(tube, outer, &electrode));
        }
        (Some(electrode), findings)
    }
}
