//! Whether a given prints what it is: its texts are written again from its numbers.

use super::Given;
use crate::card::Item;
use crate::units::{
    Angle, Density, Expansion, FluxDensity, Gradient, Length, Pressure, Quantity, Temperature, TemperatureGradient,
    Warming, with_typed_unit,
};

/// How the number of a kind is written.
type Writer = fn(f64) -> String;

fn written<Q: Quantity>(si: f64) -> String {
    with_typed_unit(Q::from_si(si))
}

/// The kinds whose text follows from their number.
const QUANTITIES: [(&str, Writer); 11] = [
    (Pressure::KIND, written::<Pressure>),
    (Angle::KIND, written::<Angle>),
    (Length::KIND, written::<Length>),
    (Density::KIND, written::<Density>),
    (Gradient::KIND, written::<Gradient>),
    (Warming::KIND, written::<Warming>),
    (Temperature::KIND, written::<Temperature>),
    (TemperatureGradient::KIND, written::<TemperatureGradient>),
    (Expansion::KIND, written::<Expansion>),
    (FluxDensity::KIND, written::<FluxDensity>),
    (f64::KIND, written::<f64>),
];

/// What the kind of an azimuth begins with; the reference follows.
const AZIMUTH: &str = "azimuth from ";

/// What a given prints that is not what its numbers say, each in a sentence. `inputs` are those of the sheet's
/// cards: of a value made of many numbers the same text must stand with one of them.
pub fn misprints(given: &Given, inputs: &[&Item]) -> Vec<String> {
    let item = &given.item;
    let mut found = Vec::new();
    if !says(item, inputs) {
        found.push(format!("Given {} prints \"{}\", which is not the value computed with", item.symbol, item.shown));
    }
    let kind = match item.kind.as_str() {
        kind if kind.starts_with(AZIMUTH) => Angle::KIND,
        Temperature::KIND => Warming::KIND,
        kind => kind,
    };
    let again = match (given.sd, writer(kind)) {
        (None, _) => Some(String::new()),
        (Some(sd), Some(write)) => Some(write(sd)),
        (Some(_), None) => None,
    };
    if again.is_some_and(|again| again != given.give_or_take) {
        found.push(format!(
            "Given {} prints ± \"{}\", which is not the deviation stated",
            item.symbol, given.give_or_take
        ));
    }
    found
}

fn writer(kind: &str) -> Option<Writer> {
    QUANTITIES.iter().find(|(known, _)| *known == kind).map(|(_, write)| *write)
}

fn says(item: &Item, inputs: &[&Item]) -> bool {
    match (item.si.as_slice(), writer(&item.kind), item.kind.strip_prefix(AZIMUTH)) {
        // A depth names its datum after the number.
        ([si], Some(write), _) => {
            item.shown.strip_prefix(&write(*si)).is_some_and(|rest| rest.is_empty() || no_number(rest))
        }
        ([si], _, Some(north)) => item.shown.strip_suffix(&format!("° from {north}")).is_some_and(|degrees| {
            let turns = degrees.parse().map_or(f64::NAN, |degrees: f64| (degrees - si.to_degrees()) / 360.0);
            (turns - turns.round()).abs() < 1e-9
        }),
        _ => {
            let mut same = inputs.iter().filter(|input| input.same_value(item)).peekable();
            same.peek().is_none() || same.any(|input| input.shown == item.shown)
        }
    }
}

/// Whether a text goes on in words.
fn no_number(rest: &str) -> bool {
    rest.starts_with(' ') && !rest.contains(|c: char| c.is_ascii_digit())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::frames::{Azimuth, Depth};
    use crate::sheet::{IntoGiven, Sheet, Source};
    use crate::units::Units;

    /// Every given prints what it is; no digit of it can be another.
    #[track_caller]
    fn holds<G: IntoGiven>(value: G) {
        let mut sheet = Sheet::new("A sheet");
        sheet.given("x", "a value", value, Source::measured("a test"));
        let given = sheet.record().givens.remove(0);
        assert_eq!(misprints(&given, &[]), Vec::<String>::new());
        for (place, digit) in given.item.shown.char_indices().filter(|(_, c)| c.is_ascii_digit()) {
            let mut other = given.clone();
            let next = if digit == '9' { "8" } else { "9" };
            other.item.shown.replace_range(place..=place, next);
            assert_eq!(misprints(&other, &[]).len(), 1, "{}", other.item.shown);
        }
        let mut other = given.clone();
        // What was computed is shown with a few decimals: less than a unit of the last need not be seen.
        other.item.si[0] *= 1.1;
        assert_eq!(misprints(&other, &[]).len(), 1, "{} of {:?}", other.item.shown, other.item.si);
        let mut other = given;
        other.give_or_take.push('1');
        assert_eq!(misprints(&other, &[]).len(), 1, "{}", other.give_or_take);
    }

    #[test]
    fn what_is_printed_is_what_is_computed_with() {
        holds(66.9.mpa().give_or_take(1.3.mpa()));
        holds(9935.psi());
        holds((-2.4).deg().give_or_take(0.3.deg()));
        holds(0.25);
        holds(1.42.sg());
        holds(22.6.mpa_per_km());
        holds(8.5.inch());
        holds(1e-5.per_kelvin());
        holds((-20).kelvin());
        holds(68.5.celsius().give_or_take(2.kelvin()));
        holds(30.kelvin_per_km());
        holds(Azimuth::from_magnetic_north(127.deg()).give_or_take(8.deg()));
        holds(Azimuth::from_grid_north(7.5.deg()));
        holds(Azimuth::from_true_north(361.25.deg()));
        holds(Azimuth::from_true_north((-5).deg()));
        holds(Depth::below_rotary_table(2950.m()));
    }

    #[test]
    fn a_value_of_many_numbers_is_printed_as_a_card_prints_it() {
        let mut sheet = Sheet::new("A sheet");
        sheet.given("x", "a value", 1.mpa(), Source::measured("a test"));
        let mut given = sheet.record().givens.remove(0);
        given.item.kind = "planes".to_owned();
        given.item.si = vec![1.0, 2.0];
        let input = Item { shown: "2 planes".to_owned(), ..given.item.clone() };
        assert_eq!(misprints(&given, &[&input]).len(), 1);
        assert_eq!(misprints(&given, &[&input, &given.item.clone()]), Vec::<String>::new());
    }
}
