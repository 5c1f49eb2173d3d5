//! A chart of rows over one axis, each with its words, bars and marks: values or ranges beside each
//! other, changes about a base.

use super::{Axis, Figure, Layer, Mark, Role};

/// One row.
#[derive(Clone, Debug, Default, PartialEq)]
pub(crate) struct ChartRow {
    /// What it is, with its numbers; written above its bars.
    pub words: String,
    /// Bars from one value to another.
    pub bars: Vec<(Role, f64, f64)>,
    /// Single values.
    pub marks: Vec<(Role, Mark, f64)>,
}

/// Rows from top to bottom, over levels and a band that run through all of them.
#[derive(Clone, Debug, Default, PartialEq)]
pub(crate) struct RowChart {
    pub rows: Vec<ChartRow>,
    /// Upright lines with their names.
    pub levels: Vec<(String, Role, f64)>,
    /// A shaded interval with its name.
    pub band: Option<(String, f64, f64)>,
}

impl RowChart {
    /// The figure; the text alternative is what it shows in general, and the words of every row.
    pub fn figure(self, x_label: &str, caption: String, shows: &str) -> Figure {
        let band = self.band.iter().flat_map(|(_, from, to)| [*from, *to]);
        let rows = self.rows.iter().flat_map(|row| {
            let bars = row.bars.iter().flat_map(|(_, from, to)| [*from, *to]);
            bars.chain(row.marks.iter().map(|(.., at)| *at))
        });
        let all: Vec<f64> = band.chain(rows).chain(self.levels.iter().map(|(.., at)| *at)).collect();
        let finite = || all.iter().copied().filter(|v| v.is_finite());
        let (low, high) = (finite().fold(f64::INFINITY, f64::min), finite().fold(f64::NEG_INFINITY, f64::max));
        let (low, high) = if low <= high { (low, high) } else { (0.0, 1.0) };
        let room = if high > low { 0.05 * (high - low) } else { 0.5 };
        let (low, high) = (low - room, high + room);
        // Few rows do not fill the height with thick bars.
        let foot = -(self.rows.len().max(3) as f64) - 0.1;
        let mut layers = Vec::new();
        if let Some((label, from, to)) = &self.band {
            layers.push(Layer::ColumnBand { label: label.clone(), role: Role::Range, from: *from, to: *to });
        }
        for (label, role, at) in &self.levels {
            if label.is_empty() {
                // A line without a name stands at the bars only, and not through the words over them.
                let bar = |k: usize| -(k as f64) - 1.0;
                layers.extend(
                    (0..self.rows.len()).map(|k| Layer::line("", *role, [[*at, bar(k)], [*at, bar(k) + 0.36]])),
                );
            } else {
                layers.push(Layer::line(label, *role, [[*at, foot], [*at, 0.0]]));
            }
        }
        let mut y = 0.0;
        for row in &self.rows {
            y -= 1.0;
            layers.push(Layer::Words { text: row.words.clone(), at: [low + 0.006 * (high - low), y + 0.72] });
            for (role, from, to) in &row.bars {
                layers.push(Layer::Bar { role: *role, from: [*from, y + 0.05], to: [*to, y + 0.31] });
            }
            for (role, mark, at) in &row.marks {
                let points = vec![[*at, y + 0.18]];
                layers.push(Layer::Points { label: String::new(), role: *role, mark: *mark, points });
            }
        }
        Figure {
            caption,
            alt: format!("{shows} {}.", self.rows.iter().map(|r| r.words.as_str()).collect::<Vec<_>>().join("; ")),
            x: Axis::new(x_label, low, high),
            y: Axis::new("", foot, 0.0).hidden(),
            equal_scale: false,
            layers,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn rows_stand_below_each_other_within_the_axis() {
        let row = |words: &str, from: f64, to: f64| ChartRow {
            words: words.to_owned(),
            bars: vec![(Role::First, from, to)],
            marks: vec![(Role::Limit, Mark::Dot, to)],
        };
        let chart = RowChart {
            rows: vec![row("a 30 to 40", 30.0, 40.0), row("b 35 to 50", 35.0, 50.0)],
            levels: vec![("S_3".to_owned(), Role::Second, 45.0)],
            band: Some(("range".to_owned(), 31.0, 39.0)),
        };
        let figure = chart.figure("pressure (MPa)", "Two.".to_owned(), "Bars.");
        assert_eq!(figure.alt, "Bars. a 30 to 40; b 35 to 50.");
        assert!((figure.x.min - 29.0).abs() < 1e-12 && (figure.x.max - 51.0).abs() < 1e-12);
        let bars: Vec<[f64; 2]> =
            figure.layers.iter().filter_map(|l| if let Layer::Bar { to, .. } = l { Some(*to) } else { None }).collect();
        assert_eq!(bars.len(), 2);
        assert!(bars[0][1] > bars[1][1] && bars[1][1] > figure.y.min);
    }

    #[test]
    fn without_a_number_it_still_has_an_axis() {
        let chart = RowChart {
            rows: vec![ChartRow { words: "none".to_owned(), ..ChartRow::default() }],
            ..RowChart::default()
        };
        let figure = chart.figure("pressure (MPa)", String::new(), "Nothing.");
        assert!(figure.x.min < figure.x.max);
    }
}
