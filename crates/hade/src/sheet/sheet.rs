//! The sheet itself: what a notebook writes on.

use std::io::Read;
use std::path::Path;

use sha2::{Digest, Sha256};

use super::record::{Assumption, Entry, Frontmatter, RECORD_SCHEMA, Record};
use super::{Basis, DataFile, Given, IntoGiven, Source, trace};
use crate::card::{Card, Explain};
use crate::error::{Error, Result};

/// A calculation sheet. Running a cell again replaces what it added: givens by symbol, cards by
/// kind and title, files by path, words by their text.
#[derive(Clone, Debug)]
pub struct Sheet {
    title: String,
    front: Frontmatter,
    givens: Vec<Given>,
    data: Vec<DataFile>,
    assumptions: Vec<Assumption>,
    entries: Vec<Written>,
    conclusions: Vec<String>,
    conflicts: Vec<String>,
    /// What was left out because it is no number: its symbol or title, and the sentence that says so.
    no_numbers: Vec<(String, String)>,
}

#[derive(Clone, Debug)]
enum Written {
    Card { card: Box<Card>, by_sheet: bool },
    Note(String),
}

impl Sheet {
    /// An empty sheet with its title: site, hole and question in one line.
    pub fn new(title: impl Into<String>) -> Self {
        Sheet {
            title: title.into(),
            front: Frontmatter::default(),
            givens: Vec::new(),
            data: Vec::new(),
            assumptions: Vec::new(),
            entries: Vec::new(),
            conclusions: Vec::new(),
            conflicts: Vec::new(),
            no_numbers: Vec::new(),
        }
    }

    /// States a value with its source, and hands it back for the computation. A symbol that is
    /// given again with another meaning replaces the first, and the sheet says so. What is no number is
    /// handed back too, for the first operation that can refuse it; the sheet says that it left it out, and
    /// makes no memo until it is given anew.
    pub fn given<G: IntoGiven>(&mut self, symbol: &str, meaning: &str, value: G, source: Source) -> G::Value {
        let (value, item, sd) = value.into_given(symbol, meaning);
        let given = Given {
            item,
            give_or_take: sd.as_ref().map(|(_, text)| text.clone()).unwrap_or_default(),
            sd: sd.map(|(si, _)| si),
            source,
        };
        self.no_numbers.retain(|(of, _)| of != symbol);
        if given.item.si.iter().any(|v| !v.is_finite()) {
            let said = format!(
                "{symbol}, \"{meaning}\", is given as {}, which is no number, and is left out",
                given.item.shown
            );
            self.no_numbers.push((symbol.to_owned(), said));
            return value;
        }
        let twice = |old: &&Given| {
            old.item.symbol == symbol && (old.item.name != given.item.name || !old.item.same_value(&given.item))
        };
        // In a notebook a cell that is run again gives its value again; only the memo of a clean run says so.
        if let Some(old) = self.givens.iter().find(twice) {
            let conflict = format!(
                "{symbol} is given twice, as \"{}\" ({}) and as \"{}\" ({}); only the second is kept",
                old.item.name, old.item.shown, given.item.name, given.item.shown
            );
            replace_or_push(&mut self.conflicts, conflict.clone(), |c| *c == conflict);
        }
        replace_or_push(&mut self.givens, given, |g| g.item.symbol == symbol);
        value
    }

    /// Takes in a data file, which is hashed here and attached to the memo; hands back its path.
    pub fn data(&mut self, path: &str, about: &str) -> Result<String> {
        let (sha256, bytes) = hash_file(path)?;
        let file = DataFile { path: path.to_owned(), about: about.to_owned(), sha256, bytes };
        replace_or_push(&mut self.data, file, |f| f.path == path);
        Ok(path.to_owned())
    }

    /// States an assumption and on what it rests.
    pub fn assume(&mut self, words: &str, basis: Basis) {
        replace_or_push(&mut self.assumptions, Assumption { words: words.to_owned(), basis }, |a| a.words == words);
    }

    /// Adds a result, after the results it stands on that are not on the sheet yet. A result of the
    /// same kind and title is replaced where it stands; where its inputs were others, the memo of a
    /// clean run says so.
    pub fn add<E: Explain>(&mut self, result: &E) {
        let card = result.card();
        let numbers = card.explanation.inputs.iter().chain(&card.explanation.results);
        self.no_numbers.retain(|(of, _)| of != card.title());
        if let Some(item) = numbers.clone().find(|item| item.si.iter().any(|v| !v.is_finite())) {
            let said = format!(
                "the result \"{}\" is left out, because its {} ({}) is no number",
                card.title(),
                item.name,
                item.shown
            );
            self.no_numbers.push((card.title().to_owned(), said));
            return;
        }
        let mut place = self.place_of(&card).unwrap_or(self.entries.len());
        for below in result.upstream() {
            let known = self.entries.iter().position(|e| {
                matches!(e, Written::Card { card: c, .. } if c.kind == below.kind && c.outcome == below.outcome && c.inputs == below.inputs)
            });
            match known {
                Some(at) if at < place => {}
                // It stands after what stands on it, whose cell was run before: it moves in front.
                Some(at) => {
                    let moved = self.entries.remove(at);
                    self.entries.insert(place, moved);
                    place += 1;
                }
                // One with other numbers may stand under another result; if not, the record drops it.
                None => {
                    self.entries.insert(place, Written::Card { card: Box::new(below), by_sheet: true });
                    place += 1;
                }
            }
        }
        let Some(Written::Card { card: old, by_sheet }) =
            self.place_of(&card).and_then(|old| self.entries.get_mut(old))
        else {
            self.entries.push(Written::Card { card: Box::new(card), by_sheet: false });
            return;
        };
        if !*by_sheet && old.inputs != card.inputs {
            let conflict = format!(
                "the result \"{}\" is added twice with different inputs, and only the second is kept; to keep both, name their stresses with .named(\"…\")",
                card.title()
            );
            replace_or_push(&mut self.conflicts, conflict.clone(), |c| *c == conflict);
        }
        (**old, *by_sheet) = (card, false);
    }

    /// The place of a result of this kind and title.
    fn place_of(&self, card: &Card) -> Option<usize> {
        self.entries.iter().position(
            |e| matches!(e, Written::Card { card: old, .. } if old.kind == card.kind && old.title() == card.title()),
        )
    }

    /// A note at this place of the work.
    pub fn note(&mut self, words: impl AsRef<str>) {
        let words = words.as_ref();
        replace_or_push(
            &mut self.entries,
            Written::Note(words.to_owned()),
            |e| matches!(e, Written::Note(w) if w == words),
        );
    }

    /// A conclusion; the memo begins with them.
    pub fn conclude(&mut self, words: impl AsRef<str>) {
        let words = words.as_ref();
        replace_or_push(&mut self.conclusions, words.to_owned(), |c| c == words);
    }

    /// The site.
    pub fn site(&mut self, name: impl AsRef<str>) {
        let name = name.as_ref();
        name.clone_into(&mut self.front.site);
    }
    /// The hole, face or fault.
    pub fn place(&mut self, name: impl AsRef<str>) {
        let name = name.as_ref();
        name.clone_into(&mut self.front.place);
    }
    /// What the calculation is for.
    pub fn purpose(&mut self, words: impl AsRef<str>) {
        let words = words.as_ref();
        words.clone_into(&mut self.front.purpose);
    }
    /// What it covers.
    pub fn scope(&mut self, words: impl AsRef<str>) {
        let words = words.as_ref();
        words.clone_into(&mut self.front.scope);
    }
    /// Something it leaves out.
    pub fn exclude(&mut self, words: impl AsRef<str>) {
        let words = words.as_ref();
        replace_or_push(&mut self.front.exclusions, words.to_owned(), |w| w == words);
    }
    /// A range over which the conclusions hold (depths, inclinations, mud, time open).
    pub fn valid_for(&mut self, words: impl AsRef<str>) {
        let words = words.as_ref();
        replace_or_push(&mut self.front.valid_for, words.to_owned(), |w| w == words);
    }
    /// Something that makes the conclusions void.
    pub fn void_if(&mut self, words: impl AsRef<str>) {
        let words = words.as_ref();
        replace_or_push(&mut self.front.void_if, words.to_owned(), |w| w == words);
    }
    /// Data that was left out, and why.
    pub fn leave_out(&mut self, what: &str, why: &str) {
        replace_or_push(&mut self.front.left_out, (what.to_owned(), why.to_owned()), |(w, _)| w == what);
    }
    /// An open item.
    pub fn open_item(&mut self, words: impl AsRef<str>) {
        let words = words.as_ref();
        replace_or_push(&mut self.front.open_items, words.to_owned(), |w| w == words);
    }
    /// Why something was chosen (the criterion, the wall model, a margin).
    pub fn because(&mut self, topic: &str, reason: &str) {
        replace_or_push(&mut self.front.design_basis, (topic.to_owned(), reason.to_owned()), |(t, _)| t == topic);
    }

    /// The record of the sheet as it stands. A card that the sheet added itself and that nothing
    /// stands on any more (its cell was run again with other numbers) is left out.
    pub fn record(&self) -> Record {
        let mut kept: Vec<&Written> = self.entries.iter().collect();
        while let Some(orphan) = orphan(&kept, &self.givens) {
            kept.remove(orphan);
        }
        let mut earlier: Vec<&Card> = Vec::new();
        let mut entries = Vec::new();
        for written in kept {
            match written {
                Written::Note(words) => entries.push(Entry::Note { words: words.clone() }),
                Written::Card { card, by_sheet } => {
                    let lineage = trace(card, &self.givens, &self.data, &earlier);
                    entries.push(Entry::Card { card: card.clone(), lineage, added_by_sheet: *by_sheet });
                    earlier.push(card);
                }
            }
        }
        Record {
            schema: RECORD_SCHEMA,
            program: concat!("hade ", env!("CARGO_PKG_VERSION")).to_owned(),
            title: self.title.clone(),
            front: self.front.clone(),
            givens: self.givens.clone(),
            data: self.data.clone(),
            assumptions: self.assumptions.clone(),
            entries,
            conclusions: self.conclusions.clone(),
            conflicts: self.conflicts.clone(),
            no_numbers: self.no_numbers.iter().map(|(_, said)| said.clone()).collect(),
        }
    }
}

/// The place of a card that the sheet added itself and whose results no other card takes in.
fn orphan(entries: &[&Written], givens: &[Given]) -> Option<usize> {
    let cards: Vec<(usize, &Card, bool)> = entries
        .iter()
        .enumerate()
        .filter_map(|(i, e)| match e {
            Written::Card { card, by_sheet } => Some((i, card.as_ref(), *by_sheet)),
            Written::Note(_) => None,
        })
        .collect();
    let taken = |card: &Card, place: usize| {
        cards.iter().filter(|(i, ..)| *i > place).any(|(_, other, _)| {
            other.explanation.inputs.iter().any(|input| {
                card.explanation.results.iter().any(|result| result.same_value(input))
                    && !givens.iter().any(|g| g.item.same_value(input))
            })
        })
    };
    cards.iter().find(|(i, card, by_sheet)| *by_sheet && !taken(card, *i)).map(|(i, ..)| *i)
}

fn replace_or_push<T>(list: &mut Vec<T>, new: T, same: impl Fn(&T) -> bool) {
    match list.iter_mut().find(|old| same(old)) {
        Some(old) => *old = new,
        None => list.push(new),
    }
}

/// The SHA-256 of a file and its size, read in pieces.
pub(crate) fn hash_file(path: impl AsRef<Path>) -> Result<(String, u64)> {
    let path = path.as_ref();
    let unreadable = |e: std::io::Error| Error::Unreadable {
        path: path.display().to_string(),
        line: None,
        column: None,
        why: e.to_string(),
        fix: "give the path relative to the notebook's folder".to_owned(),
    };
    let mut file = std::fs::File::open(path).map_err(unreadable)?;
    let mut hasher = Sha256::new();
    let mut buffer = [0_u8; 65_536];
    let mut bytes = 0_u64;
    loop {
        let n = file.read(&mut buffer).map_err(unreadable)?;
        if n == 0 {
            break;
        }
        hasher.update(buffer.get(..n).unwrap_or_default());
        bytes += n as u64;
    }
    Ok((hex(&hasher.finalize()), bytes))
}

/// Lower-case hexadecimal.
pub(crate) fn hex(bytes: &[u8]) -> String {
    bytes.iter().map(|b| format!("{b:02x}")).collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::prelude::*;
    use crate::sheet::Origin;

    fn sheet_with_stress(sheet: &mut Sheet, sv: f64) -> Stress {
        let sv =
            sheet.given("S_v", "vertical stress", sv.mpa().give_or_take(1.3.mpa()), Source::measured("density log"));
        let sh_max =
            sheet.given("S_Hmax", "larger horizontal stress", 58.2.mpa(), Source::assumed("from breakout width"));
        let sh_min =
            sheet.given("S_hmin", "smaller horizontal stress", 47.1.mpa(), Source::measured("extended leak-off"));
        let measured = sheet.given(
            "A_b",
            "breakout azimuth",
            Azimuth::from_magnetic_north(127.deg()),
            Source::measured("image log"),
        );
        let declination = sheet.given("D", "declination", (-2.5).deg(), Source::measured("survey company"));
        let sh_max_azimuth = measured.with_declination(declination).unwrap().perpendicular();
        Stress::from_horizontals(Horizontals { sv, sh_max, sh_min, sh_max_azimuth }).unwrap()
    }

    #[test]
    fn every_input_is_traced_without_adding_the_steps_between() {
        let mut sheet = Sheet::new("test");
        let s = sheet_with_stress(&mut sheet, 66.9);
        let i = sheet.given("i", "inclination", 42.deg(), Source::measured("survey"));
        let a = sheet.given("a", "azimuth", Azimuth::from_true_north((-10).deg()), Source::measured("survey"));
        let chain = Attitude { inclination: i, azimuth: a }.chain().unwrap();
        sheet.add(&s.principals());
        sheet.add(&chain.carry(&s));
        let record = sheet.record();
        assert_eq!(record.unknown_inputs(), vec![], "{:#?}", record.unknown_inputs());
        let kinds: Vec<_> = record.cards().iter().map(|(c, _)| c.kind.clone()).collect();
        assert_eq!(
            kinds,
            ["azimuth-to-true-north", "stress-tensor", "principal-stresses", "rotation-chain", "carried-stress"]
        );
        let (_, origins) = record.cards()[1];
        assert_eq!(origins[0], Origin::Given { symbol: "S_v".to_owned() });
        assert_eq!(origins[3], Origin::Outcome { card: 1, result: "azimuth from true north".to_owned() });
    }

    #[test]
    fn a_symbol_with_two_meanings_is_said() {
        let mut sheet = Sheet::new("test");
        for _ in 0..2 {
            sheet.given("P_p", "pore pressure", 31.mpa(), Source::measured("a test"));
        }
        assert!(sheet.record().conflicts.is_empty());
        sheet.given("P_p", "cohesion", 6.mpa(), Source::measured("a core"));
        let said = sheet.record().conflicts;
        assert_eq!(said.len(), 1);
        assert!(said[0].contains("\"pore pressure\" (31 MPa) and as \"cohesion\" (6 MPa)"), "{said:?}");
    }

    #[test]
    fn what_is_no_number_is_left_out_and_said_until_it_is_one() {
        let mut sheet = Sheet::new("test");
        assert!(sheet.given("q", "cohesion", f64::NAN.mpa(), Source::measured("a core")).in_mpa().is_nan());
        let said = "q, \"cohesion\", is given as NaN MPa, which is no number, and is left out";
        assert_eq!(sheet.record().no_numbers, [said]);
        assert_eq!((sheet.record().givens.len(), sheet.record().conflicts.len()), (0, 0));
        assert!(sheet.text().contains(said) && sheet.html().contains("is no number, and is left out"));
        let read = Record::from_json(&sheet.record().to_json().unwrap()).unwrap();
        assert_eq!(read, sheet.record());
        sheet.given("q", "cohesion", 6.mpa(), Source::measured("a core"));
        assert_eq!((sheet.record().no_numbers.len(), sheet.record().givens.len()), (0, 1));
    }

    #[test]
    fn an_input_that_bypasses_the_sheet_is_named() {
        let mut sheet = Sheet::new("test");
        let s = sheet_with_stress(&mut sheet, 66.9);
        sheet.add(&s.mohr().effective(31.5.mpa()).unwrap());
        let unknown = sheet.record().unknown_inputs();
        assert_eq!(unknown.len(), 1);
        assert_eq!(unknown[0].1, "pore pressure = 31.5 MPa");
        assert_eq!(unknown[0].2, Origin::Unmatched);
    }

    #[test]
    fn running_a_cell_again_replaces_what_it_added() {
        let mut sheet = Sheet::new("test");
        for sv in [66.9, 65.0] {
            let s = sheet_with_stress(&mut sheet, sv);
            sheet.add(&s.principals());
            sheet.note("looked at");
        }
        let record = sheet.record();
        assert_eq!(record.givens.len(), 5);
        assert_eq!(record.entries.len(), 4);
        assert_eq!(record.unknown_inputs(), vec![]);
        let again = Record::from_json(&record.to_json().unwrap()).unwrap();
        assert_eq!(again, record);
        assert_eq!(again.to_json().unwrap(), record.to_json().unwrap());
    }

    /// Two stresses without names have cards of one title; with names both stay, each over its own
    /// steps.
    #[test]
    fn two_results_of_one_title_are_said_and_names_keep_them_apart() {
        let mut sheet = Sheet::new("test");
        let (a, b) = (sheet_with_stress(&mut sheet, 66.9), sheet_with_stress(&mut sheet, 60.0));
        sheet.add(&a.principals());
        sheet.add(&b.principals());
        assert!(sheet.record().conflicts.iter().any(|c| c.contains("\"Principal stresses\" is added twice")));
        let mut sheet = Sheet::new("test");
        let (a, b) = (a.named("the log"), b.named("the cell"));
        sheet.add(&a.principals());
        sheet.add(&b.principals());
        let record = sheet.record();
        assert_eq!(record.conflicts, Vec::<String>::new());
        let kinds: Vec<_> = record.cards().iter().map(|(c, _)| c.title().to_owned()).collect();
        assert_eq!(kinds.len(), 5, "{kinds:?}");
        assert!(kinds.contains(&"Principal stresses of the cell".to_owned()), "{kinds:?}");
    }

    #[test]
    fn what_a_result_stands_on_stays_before_it_when_a_cell_is_run_again() {
        let mut sheet = Sheet::new("test");
        for measured in [127.0, 131.0] {
            let a = sheet.given(
                "A_b",
                "breakout azimuth",
                Azimuth::from_magnetic_north(measured.deg()),
                Source::measured("log"),
            );
            let d = sheet.given("D", "declination", (-2.5).deg(), Source::measured("survey company"));
            let i = sheet.given("i", "inclination", 42.deg(), Source::measured("survey"));
            let azimuth = a.with_declination(d).unwrap();
            sheet.note("before");
            sheet.add(&Attitude { inclination: i, azimuth }.named("X-1").chain().unwrap());
        }
        let record = sheet.record();
        assert_eq!(record.unknown_inputs(), vec![], "{:#?}", record.unknown_inputs());
        let kinds: Vec<_> = record.cards().iter().map(|(c, _)| c.kind.clone()).collect();
        assert_eq!(kinds, ["azimuth-to-true-north", "rotation-chain"]);
        assert_eq!(record.entries.len(), 3);
    }

    #[test]
    fn records_of_another_schema_and_other_json_are_refused() {
        let text = Sheet::new("t").record().to_json().unwrap().replace("\"schema\": 1", "\"schema\": 2");
        assert!(Record::from_json(&text).unwrap_err().to_string().contains("schema is 2"));
        assert!(Record::from_json("{}").unwrap_err().to_string().contains("names no schema"));
        assert!(Record::from_json("not json").is_err());
    }
}
