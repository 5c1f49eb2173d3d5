//! Reading drilling events from CSV, strictly and line by line.

use std::io::Read;
use std::path::Path;

use super::event::{DrillingEvent, DrillingEvents, EventKind, MOST};
use crate::error::Result;
use crate::field::{DEPTHS, MUD_WEIGHTS, require_measured_depths};
use crate::frames::Name;
use crate::lines::{Expected, Lines, Table, reason, shown};

const EXPECTED: Expected = Expected {
    keys: &[&["hole", "datum", "depth_datum", "depth_unit", "mud_weight_unit"]],
    always: &[
        (&["datum", "depth_datum"], "# datum: rotary table"),
        (&["depth_unit"], "# depth_unit: m"),
        (&["mud_weight_unit"], "# mud_weight_unit: sg"),
    ],
    file: "a table of events with the columns md, kind, mud_weight",
    names: "md, kind, mud_weight, ecd",
    besides: &[&["ecd"]],
    units_in_names: false,
    rows: ["event", "events"],
    most: MOST,
    fewer: "keep the events of the section that is looked at",
};

pub(super) fn read_csv(path: &Path) -> Result<DrillingEvents> {
    read(Lines::open(path)?)
}

pub(super) fn read<R: Read>(lines: Lines<R>) -> Result<DrillingEvents> {
    let mut table = Table::open(lines, &EXPECTED)?;
    let (md, kind) = (table.column(&["md", "measured depth"])?, table.column(&["kind", "event"])?);
    let weight = table.column(&["mud_weight", "mw"])?;
    let ecd = table.column_if_any(&["ecd", "circulating_density"])?;
    let declared = table.declared();
    let (depth, density) = (declared.unit(&DEPTHS, None)?, declared.unit(&MUD_WEIGHTS, None)?);
    require_measured_depths(declared)?;
    let mut events = Vec::new();
    while let Some(row) = table.next_row()? {
        let words = table.text(&row, &kind)?;
        let Some(what) = EventKind::from_words(words) else {
            let known: Vec<&str> = EventKind::ALL.into_iter().map(EventKind::words).collect();
            let why = format!("\"{}\" is no kind of event that is known here", shown(words));
            return Err(table.bad_in(&kind, why, format!("write one of {}", known.join(", "))));
        };
        let at = table.number(&row, &md)?;
        if at < 0.0 {
            return Err(table.bad_in(
                &md,
                format!("measured depth {at} is negative"),
                "count it along the hole from the rotary table",
            ));
        }
        let event = DrillingEvent {
            md: depth(at),
            kind: what,
            mud_weight: density(table.number(&row, &weight)?),
            circulating_density: table.number_if_any(&row, ecd.as_ref())?.map(density),
        };
        events.push(event.checked().map_err(|e| table.bad(reason(&e), "correct the row"))?);
    }
    let hole = table.declared().get("hole").map(|name| Name::new(&shown(name)));
    Ok(DrillingEvents { events, file: Some(table.source()), hole })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Units as _;
    use proptest::prelude::*;

    const HEADER: &str = "# depth_datum: rotary table\n# depth_unit: m\n# mud_weight_unit: sg\n";
    const GOOD: &str = "MD,Kind,Mud_Weight,ECD,remark\n2410,losses,1.35,1.42,seepage\n2500,\"FIT\",1.6,,\n";

    fn parse(text: &str) -> Result<DrillingEvents> {
        read(Lines::over(text.as_bytes(), "e.csv"))
    }
    fn refused(text: &str) -> String {
        parse(text).unwrap_err().to_string()
    }
    fn with(from: &str, to: &str) -> String {
        let text = format!("{HEADER}{GOOD}");
        assert!(text.contains(from), "{from}");
        refused(&text.replacen(from, to, 1))
    }

    #[test]
    fn reads_events_with_their_units() {
        let events = parse(&format!("{HEADER}{GOOD}")).unwrap().events();
        assert_eq!((events[0].kind, events[1].kind), (EventKind::Losses, EventKind::FormationIntegrity));
        assert_eq!((events[0].md, events[0].circulating_density), (2410.m(), Some(1.42.sg())));
        assert_eq!(events[1].circulating_density, None);
        let spreadsheet =
            format!("\u{feff}{HEADER}{GOOD},,,,\n").replace('\n', "\r\n").replace("sg", "ppg").replace(": m", ": ft");
        let events = parse(&spreadsheet).unwrap().events();
        assert_eq!((events[0].md, events[0].mud_weight), (2410.ft(), 1.35.ppg()));
        for kind in EventKind::ALL {
            assert_eq!(EventKind::from_words(kind.words()), Some(kind));
        }
    }

    #[test]
    fn bad_files_say_where_and_what_to_do() {
        assert!(with("# depth_datum: rotary table\n", "").contains("which level"));
        assert!(with("rotary table", "mean sea level").contains("measured depths count from the rotary table"));
        assert!(with("# depth_unit: m\n", "").contains("# depth_unit: m | ft"));
        assert!(with("# mud_weight_unit: sg\n", "").contains("# mud_weight_unit: sg | kg/m3"));
        assert!(with("mud_weight_unit: sg", "mud_weight_unit: psi").contains("write one of sg"));
        assert_eq!(
            with("losses", "earthquake"),
            "e.csv, line 5, column \"Kind\": \"earthquake\" is no kind of event that is known here; write one of losses, gain, tight hole, pack-off, cavings, caliper enlarged, caliper in gauge, leak-off test, formation-integrity test."
        );
        assert!(with("1.35,1.42", "1.35,1.3").contains("below the mud weight"));
        assert!(with("1.35", "\"1,35\"").contains("decimal comma"));
        assert!(with("1.35", "0").contains("above 0 sg"));
        assert!(with("1.35", "1350").contains("at most 4 sg"));
        assert!(with("2410", "-1").contains("line 5, column \"MD\": measured depth -1 is negative"));
        assert!(with("Mud_Weight", "x").contains("column \"mud_weight\": the column is missing"));
        assert!(refused("").contains("the file is empty"));
        assert!(refused(&format!("{HEADER}md,kind,mud_weight\n")).contains("holds no event"));
        let many: String = (0..=MOST).map(|k| format!("{k},gain,1.2\n")).collect();
        assert!(refused(&format!("{HEADER}md,kind,mud_weight\n{many}")).contains("more than 200 events"));
        assert!(DrillingEvents::read_csv("no/file.csv").unwrap_err().to_string().contains("relative to the notebook"));
        assert!(DrillingEvents::from_events(&[]).is_err());
    }

    proptest! {
        #[test]
        fn never_panics_on_any_bytes(bytes in proptest::collection::vec(any::<u8>(), 0..2000)) {
            let _ = read(Lines::over(bytes.as_slice(), "x"));
        }

        #[test]
        fn never_panics_on_near_misses(table in "([a-z0-9,;.()\\[\\]\"\\-# :]{0,30}\n){0,12}") {
            let _ = parse(&format!("{HEADER}md,kind,mud_weight,ecd\n{table}"));
            let _ = parse(&table);
        }
    }
}
