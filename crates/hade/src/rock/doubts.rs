//! Numbers of a rock that can be, but seldom are: a unit or two columns may have been mistaken.

use super::Rock;
use crate::units::{Quantity, with_typed_unit};

/// Friction angles of intact rock lie between these, degrees (common practice, no source).
const FRICTION_ANGLES: [f64; 2] = [10.0, 60.0];
/// Rock that holds together has a cohesion of at least this, Pa, and a uniaxial strength of at most that
/// (common practice, no source).
const COHESION: f64 = 0.1e6;
const UNIAXIAL_STRENGTH: f64 = 500e6;

impl Rock {
    /// What of its strength is to be looked at again, in sentences.
    pub(crate) fn doubts(self) -> Vec<String> {
        let mut doubts = Vec::new();
        let Some((pressure, uniaxial, angle)) = self.strength.pressure_and_angle() else { return doubts };
        let [least, most] = FRICTION_ANGLES.map(|angle| angle.to_radians());
        if angle.si() < least || angle.si() > most {
            doubts.push(format!(
                "Doubtful input: the friction angle {} is outside {}° to {}°, where intact rock lies; see whether it was exchanged with the cohesion, or is another kind of angle.",
                with_typed_unit(angle),
                FRICTION_ANGLES[0],
                FRICTION_ANGLES[1]
            ));
        }
        let doubt = match uniaxial {
            false if pressure.si() < COHESION => Some("cohesion"),
            true if pressure.si() > UNIAXIAL_STRENGTH => Some("uniaxial compressive strength"),
            _ => None,
        };
        if let Some(what) = doubt {
            doubts.push(format!(
                "Doubtful input: the {what} {} is {}; see whether its unit was mistaken.",
                with_typed_unit(pressure),
                if uniaxial { "beyond that of the strongest rock" } else { "that of rock which hardly holds together" }
            ));
        }
        doubts
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rock::Strength;
    use crate::units::Units;

    #[test]
    fn an_exchanged_column_and_a_mistaken_unit_are_doubted() {
        let doubts = |strength| Rock { poisson: 0.25, tensile_strength: 1.mpa(), strength }.doubts();
        assert_eq!(doubts(Strength::mohr_coulomb(6.2.mpa(), 24.deg())), Vec::<String>::new());
        assert_eq!(
            doubts(Strength::mohr_coulomb(24.mpa(), 6.2.deg())),
            [
                "Doubtful input: the friction angle 6.2° is outside 10° to 60°, where intact rock lies; see whether it was exchanged with the cohesion, or is another kind of angle."
            ]
        );
        assert_eq!(doubts(Strength::mohr_coulomb(0.04.mpa(), 30.deg())).len(), 1);
        assert_eq!(doubts(Strength::mohr_coulomb_ucs(5600.mpa(), 30.deg())).len(), 1);
        assert_eq!(doubts(Strength::mohr_coulomb_ucs(56.mpa(), 30.deg())).len(), 0);
    }
}
