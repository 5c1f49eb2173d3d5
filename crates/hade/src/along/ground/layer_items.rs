//! What was stated of a layer as inputs of a card.

use super::depletion::{Depletion, MaxPath, MinPath};
use super::layer::{Layer, LayerTop, TopPlane};
use crate::card::Item;
use crate::frames::Depth;
use crate::units::{Length, Quantity};

impl Layer {
    /// Its file, or its numbers as they were typed, each with the name of the layer.
    pub(super) fn items(&self) -> Vec<Item> {
        let (mut items, file) = match self.file {
            Some([path, sha256]) => (Vec::new(), Some(Item::file("layers", path.text(), sha256.text()))),
            None => (self.stated_items(), None),
        };
        items.extend(self.depletion.iter().flat_map(Depletion::items));
        items.extend(self.wall_items());
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

    fn wall_items(&self) -> Vec<Item> {
        let mut items = Vec::new();
        if let Some(seepage) = self.seepage {
            items.push(Item::typed("α", "Biot's coefficient", seepage.biot));
            items.push(Item::typed("w_s", "sealing of the wall: 0 permeable, 1 impermeable", seepage.sealing).chosen());
        }
        if let Some(thermal) = self.thermal {
            items.push(Item::typed("ΔT", "temperature of the wall less that of the formation", thermal.warming));
            items.push(Item::typed("E", "Young's modulus", thermal.youngs_modulus));
            items.push(Item::typed("α_T", "coefficient of linear thermal expansion", thermal.expansion));
        }
        if let Some(weak) = self.weak_plane {
            items.push(weak.plane.strike.item("s_w", "strike of the plane of weakness, dip to its right"));
            items.push(Item::typed("d_w", "dip of the plane of weakness", weak.plane.dip));
            items.push(Item::typed("c_w", "cohesion of the plane of weakness", weak.cohesion));
            items.push(Item::typed("φ_w", "friction angle of the plane of weakness", weak.friction_angle));
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
