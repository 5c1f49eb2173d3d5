//! A layer: its top, its rock, and what is said of its stress and its wall.

use serde::{Deserialize, Serialize};

use super::depletion::Depletion;
use super::temperatures::ThermalProperties;
use crate::error::{Error, Result};
use crate::frames::{Azimuth, Depth, Name, Plane};
use crate::rock::Rock;
use crate::units::{Angle, Expansion, Length, Pressure, Quantity, require_between, with_typed_unit};
use crate::well::{Seepage, Thermal, WeakPlane};

/// A dipping top: a plane through a point.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct TopPlane {
    /// The depth of the point, below a level of the hole that is looked at.
    pub depth: Depth,
    /// North of the wellhead of that hole, true north.
    pub north: Length,
    /// East of the wellhead.
    pub east: Length,
    /// Strike and dip of the plane; the dip is at most 85°.
    pub plane: Plane,
}

/// Steeper tops have no one depth below a place.
const STEEPEST: f64 = 85.0;

/// Where a layer begins.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub(crate) enum LayerTop {
    Level(Depth),
    Plane(TopPlane),
    /// It has no top: intervals of measured depth say where the hole is in it.
    ByMeasuredDepth,
}

/// A layer of the ground. Its wall is impermeable, at the temperature of the rock, and without a plane
/// of weakness, until a method says otherwise.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Layer {
    pub(crate) name: Name,
    pub(crate) top: LayerTop,
    pub(crate) rock: Rock,
    pub(crate) sh_max_azimuth: Option<Azimuth>,
    /// K of S_hmin and of S_Hmax.
    pub(crate) ratios: Option<[f64; 2]>,
    pub(crate) depletion: Option<Depletion>,
    pub(crate) seepage: Option<Seepage>,
    pub(crate) thermal: Option<Thermal>,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub(crate) thermal_properties: Option<ThermalProperties>,
    pub(crate) weak_plane: Option<WeakPlane>,
    pub(crate) creeps: bool,
    /// The file it was read from, and its SHA-256.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub(crate) file: Option<[Name; 2]>,
    #[serde(default, skip_serializing_if = "InFile::is_nothing")]
    pub(crate) in_file: InFile,
}

/// What of a layer stands in its file, beside its top and its rock.
#[derive(Clone, Copy, Debug, Default, PartialEq, Serialize, Deserialize)]
#[serde(default)]
pub(crate) struct InFile {
    pub azimuth: bool,
    pub ratios: bool,
    pub depletion: bool,
    pub seepage: bool,
    pub thermal_properties: bool,
}

impl InFile {
    fn is_nothing(&self) -> bool {
        *self == InFile::default()
    }
}

/// A ratio of effective stresses beyond this was mistaken.
const GREATEST_RATIO: f64 = 10.0;

impl Layer {
    /// A layer from a depth down, with a level top. The depth counts from a level of the hole that is
    /// looked at; for a layer known from elsewhere give it below mean sea level.
    ///
    /// # Errors
    /// When the name is empty, the depth is not finite, or the rock is out of its range.
    pub fn from(name: &str, top: Depth, rock: Rock) -> Result<Self> {
        top.tvd.finite(&format!("top of {name}"))?;
        Layer::new(name, LayerTop::Level(top), rock)
    }

    /// A layer below a dipping top.
    ///
    /// # Errors
    /// As [`Layer::from`], and when the dip is outside 0–85° or the strike has no true north.
    pub fn below_plane(name: &str, top: TopPlane, rock: Rock) -> Result<Self> {
        top.depth.tvd.finite(&format!("top of {name}"))?;
        top.north.finite(&format!("north of the point on the top of {name}"))?;
        top.east.finite(&format!("east of the point on the top of {name}"))?;
        require_between(&format!("dip of the top of {name}"), top.plane.dip, Angle::deg(0.0), Angle::deg(STEEPEST))?;
        top.plane.strike.true_north()?;
        Layer::new(name, LayerTop::Plane(top), rock)
    }

    /// A layer without a top: intervals of measured depth ([`Ground::with_intervals`](super::Ground::with_intervals))
    /// say where the hole is in it.
    ///
    /// # Errors
    /// When the name is empty or the rock is out of its range.
    pub fn by_measured_depth(name: &str, rock: Rock) -> Result<Self> {
        Layer::new(name, LayerTop::ByMeasuredDepth, rock)
    }

    pub(super) fn new(name: &str, top: LayerTop, rock: Rock) -> Result<Self> {
        if name.trim().is_empty() {
            return Err(Error::undeclared(
                "A layer has no name",
                "name it, so that tables and messages can say which it is.",
            ));
        }
        Ok(Layer {
            name: Name::new(name.trim()),
            top,
            rock: rock.checked()?,
            sh_max_azimuth: None,
            ratios: None,
            depletion: None,
            seepage: None,
            thermal: None,
            thermal_properties: None,
            weak_plane: None,
            creeps: false,
            file: None,
            in_file: InFile::default(),
        })
    }

    /// With its own azimuth of S_Hmax in place of the ground's.
    pub fn sh_max_towards(self, azimuth: Azimuth) -> Self {
        Layer { sh_max_azimuth: Some(azimuth), in_file: InFile { azimuth: false, ..self.in_file }, ..self }
    }

    /// With its ratios of effective stress, K = (S − P_p) / (S_v − P_p), of S_hmin and S_Hmax, in place
    /// of the ground's profiles.
    ///
    /// # Errors
    /// When a ratio is outside 0–10 or that of S_Hmax is the smaller.
    pub fn horizontal_ratios(self, sh_min: f64, sh_max: f64) -> Result<Self> {
        require_between("ratio of effective stress of S_hmin", sh_min, 0.0, GREATEST_RATIO)?;
        require_between("ratio of effective stress of S_Hmax", sh_max, 0.0, GREATEST_RATIO)?;
        if sh_max < sh_min {
            return Err(Error::not_physical(
                format!("The ratio {sh_max} of S_Hmax is smaller than that of S_hmin, {sh_min}"),
                "exchange the two, and turn the azimuth by 90° if it belongs to the other.",
            ));
        }
        Ok(Layer { ratios: Some([sh_min, sh_max]), in_file: InFile { ratios: false, ..self.in_file }, ..self })
    }

    /// Drawn down: the profiles say what was before.
    ///
    /// # Errors
    /// When the drawdown is not above zero, or a stress path or Biot's coefficient is outside 0–1.
    pub fn depleted(self, depletion: Depletion) -> Result<Self> {
        depletion.paths(self.rock.poisson)?;
        Ok(Layer { depletion: Some(depletion), in_file: InFile { depletion: false, ..self.in_file }, ..self })
    }

    /// With a permeable wall ([`Wall::permeable`](crate::well::Wall::permeable)).
    ///
    /// # Errors
    /// When Biot's coefficient is outside 0–1.
    pub fn permeable(self, biot: f64) -> Result<Self> {
        self.partly_sealed(biot, 0.0)
    }

    /// With a wall between permeable and impermeable ([`Wall::partly_sealed`](crate::well::Wall::partly_sealed)).
    ///
    /// # Errors
    /// When Biot's coefficient or the sealing is outside 0–1.
    pub fn partly_sealed(self, biot: f64, sealing: f64) -> Result<Self> {
        require_between("Biot's coefficient α", biot, 0.0, 1.0)?;
        require_between("sealing of the wall", sealing, 0.0, 1.0)?;
        let in_file = InFile { seepage: false, ..self.in_file };
        Ok(Layer { seepage: Some(Seepage { biot, sealing }), in_file, ..self })
    }

    /// With a wall warmed or cooled by the mud, by as much all through the layer
    /// ([`Wall::thermal`](crate::well::Wall::thermal)).
    pub fn thermal(self, thermal: Thermal) -> Self {
        Layer { thermal: Some(thermal), ..self }
    }

    /// With Young's modulus E and the coefficient of linear thermal expansion α_T of its rock, for a wall that is
    /// warmed or cooled by what [`Ground::with_temperatures`](super::Ground::with_temperatures) says.
    ///
    /// # Errors
    /// When E is not above zero or α_T is negative.
    pub fn thermal_properties(self, youngs_modulus: Pressure, expansion: Expansion) -> Result<Self> {
        let properties = ThermalProperties { youngs_modulus, expansion }.checked()?;
        let in_file = InFile { thermal_properties: false, ..self.in_file };
        Ok(Layer { thermal_properties: Some(properties), in_file, ..self })
    }

    /// With a plane of weakness ([`Wall::weak_plane`](crate::well::Wall::weak_plane)).
    pub fn weak_plane(self, weak_plane: WeakPlane) -> Self {
        Layer { weak_plane: Some(weak_plane), ..self }
    }

    /// Of rock that creeps, such as salt: the log then says that elastic limits are not valid in it.
    pub fn in_creeping_rock(self) -> Self {
        Layer { creeps: true, ..self }
    }

    /// Itself, or the error that says what no layer has: for records.
    pub(super) fn checked(self) -> Result<Self> {
        let name = self.name.text();
        let made = match self.top {
            LayerTop::Level(top) => Layer::from(name, top, self.rock)?,
            LayerTop::Plane(top) => Layer::below_plane(name, top, self.rock)?,
            LayerTop::ByMeasuredDepth => Layer::by_measured_depth(name, self.rock)?,
        };
        let made = self.ratios.map_or(Ok(made), |[min, max]| made.horizontal_ratios(min, max))?;
        self.depletion.map_or(Ok(made), |depletion| made.depleted(depletion))?;
        self.thermal_properties.map_or(Ok(()), |properties| properties.checked().map(|_| ()))?;
        Ok(self)
    }

    /// "from TVD 2865 m below the rotary table".
    pub(crate) fn top_words(&self) -> String {
        match self.top {
            LayerTop::Level(depth) => format!("from {}", depth.words()),
            LayerTop::Plane(top) => format!(
                "from {} at {} north and {} east of the wellhead, {}",
                top.depth.words(),
                with_typed_unit(top.north),
                with_typed_unit(top.east),
                top.plane.words()
            ),
            LayerTop::ByMeasuredDepth => "by measured depth".to_owned(),
        }
    }

    /// Its name.
    pub fn name(&self) -> &'static str {
        self.name.text()
    }

    /// Its rock.
    pub fn rock(&self) -> Rock {
        self.rock
    }
}
