//! The ground at a glance.

use super::ground::{Ground, MOST};
use super::layer::Layer;
use crate::card::{Column, Table};
use crate::units::{fixed, with_typed_unit};
use crate::well::items_beside_rock;

/// Layers of the short table.
const SHOWN: usize = 12;

impl Layer {
    /// "Siltstone from TVD 2865 m below the rotary table: Mohr–Coulomb, …".
    pub(crate) fn words(&self) -> String {
        let ratios = self.ratios.map_or_else(String::new, |[min, max]| format!("; K_h {min}, K_H {max}"));
        let depletion = self.depletion.map_or_else(String::new, |d| format!("; {}", d.words()));
        format!("{} {}: {}{ratios}{depletion}", self.name(), self.top_words(), self.rock.words())
    }
}

impl Layer {
    /// What is stated of it besides rock and ratios: depletion, temperature, wall.
    fn words_beside(&self) -> String {
        let mut words: Vec<String> = self.depletion.iter().map(|depletion| depletion.words()).collect();
        words.extend(self.sh_max_azimuth.map(|azimuth| format!("azimuth of S_Hmax {}", azimuth.words())));
        let beside = items_beside_rock(self.seepage, self.thermal, self.weak_plane);
        words.extend(beside.iter().map(|item| format!("{} {}", item.symbol, item.shown)));
        words.extend(self.thermal_properties.map(|properties| {
            let [e, alpha] = [with_typed_unit(properties.youngs_modulus), with_typed_unit(properties.expansion)];
            format!("E {e}, α_T {alpha}")
        }));
        words.extend(self.creeps.then(|| "creeps".to_owned()));
        if words.is_empty() { "–".to_owned() } else { words.join("; ") }
    }
}

impl Ground {
    /// What it rests on, in a few lines.
    pub(crate) fn words(&self) -> String {
        let mut lines = vec![self.inputs.sv.words(), self.inputs.pore.words()];
        match &self.inputs.horizontals {
            Some(both) => lines.extend([both.sh_min.words(), both.sh_max.words()]),
            None => lines.push("horizontal stresses by the layers' ratios of effective stress".to_owned()),
        }
        lines.push(format!("azimuth of S_Hmax: {}", self.inputs.sh_max_azimuth.words()));
        lines.extend(self.intervals.iter().map(|interval| {
            let layer = self.inputs.layers.get(interval.layer).map_or("", Layer::name);
            format!("MD {} to {}: {layer}", with_typed_unit(interval.from), with_typed_unit(interval.to))
        }));
        lines.join("\n")
    }

    /// Its layers, of many the first and the last.
    pub(crate) fn short_table(&self) -> Table {
        self.layers_table(SHOWN)
    }

    /// Its layers.
    pub(crate) fn table(&self) -> Table {
        self.layers_table(MOST)
    }

    fn layers_table(&self, most: usize) -> Table {
        let ratios = |layer: &Layer| {
            layer.ratios.map_or_else(|| ["–".to_owned(), "–".to_owned()], |ratios| ratios.map(|k| fixed(k, 3)))
        };
        let layers = &self.inputs.layers;
        let rows = Table::ends(layers.len(), most, |k| {
            let Some(layer) = layers.get(k) else { return Vec::new() };
            let [min, max] = ratios(layer);
            vec![layer.name().to_owned(), layer.top_words(), layer.rock.words(), min, max, layer.words_beside()]
        });
        Table {
            caption: "The layers as stated".to_owned(),
            columns: vec![
                Column::text("layer"),
                Column::text("from"),
                Column::text("rock"),
                Column::number("K_h", ""),
                Column::number("K_H", ""),
                Column::text("besides"),
            ],
            rows,
        }
    }
}
