//! Temperature, whose scales begin at different zeros.

use serde::{Deserialize, Serialize};

use super::{Length, Quantity, TemperatureGradient, Uncertain, Warming, with_unit};

/// 0 °C in kelvin (exact; NIST SP 811, appendix B.8).
const ZERO_CELSIUS: f64 = 273.15;
/// Degrees Fahrenheit at absolute zero, turned round (exact: 1.8 · 273.15 − 32).
const RANKINE: f64 = 459.67;

/// A temperature; inside, kelvin. What lies between two is a [`Warming`].
#[derive(Clone, Copy, PartialEq, PartialOrd, Debug, Serialize, Deserialize)]
#[serde(transparent)]
pub struct Temperature(f64);

impl Quantity for Temperature {
    const KIND: &'static str = "temperature";
    const SHOWN_IN: &'static str = "°C";
    const DECIMALS: usize = 1;
    fn si(self) -> f64 {
        self.0
    }
    fn from_si(si: f64) -> Self {
        Self(si)
    }
    fn shown(self) -> f64 {
        self.in_celsius()
    }
}

impl Temperature {
    /// Degrees Celsius.
    pub fn celsius(value: f64) -> Self {
        Self(value + ZERO_CELSIUS)
    }
    /// The number in degrees Celsius.
    pub fn in_celsius(self) -> f64 {
        self.0 - ZERO_CELSIUS
    }
    /// Degrees Fahrenheit.
    pub fn fahrenheit(value: f64) -> Self {
        Self((value + RANKINE) / 1.8)
    }
    /// The number in degrees Fahrenheit.
    pub fn in_fahrenheit(self) -> f64 {
        self.0 * 1.8 - RANKINE
    }
    /// The value with its uncertainty, one standard deviation.
    pub fn give_or_take(self, one_sd: Warming) -> Uncertain<Self, Warming> {
        Uncertain { value: self, give_or_take: one_sd }
    }
}

impl std::ops::Sub for Temperature {
    type Output = Warming;
    fn sub(self, other: Self) -> Warming {
        Warming::kelvin(self.0 - other.0)
    }
}
impl std::ops::Add<Warming> for Temperature {
    type Output = Self;
    fn add(self, warming: Warming) -> Self {
        Self(self.0 + warming.in_kelvin())
    }
}
impl std::ops::Mul<Length> for TemperatureGradient {
    type Output = Warming;
    fn mul(self, depth: Length) -> Warming {
        Warming::kelvin(self.si() * depth.si())
    }
}
impl std::fmt::Display for Temperature {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        write!(f, "{}", with_unit(self.shown(), f.precision().unwrap_or(Self::DECIMALS), Self::SHOWN_IN))
    }
}

#[cfg(test)]
mod tests {
    use crate::units::{Quantity, Units, with_typed_unit};

    /// 212 °F is 100 °C and 32 °F is 0 °C (the scales' own points, common knowledge); 25 K/km is 1.37 °F/100 ft
    /// (1.8 · 25 · 0.03048).
    #[test]
    fn scales_meet_where_they_must() {
        assert!((212.fahrenheit() - 100.celsius()).in_kelvin().abs() < 1e-12);
        assert!((32.fahrenheit() - 0.celsius()).in_kelvin().abs() < 1e-12);
        assert_eq!(0.celsius().si(), 273.15);
        assert!((68.4.celsius().in_fahrenheit() - 155.12).abs() < 1e-10);
        assert!((25.kelvin_per_km().in_fahrenheit_per_100_ft() - 1.3716).abs() < 1e-12);
        assert_eq!(with_typed_unit(68.4.celsius()), "68.4 °C");
        assert_eq!(format!("{}", (-2).celsius()), "-2.0 °C");
        assert_eq!((20.celsius() + 30.kelvin_per_km() * 2000.m()).to_string(), "80.0 °C");
        assert!((f64::NAN.celsius()).finite("temperature").is_err());
    }
}
