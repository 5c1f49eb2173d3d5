//! Reading sections of the hole and their muds from CSV, strictly and line by line.

use std::io::Read;
use std::path::Path;

use super::section::{HoleSection, MOST_SECTIONS};
use crate::along::spans::SpanColumns;
use crate::error::Result;
use crate::field::{MUD_WEIGHTS, PRESSURES};
use crate::frames::Name;
use crate::lines::{Column, Expected, Lines, Row, Table, Unit, reason};
use crate::units::{Density, Length, Pressure};
use crate::well::MudPlan;

const EXPECTED: Expected = Expected {
    keys: &[&["hole", "datum", "depth_datum", "depth_unit", "mud_weight_unit", "pressure_unit"]],
    always: &[(&["datum", "depth_datum"], "# datum: rotary table"), (&["depth_unit"], "# depth_unit: m")],
    file: "a table of sections with the columns section, from, to",
    names: "section, from, to, mud_weight, ecd, swab, surge",
    besides: &[&["mud_weight", "ecd", "swab", "surge"]],
    units_in_names: false,
    rows: ["section", "sections"],
    most: MOST_SECTIONS,
    fewer: "a hole has a few casing points; join what is drilled with one mud",
};

/// The columns of the mud, each where the file has it.
struct MudColumns {
    weight: Option<(Column, Unit<Density>)>,
    ecd: Option<Column>,
    swab: Option<(Column, Unit<Pressure>)>,
    surge: Option<(Column, Unit<Pressure>)>,
}

pub(super) fn read_csv(path: &Path) -> Result<Vec<HoleSection>> {
    read(Lines::open(path)?)
}

fn read<R: Read>(lines: Lines<R>) -> Result<Vec<HoleSection>> {
    let mut table = Table::open(lines, &EXPECTED)?;
    let (name, spans) = (table.column(&["section", "name"])?, SpanColumns::of(&table)?);
    let columns = mud_columns(&table)?;
    let mut sections: Vec<HoleSection> = Vec::new();
    while let Some(row) = table.next_row()? {
        let [from, to]: [Length; 2] = spans.span(&table, &row, sections.last().map(|above| above.to))?;
        let words = table.text(&row, &name)?;
        if words.is_empty() {
            return Err(table.bad_in(&name, "the section has no name", "name it, as 8½ in"));
        }
        let section = HoleSection { mud: mud(&table, &columns, &row)?, ..HoleSection::between(words, from, to) };
        section.checked(None).map_err(|e| table.bad(reason(&e), "correct the row"))?;
        sections.push(section);
    }
    let (path, sha256) = table.source();
    let file = Some([Name::new(&path), Name::new(&sha256)]);
    Ok(sections.into_iter().map(|section| HoleSection { file, ..section }).collect())
}

fn mud_columns<R: Read>(table: &Table<R>) -> Result<MudColumns> {
    let declared = table.declared();
    let of_pressure = |name: &str| -> Result<Option<(Column, Unit<Pressure>)>> {
        let Some(column) = table.column_if_any(&[name])? else { return Ok(None) };
        Ok(Some((column, declared.unit(&PRESSURES, None)?)))
    };
    let (ecd, swab, surge) =
        (table.column_if_any(&["ecd", "circulating_density"])?, of_pressure("swab")?, of_pressure("surge")?);
    let any = ecd.is_some() || swab.is_some() || surge.is_some();
    let weight = match any {
        true => Some(table.column_or(&["mud_weight", "mw"], "what moving mud does counts from its weight at rest")?),
        false => table.column_if_any(&["mud_weight", "mw"])?,
    };
    let weight = match weight {
        Some(column) => Some((column, declared.unit(&MUD_WEIGHTS, None)?)),
        None => None,
    };
    Ok(MudColumns { weight, ecd, swab, surge })
}

fn mud<R: Read>(table: &Table<R>, columns: &MudColumns, row: &Row) -> Result<Option<MudPlan>> {
    let Some((weight, density)) = &columns.weight else { return Ok(None) };
    let number = |column: Option<&Column>| table.number_if_any(row, column);
    let pressure = |column: &Option<(Column, Unit<Pressure>)>| -> Result<Option<Pressure>> {
        let Some((column, unit)) = column else { return Ok(None) };
        Ok(number(Some(column))?.map(unit))
    };
    let circulating_density = number(columns.ecd.as_ref())?.map(density);
    let (swab, surge) = (pressure(&columns.swab)?, pressure(&columns.surge)?);
    match number(Some(weight))? {
        Some(at_rest) => Ok(Some(MudPlan { static_density: density(at_rest), swab, circulating_density, surge })),
        None if circulating_density.is_none() && swab.is_none() && surge.is_none() => Ok(None),
        None => Err(table.bad_in(
            weight,
            "the value is missing",
            "state the mud weight at rest, from which the others count",
        )),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Units;
    use proptest::prelude::*;

    const HEADER: &str = "# datum: rotary table\n# depth_unit: m\n# mud_weight_unit: sg\n# pressure_unit: MPa\n";
    const GOOD: &str = "Section,From,To,Mud_Weight,ECD,Swab,Surge\n17½ in,500,1800,1.2,,,\n12¼ in,1800,2900,1.32,1.4,0.7,0.9\n8½ in,2900,3600,,,,\n";

    fn parse(text: &str) -> Result<Vec<HoleSection>> {
        read(Lines::over(text.as_bytes(), "s.csv"))
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
    fn reads_sections_with_their_muds() {
        let sections = parse(&format!("{HEADER}{GOOD}")).unwrap();
        let mud = MudPlan {
            static_density: 1.32.sg(),
            swab: Some(0.7.mpa()),
            circulating_density: Some(1.4.sg()),
            surge: Some(0.9.mpa()),
        };
        assert_eq!(
            HoleSection { file: None, ..sections[1] },
            HoleSection::between("12¼ in", 1800.m(), 2900.m()).with_mud(mud)
        );
        assert_eq!((sections[0].mud.unwrap().swab, sections[2].mud), (None, None));
        // The file stands for the numbers of the mud.
        assert_eq!(sections[1].items().iter().filter(|item| item.sha256.is_some()).count(), 1);
        assert_eq!(sections[1].items().len(), 3);
        let field =
            format!("\u{feff}{HEADER}{GOOD}").replace('\n', "\r\n").replace(": m\r", ": ft\r").replace(": sg", ": ppg");
        let field = parse(&field.replace(": MPa", ": psi")).unwrap();
        assert_eq!((field[1].from, field[1].mud.unwrap().surge), (1800.ft(), Some(0.9.psi())));
        // Sections alone need neither unit.
        let bare = parse("# datum: rotary table\n# depth_unit: m\nsection,from,to\n8½ in,2900,3600\n").unwrap();
        assert_eq!(bare[0].mud, None);
    }

    #[test]
    fn bad_files_say_where_and_what_to_do() {
        assert_eq!(
            with("1800,2900", "1700,2900"),
            "s.csv, line 7, column \"From\": the beginning 1700 m lies above the end of the row before, 1800 m; sort the rows by depth, and let none overlap."
        );
        assert!(with("2900,3600", "2950,3600").contains("lies a gap"));
        assert!(
            with("500,1800", "1800,1800").contains("line 6, column \"To\": the end 1800 m is not below the beginning")
        );
        assert!(with("500,1800", "-5,1800").contains("measured depth -5 is not between 0 and 25000 m"));
        assert!(with("datum: rotary table", "datum: ground").contains("measured depths count from the rotary table"));
        assert!(with("# datum: rotary table\n", "").contains("which level its depths count from"));
        assert!(with("# depth_unit: m\n", "").contains("# depth_unit: m | ft"));
        assert!(with("# mud_weight_unit: sg\n", "").contains("# mud_weight_unit: sg | kg/m3"));
        assert!(with("# pressure_unit: MPa\n", "").contains("# pressure_unit: MPa | kPa"));
        assert!(with("Mud_Weight", "x").contains("column \"mud_weight\": the column is missing"));
        assert!(with("Section,", "hole,").contains("column \"section\": the column is missing"));
        assert_eq!(
            with("1.32,1.4", "1.32,1.3"),
            "s.csv, line 7: The circulating density 1.3 sg: it is below the static one, 1.32 sg; friction only adds to it; correct the row."
        );
        assert!(
            with("1.32,1.4", ",1.4")
                .contains("line 7, column \"Mud_Weight\": the value is missing; state the mud weight at rest")
        );
        assert!(with("0.7,0.9", "-0.7,0.9").contains("swab is -0.7 MPa"));
        assert!(with("1.2,", "\"1,2\",").contains("decimal comma"));
        assert!(with("17½ in", "").contains("the section has no name"));
        assert!(refused("").contains("the file is empty"));
        let many: String = (0..=MOST_SECTIONS).map(|k| format!("a{k},{k},{}\n", k + 1)).collect();
        assert!(refused(&format!("{HEADER}section,from,to\n{many}")).contains("more than 20 sections"));
        assert!(HoleSection::read_csv("no/file.csv").unwrap_err().to_string().contains("relative to the notebook"));
    }

    proptest! {
        #[test]
        fn never_panics_on_any_bytes(bytes in proptest::collection::vec(any::<u8>(), 0..2000)) {
            let _ = read(Lines::over(bytes.as_slice(), "x"));
        }

        #[test]
        fn never_panics_on_near_misses(table in "([a-z0-9,;.()\\[\\]\"\\-# :]{0,30}\n){0,12}") {
            let _ = parse(&format!("{HEADER}section,from,to,mud_weight,ecd,swab,surge\n{table}"));
            let _ = parse(&table);
        }
    }
}
