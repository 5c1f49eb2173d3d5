//! Quantities with their units: a private SI number each, made by a constructor that names the
//! unit (`68.5.mpa()`) and read by one that names it again (`p.in_psi()`).
//!
//! Factors: NIST Special Publication 811 (2008), appendix B, and its exact definitions
//! (1 in = 0.0254 m, 1 lb = 0.453 592 37 kg, g = 9.806 65 m/s²). A literal never fails; the first
//! operation that can return an error refuses NaN and infinity.

mod temperature;

use serde::{Deserialize, Serialize};

use crate::error::{Error, Result};
pub use temperature::Temperature;

/// Standard acceleration of gravity, m/s² (exact, CGPM 1901; NIST SP 811).
pub const GRAVITY: f64 = 9.806_65;
/// One foot in metres (exact).
pub const FOOT: f64 = 0.3048;
/// One pound-force per square inch in pascals: 0.453 592 37 kg · g / (0.0254 m)².
pub const PSI: f64 = 0.453_592_37 * GRAVITY / (0.0254 * 0.0254);
/// One pound per US gallon in kg/m³ (gallon = 231 in³).
pub const PPG: f64 = 0.453_592_37 / (231.0 * 0.0254 * 0.0254 * 0.0254);
/// One pound per cubic foot in kg/m³.
pub const PCF: f64 = 0.453_592_37 / (FOOT * FOOT * FOOT);
/// Specific gravity 1 in kg/m³ (the trade's reference for mud; see the conventions).
pub const SG: f64 = 1000.0;

/// What every quantity can do: say its kind and unit, and give or take its SI number.
#[diagnostic::on_unimplemented(
    message = "`{Self}` is no quantity, so it cannot be given to a sheet",
    label = "a sheet takes a quantity (`31.2.mpa()`), a plain number (`0.25`), an azimuth, a depth, a survey, planes or a pressure profile; give a strength or a rock by its numbers, one at a time"
)]
pub trait Quantity: Copy + PartialEq + std::fmt::Debug + 'static {
    /// The kind, as the record writes it ("pressure").
    const KIND: &'static str;
    /// The unit that results are shown in.
    const SHOWN_IN: &'static str;
    /// The decimals that results are shown with.
    const DECIMALS: usize;
    /// The SI number.
    fn si(self) -> f64;
    /// From the SI number.
    fn from_si(si: f64) -> Self;
    /// The number in the unit that results are shown in.
    fn shown(self) -> f64;

    /// Itself, or an error that names it, when the number is NaN or infinite.
    fn finite(self, what: &str) -> Result<Self> {
        if self.si().is_finite() {
            Ok(self)
        } else {
            Err(Error::out_of_range(what, format!("{}", self.si()), "a finite number"))
        }
    }
}

macro_rules! quantity {
    ($(#[$doc:meta])* $name:ident, $kind:literal, shown $shown:literal = $factor:expr, decimals $decimals:literal;
     $($(#[$udoc:meta])* $make:ident / $read:ident = $scale:expr;)*) => {
        $(#[$doc])*
        #[derive(Clone, Copy, PartialEq, PartialOrd, Debug, Default, Serialize, Deserialize)]
        #[serde(transparent)]
        pub struct $name(f64);

        impl Quantity for $name {
            const KIND: &'static str = $kind;
            const SHOWN_IN: &'static str = $shown;
            const DECIMALS: usize = $decimals;
            fn si(self) -> f64 { self.0 }
            fn from_si(si: f64) -> Self { Self(si) }
            fn shown(self) -> f64 { self.0 / $factor }
        }

        impl $name {
            $($(#[$udoc])* pub fn $make(value: f64) -> Self { Self(value * $scale) }
              #[doc = concat!("The number in the unit of [`Self::", stringify!($make), "`].")]
              pub fn $read(self) -> f64 { self.0 / $scale })*
            /// The quantity times a plain number.
            pub fn scale(self, factor: f64) -> Self { Self(self.0 * factor) }
            /// The size without its sign.
            pub fn abs(self) -> Self { Self(self.0.abs()) }
            /// The value with its uncertainty, one standard deviation.
            pub fn give_or_take(self, one_sd: Self) -> Uncertain<Self> { Uncertain { value: self, give_or_take: one_sd } }
        }
        impl std::ops::Neg for $name { type Output = Self; fn neg(self) -> Self { Self(-self.0) } }
        impl std::ops::Add for $name { type Output = Self; fn add(self, o: Self) -> Self { Self(self.0 + o.0) } }
        impl std::ops::Sub for $name { type Output = Self; fn sub(self, o: Self) -> Self { Self(self.0 - o.0) } }
        impl std::ops::Mul<f64> for $name { type Output = Self; fn mul(self, k: f64) -> Self { Self(self.0 * k) } }
        impl std::ops::Mul<$name> for f64 { type Output = $name; fn mul(self, q: $name) -> $name { $name(self * q.0) } }
        impl std::ops::Div<f64> for $name { type Output = Self; fn div(self, k: f64) -> Self { Self(self.0 / k) } }
        impl std::ops::Div for $name { type Output = f64; fn div(self, o: Self) -> f64 { self.0 / o.0 } }
        impl std::fmt::Display for $name {
            fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
                write!(f, "{}", with_unit(self.shown(), f.precision().unwrap_or($decimals), $shown))
            }
        }
    };
}

quantity! {
    /// A pressure or stress; inside, pascals; compression positive.
    Pressure, "pressure", shown "MPa" = 1e6, decimals 2;
    /// Megapascals.
    mpa / in_mpa = 1e6;
    /// Kilopascals.
    kpa / in_kpa = 1e3;
    /// Pascals.
    pa / in_pa = 1.0;
    /// Gigapascals.
    gpa / in_gpa = 1e9;
    /// Bar (100 kPa, exact).
    bar / in_bar = 1e5;
    /// Pounds-force per square inch.
    psi / in_psi = PSI;
}
quantity! {
    /// A plane angle; inside, radians.
    Angle, "angle", shown "°" = std::f64::consts::PI / 180.0, decimals 1;
    /// Degrees.
    deg / in_deg = std::f64::consts::PI / 180.0;
    /// Radians.
    rad / in_rad = 1.0;
}
quantity! {
    /// A length or a depth along or below something that is named beside it; inside, metres.
    Length, "length", shown "m" = 1.0, decimals 1;
    /// Metres.
    m / in_m = 1.0;
    /// International feet.
    ft / in_ft = FOOT;
    /// Inches.
    inch / in_inch = 0.0254;
}
quantity! {
    /// A mass density, also a mud weight; inside, kg/m³.
    Density, "density", shown "sg" = SG, decimals 3;
    /// Specific gravity against 1000 kg/m³.
    sg / in_sg = SG;
    /// Kilograms per cubic metre.
    kg_m3 / in_kg_m3 = 1.0;
    /// Grams per cubic centimetre.
    g_cm3 / in_g_cm3 = 1000.0;
    /// Pounds per US gallon.
    ppg / in_ppg = PPG;
    /// Pounds per cubic foot.
    pcf / in_pcf = PCF;
}
quantity! {
    /// A pressure gradient with depth; inside, Pa/m.
    Gradient, "gradient", shown "MPa/km" = 1e3, decimals 2;
    /// Megapascals per kilometre.
    mpa_per_km / in_mpa_per_km = 1e3;
    /// Kilopascals per metre (the same number as megapascals per kilometre).
    kpa_per_m / in_kpa_per_m = 1e3;
    /// Bar per metre.
    bar_per_m / in_bar_per_m = 1e5;
    /// Pounds-force per square inch per foot.
    psi_per_ft / in_psi_per_ft = PSI / FOOT;
}
quantity! {
    /// A difference of temperature; inside, kelvin.
    Warming, "temperature difference", shown "K" = 1.0, decimals 1;
    /// Kelvin (or degrees Celsius of difference).
    kelvin / in_kelvin = 1.0;
}
quantity! {
    /// A gradient of temperature with depth; inside, kelvin per metre.
    TemperatureGradient, "temperature gradient", shown "K/km" = 1e-3, decimals 1;
    /// Kelvin (or degrees Celsius of difference) per kilometre.
    kelvin_per_km / in_kelvin_per_km = 1e-3;
    /// Degrees Fahrenheit of difference per hundred feet.
    fahrenheit_per_100_ft / in_fahrenheit_per_100_ft = 5.0 / 9.0 / (100.0 * FOOT);
}
quantity! {
    /// A coefficient of linear thermal expansion; inside, per kelvin.
    Expansion, "thermal expansion", shown "× 10⁻⁶/K" = 1e-6, decimals 2;
    /// Per kelvin: `1e-5.per_kelvin()`.
    per_kelvin / in_per_kelvin = 1.0;
}

quantity! {
    /// A magnetic flux density, the strength of the Earth's field; inside, tesla.
    FluxDensity, "magnetic flux density", shown "nT" = 1e-9, decimals 0;
    /// Nanotesla.
    nt / in_nt = 1e-9;
}

impl std::ops::Mul<Length> for Gradient {
    type Output = Pressure;
    fn mul(self, depth: Length) -> Pressure {
        Pressure(self.0 * depth.0)
    }
}

impl Pressure {
    /// The mean gradient that gives this pressure at a true vertical depth.
    pub fn gradient_over(self, depth: Length) -> Gradient {
        Gradient(self.0 / depth.0)
    }
    /// The mud weight whose static column gives this pressure at a true vertical depth below the
    /// rotary table: p / (g · TVD).
    pub fn mud_weight_at(self, tvd_below_rotary: Length) -> Density {
        Density(self.0 / (GRAVITY * tvd_below_rotary.0))
    }
}

impl Density {
    /// The pressure of a static column of this density: ρ · g · TVD.
    pub fn column(self, tvd: Length) -> Pressure {
        Pressure(self.0 * GRAVITY * tvd.0)
    }
    /// The pressure gradient of a static column of this density: ρ · g.
    pub fn gradient(self) -> Gradient {
        Gradient(self.0 * GRAVITY)
    }
}

impl Quantity for f64 {
    const KIND: &'static str = "number";
    const SHOWN_IN: &'static str = "";
    const DECIMALS: usize = 4;
    fn si(self) -> f64 {
        self
    }
    fn from_si(si: f64) -> Self {
        si
    }
    fn shown(self) -> f64 {
        self
    }
}

/// A value and its uncertainty, one standard deviation: for a pressure a pressure, for an azimuth
/// an angle.
#[derive(Clone, Copy, PartialEq, Debug, Serialize, Deserialize)]
pub struct Uncertain<Q, D = Q> {
    /// The central value.
    pub value: Q,
    /// One standard deviation.
    pub give_or_take: D,
}

macro_rules! units_on_numbers {
    ($($(#[$doc:meta])* $make:ident -> $quantity:ident;)*) => {
        /// The unit constructors on plain numbers: `68.5.mpa()`, `2950.m()`.
        pub trait Units: Copy {
            /// The number as `f64`.
            fn number(self) -> f64;
            $($(#[$doc])* fn $make(self) -> $quantity { $quantity::$make(self.number()) })*
        }
    };
}
units_on_numbers! {
    /// Megapascals.
    mpa -> Pressure;
    /// Kilopascals.
    kpa -> Pressure;
    /// Pascals.
    pa -> Pressure;
    /// Gigapascals.
    gpa -> Pressure;
    /// Bar.
    bar -> Pressure;
    /// Pounds-force per square inch.
    psi -> Pressure;
    /// Degrees.
    deg -> Angle;
    /// Radians.
    rad -> Angle;
    /// Metres.
    m -> Length;
    /// International feet.
    ft -> Length;
    /// Inches.
    inch -> Length;
    /// Specific gravity against 1000 kg/m³.
    sg -> Density;
    /// Kilograms per cubic metre.
    kg_m3 -> Density;
    /// Grams per cubic centimetre.
    g_cm3 -> Density;
    /// Pounds per US gallon.
    ppg -> Density;
    /// Pounds per cubic foot.
    pcf -> Density;
    /// Megapascals per kilometre.
    mpa_per_km -> Gradient;
    /// Kilopascals per metre.
    kpa_per_m -> Gradient;
    /// Bar per metre.
    bar_per_m -> Gradient;
    /// Pounds-force per square inch per foot.
    psi_per_ft -> Gradient;
    /// Kelvin of difference.
    kelvin -> Warming;
    /// Per kelvin.
    per_kelvin -> Expansion;
    /// Degrees Celsius: a temperature, where `kelvin` makes a difference of two.
    celsius -> Temperature;
    /// Degrees Fahrenheit: a temperature.
    fahrenheit -> Temperature;
    /// Kelvin of difference per kilometre.
    kelvin_per_km -> TemperatureGradient;
    /// Degrees Fahrenheit of difference per hundred feet.
    fahrenheit_per_100_ft -> TemperatureGradient;
}
macro_rules! numbers { ($($t:ty),*) => { $(impl Units for $t { fn number(self) -> f64 { self as f64 } })* } }
numbers!(f64, f32, i8, i16, i32, i64, u8, u16, u32, u64, isize, usize);

/// A number as people write it, with its unit: decimals without trailing excess, a true minus sign
/// left to the typesetter, "not a number" never.
pub fn with_unit(value: f64, decimals: usize, unit: &str) -> String {
    let number = fixed(value, decimals);
    match unit {
        "" => number,
        "°" => format!("{number}°"),
        _ => format!("{number} {unit}"),
    }
}

/// Fixed decimals, without a minus sign before zero.
pub fn fixed(value: f64, decimals: usize) -> String {
    let text = format!("{value:.decimals$}");
    if text.starts_with('-') && text[1..].chars().all(|c| c == '0' || c == '.') { text[1..].to_owned() } else { text }
}

/// A number as it was typed: the shortest text of at most ten significant figures, which hides the
/// last-bit noise of a unit conversion and nothing a user would write.
pub fn as_typed(value: f64) -> String {
    let rounded: f64 = format!("{value:.9e}").parse().unwrap_or(value);
    let text = format!("{rounded}");
    if text == "-0" { "0".to_owned() } else { text }
}

/// Refuses what is not in a closed range, with the quantity's own unit in the message.
pub fn require_between<Q: Quantity>(what: &str, value: Q, low: Q, high: Q) -> Result<Q> {
    if value.si().is_finite() && value.si() >= low.si() && value.si() <= high.si() {
        return Ok(value);
    }
    Err(Error::out_of_range(
        what,
        with_typed_unit(value),
        format!("between {} and {}", with_typed_unit(low), with_typed_unit(high)),
    ))
}

/// Refuses what is negative or not finite.
pub fn require_not_negative<Q: Quantity>(what: &str, value: Q) -> Result<Q> {
    if value.si().is_finite() && value.si() >= 0.0 {
        return Ok(value);
    }
    Err(Error::out_of_range(what, with_typed_unit(value), "zero or more"))
}

/// A quantity as it was typed, with its unit. A number of more than seven figures was computed, not
/// typed, and is shown with the usual decimals of its kind.
pub fn with_typed_unit<Q: Quantity>(value: Q) -> String {
    let typed = as_typed(value.shown());
    let figures = typed.chars().filter(char::is_ascii_digit).count();
    let number = if figures > 7 { fixed(value.shown(), Q::DECIMALS) } else { typed };
    match Q::SHOWN_IN {
        "" => number,
        "°" => format!("{number}°"),
        unit => format!("{number} {unit}"),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn factors_agree_with_nist_sp_811() {
        // NIST SP 811 appendix B.8: psi 6.894 757 E+03 Pa; lb/gal 1.198 264 E+02; lb/ft³ 1.601 846 E+01.
        assert!((PSI - 6.894_757e3).abs() < 5e-4);
        assert!((PPG - 1.198_264e2).abs() < 5e-5);
        assert!((PCF - 1.601_846e1).abs() < 5e-6);
        // 1 psi/ft = 22.6206 MPa/km = 19.25 ppg (exact definitions).
        assert!((1.psi_per_ft().in_mpa_per_km() - 22.6206).abs() < 5e-5);
        let ppg = (1.psi_per_ft() * 1.m()).mud_weight_at(1.m()).in_ppg();
        assert!((ppg - 19.25).abs() < 5e-3, "{ppg}");
    }

    #[test]
    fn numbers_read_as_they_were_typed() {
        assert_eq!(as_typed(66.9.mpa().in_mpa()), "66.9");
        assert_eq!(as_typed(42.deg().in_deg()), "42");
        assert_eq!(with_typed_unit(35.deg()), "35°");
        assert_eq!(with_typed_unit(1.32.sg().column(2950.m())), "38.19 MPa");
        assert_eq!(format!("{}", (-0.001).mpa()), "0.00 MPa");
    }

    #[test]
    fn out_of_range_names_quantity_value_and_range() {
        let e = require_between("inclination", 190.deg(), 0.deg(), 180.deg()).unwrap_err();
        assert_eq!(e.to_string(), "inclination is 190°, but it must be between 0° and 180°.");
        assert!(f64::NAN.mpa().finite("pore pressure").unwrap_err().is_range());
    }
}
