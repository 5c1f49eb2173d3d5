//! What was stated of a layer as inputs of a card.

use super::depletion::{Depletion, MaxPath, MinPath};
use super::layer::{Layer, LayerTop, TopPlane};
use crate::card::Item;
use crate::frames::Depth;
use crate::units::{Length, Quantity};
use crate::well::items_beside_rock;

impl Layer {
    /// Its file, or its numbers as they were typed, each with the name of the layer.
    pub(super) fn items(&self) -> Vec<Item> {
        let (mut items, file) = match self.file {
            Some([path, sha256]) => (Vec::new(), Some(Item::file("layers", path.text(), sha256.text()))),
            None => (self.stated_items(), None),
        };
        items.extend(self.depletion.iter().flat_map(Depletion::items));
        items.extend(items_beside_rock(self.seepage, self.thermal, self.weak_plane));
        let of = |item: Item| Item { name: format!("{} of {}", item.name, self.name), ..item };
        file.into_iter().chain(items.into_iter().map(of)).collect()
    }

    fn stated_items(&self) -> Vec<Item> {
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
        items.extend(self.sh_max_azimuth.map(|azimuth| azimuth.item("A", "azimuth of S_Hmax")));
        if let Some([min, max]) = self.ratios {
            items.push(Item::typed("K_h", "ratio of effective stress of S_hmin", min));
            items.push(Item::typed("K_H", "ratio of effective stress of S_Hmax", max));
        }
        items
    }
}

impl Depletion {
    fn items(&self) -> Vec<Item> {
        let mut items = vec![Item::typed("ΔP_p", "drawdown of the pore pressure", self.drawdown)];
        items.push(match self.sh_min {
            MinPath::Measured(a) => Item::typed("A", "stress path of S_hmin", a),
            MinPath::Uniaxial { biot } => Item::typed("α", "Biot's coefficient of the stress path", biot),
        });
        if let MaxPath::Measured(a) = self.sh_max {
            items.push(Item::typed("A_H", "stress path of S_Hmax", a));
        }
        items
    }
}

fn depth_item(top: Depth) -> Item {
    Item::new("z_t", "top", Length::KIND, vec![top.tvd.si()], top.words())
}
