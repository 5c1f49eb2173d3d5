//! Quantities as a notebook shows them: the number with its unit, and beside it in the other units
//! of the trade.

use super::html::line_html;
use super::notebook::Show;
use crate::frames::Azimuth;
use crate::units::{
    Angle, Density, Expansion, FluxDensity, Gradient, Length, Pressure, Quantity, Temperature, TemperatureGradient,
    Uncertain, Warming, as_typed,
};

/// How many figures a bare value is shown with; a record keeps every bit.
const FIGURES: usize = 6;

/// A number to six significant figures, without trailing zeros.
fn six(value: f64) -> String {
    let rounded: f64 = format!("{value:.*e}", FIGURES - 1).parse().unwrap_or(value);
    as_typed(rounded)
}

fn with(value: f64, unit: &str) -> String {
    match unit {
        "" => six(value),
        "°" => format!("{}°", six(value)),
        _ => format!("{} {unit}", six(value)),
    }
}

macro_rules! shows {
    ($($quantity:ident: $($unit:literal $read:ident),*;)*) => { $(
        impl Show for $quantity {
            fn text(&self) -> String {
                let others: Vec<String> = vec![$(with(self.$read(), $unit)),*];
                let own = with(self.shown(), Self::SHOWN_IN);
                if others.is_empty() { own } else { format!("{own} ({})", others.join(", ")) }
            }
            fn html(&self) -> String {
                line_html(&self.text())
            }
        }
    )* };
}
shows! {
    Pressure: "psi" in_psi, "bar" in_bar;
    Angle: ;
    Length: "ft" in_ft;
    Density: "kg/m³" in_kg_m3, "ppg" in_ppg;
    Gradient: "psi/ft" in_psi_per_ft;
    Warming: ;
    Temperature: "°F" in_fahrenheit;
    TemperatureGradient: "°F/100 ft" in_fahrenheit_per_100_ft;
    Expansion: ;
    FluxDensity: ;
}

impl Show for f64 {
    fn text(&self) -> String {
        as_typed(*self)
    }
    fn html(&self) -> String {
        line_html(&self.text())
    }
}

impl<Q: Quantity, D: Quantity> Show for Uncertain<Q, D> {
    fn text(&self) -> String {
        format!("{} ± {}", with(self.value.shown(), Q::SHOWN_IN), one_sd(self.give_or_take))
    }
    fn html(&self) -> String {
        line_html(&self.text())
    }
}

impl<D: Quantity> Show for Uncertain<Azimuth, D> {
    fn text(&self) -> String {
        format!("{} ± {}", self.value.words(), one_sd(self.give_or_take))
    }
    fn html(&self) -> String {
        line_html(&self.text())
    }
}

fn one_sd<D: Quantity>(one_sd: D) -> String {
    format!("{} (one standard deviation)", with(one_sd.shown(), D::SHOWN_IN))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Units as _;

    #[test]
    fn values_carry_their_units() {
        assert_eq!(66.9.mpa().text(), "66.9 MPa (9703.02 psi, 669 bar)");
        assert_eq!(35.deg().text(), "35°");
        assert_eq!(1.25.sg().text(), "1.25 sg (1250 kg/m³, 10.4318 ppg)");
        assert_eq!(66.9.mpa().give_or_take(1.3.mpa()).text(), "66.9 MPa ± 1.3 MPa (one standard deviation)");
        let az = |azimuth: Azimuth| azimuth.give_or_take(5.deg()).text();
        assert_eq!(az(Azimuth::from_true_north(35.deg())), "035.0° from true north ± 5° (one standard deviation)");
        assert_eq!(
            az(Azimuth::from_magnetic_north(127.deg())),
            "127° from magnetic north ± 5° (one standard deviation)"
        );
        assert!((-3).mpa().html().contains("−3 MPa"));
        assert_eq!(f64::NAN.mpa().text().matches("NaN").count(), 3);
    }
}
