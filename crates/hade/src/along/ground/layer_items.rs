//! What was stated of a layer as inputs of a card.

use super::depletion::{Depletion, MaxPath, MinPath};
use super::layer::{InFile, Layer, LayerTop, TopPlane};
use super::temperatures::ThermalProperties;
use crate::card::Item;
use crate::frames::Depth;
use crate::units::{Length, Quantity};
use crate::well::items_beside_rock;

impl Layer {
    /// Its file, or its numbers as they were typed, each with the name of the layer. What stands in the file is
    /// not stated again.
    pub(super) fn items(&self) -> Vec<Item> {
        let InFile { azimuth, ratios, depletion, seepage, thermal_properties } = self.in_file;
        let (mut items, file) = match self.file {
            Some([path, sha256]) => (Vec::new(), Some(Item::file("layers", path.text(), sha256.text()))),
            None => (self.top_and_rock(), None),
        };
        items.extend(self.sh_max_azimuth.filter(|_| !azimuth).map(|azimuth| azimuth.item("A", "azimuth of S_Hmax")));
        if let Some([min, max]) = self.ratios.filter(|_| !ratios) {
            items.push(Item::typed("K_h", "ratio of effective stress of S_hmin", min));
            items.push(Item::typed("K_H", "ratio of effective stress of S_Hmax", max));
        }
        items.extend(self.depletion.iter().filter(|_| !depletion).flat_map(Depletion::items));
        items.extend(items_beside_rock(self.seepage.filter(|_| !seepage), self.thermal, self.weak_plane));
        if let Some(ThermalProperties { youngs_modulus, expansion }) =
            self.thermal_properties.filter(|_| !thermal_properties)
        {
            items.push(Item::typed("E", "Young's modulus", youngs_modulus));
            items.push(Item::typed("α_T", "coefficient of linear thermal expansion", expansion));
        }
        let of = |item: Item| Item { name: format!("{} of {}", item.name, self.name), ..item };
        file.into_iter().chain(items.into_iter().map(of)).collect()
    }

    fn top_and_rock(&self) -> Vec<Item> {
        let mut items = match self.top {
            LayerTop::Level(top) => vec![depth_item(top)],
            LayerTop::Plane(TopPlane { depth, north, east, plane }) => vec![
                depth_item(depth),
                Item::typed("N", "north of the point on the top", north),
                Item::typed("E", "east of the point on the top", east),
                plane.strike.item("s", "strike of the top"),
                Item::typed("d", "dip of the top", plane.dip),
            ],
            LayerTop::ByMeasuredDepth => Vec::new(),
        };
        items.extend(self.rock.items());
        items
    }
}

impl Depletion {
    fn items(&self) -> Vec<Item> {
        let mut items = vec![Item::typed("ΔP_p", "drawdown of the pore pressure", self.drawdown)];
        items.push(match self.sh_min {
            MinPath::Measured(a) => Item::typed("κ_h", "stress path of S_hmin", a),
            MinPath::Uniaxial { biot } => Item::typed("α", "Biot's coefficient of the stress path", biot),
        });
        if let MaxPath::Measured(a) = self.sh_max {
            items.push(Item::typed("κ_H", "stress path of S_Hmax", a));
        }
        items
    }
}

fn depth_item(top: Depth) -> Item {
    Item::new("z_t", "top", Length::KIND, vec![top.tvd.si()], top.words())
}
