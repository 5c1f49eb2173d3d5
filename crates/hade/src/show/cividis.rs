//! The colours of a quantity, from low to high.
//!
//! Cividis: Nuñez, J.R., Anderton, C.R. and Renslow, R.S. (2018) "Optimizing colormaps with
//! consideration for color vision deficiency to enable accurate interpretation of scientific data",
//! PLoS ONE 13(7), e0199239. It grows steadily lighter, so it also reads without colour.

use super::theme::Colour;

/// Every 17th of its 256 colours, as distributed with Matplotlib 3.11.
const STOPS: [Colour; 16] = [
    Colour(0x00, 0x22, 0x4d),
    Colour(0x00, 0x2e, 0x6b),
    Colour(0x1d, 0x39, 0x6e),
    Colour(0x35, 0x45, 0x6c),
    Colour(0x47, 0x51, 0x6b),
    Colour(0x57, 0x5d, 0x6d),
    Colour(0x66, 0x69, 0x70),
    Colour(0x74, 0x75, 0x75),
    Colour(0x84, 0x81, 0x78),
    Colour(0x94, 0x8e, 0x77),
    Colour(0xa5, 0x9b, 0x73),
    Colour(0xb6, 0xa9, 0x6e),
    Colour(0xc8, 0xb7, 0x65),
    Colour(0xda, 0xc6, 0x5a),
    Colour(0xed, 0xd6, 0x48),
    Colour(0xfd, 0xe7, 0x37),
];

/// Ink on dark and on light colours of the scale; neither is a colour of a palette, so a dark page
/// does not change them.
const INKS: [Colour; 2] = [Colour(0xfe, 0xfe, 0xfe), Colour(0x01, 0x01, 0x01)];

/// The colour at a share of the scale, 0 low to 1 high.
pub(super) fn colour(share: f64) -> Colour {
    let last = STOPS.len() - 1;
    let place = share.clamp(0.0, 1.0) * last as f64;
    // Not a number becomes 0 here.
    let below = (place.floor() as usize).min(last - 1);
    let (a, b) = (STOPS[below], STOPS[below + 1]);
    let t = if place.is_finite() { place - below as f64 } else { 0.0 };
    let mix = |a: u8, b: u8| (f64::from(a) + t * (f64::from(b) - f64::from(a))).round() as u8;
    Colour(mix(a.0, b.0), mix(a.1, b.1), mix(a.2, b.2))
}

/// The ink that reads on the colour at a share of the scale.
pub(super) fn ink(share: f64) -> Colour {
    // At a relative luminance of 0.179 black and white stand out equally, 4.6 : 1.
    if colour(share).luminance() < 0.179 { INKS[0] } else { INKS[1] }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::show::theme::LIGHT;

    #[test]
    fn grows_lighter_all_the_way_and_its_ends_are_as_published() {
        let steps: Vec<f64> = (0..=50).map(|i| colour(f64::from(i) / 50.0).luminance()).collect();
        assert!(steps.windows(2).all(|w| w[1] > w[0]));
        // Entries 0, 128 and 255 of the published table (Matplotlib 3.11); 128 lies between stops.
        assert_eq!(colour(0.0), Colour(0x00, 0x22, 0x4d));
        assert_eq!(colour(1.0), Colour(0xfd, 0xe7, 0x37));
        let middle = colour(128.0 / 255.0);
        let off = |a: u8, b: u8| a.abs_diff(b);
        assert!(off(middle.0, 0x7c) <= 2 && off(middle.1, 0x7b) <= 2 && off(middle.2, 0x78) <= 2, "{middle:?}");
        assert_eq!(colour(f64::NAN), colour(0.0));
    }

    #[test]
    fn ink_reads_on_every_colour() {
        for i in 0..=100 {
            let share = f64::from(i) / 100.0;
            let (a, b) = (colour(share).luminance(), ink(share).luminance());
            let contrast = (a.max(b) + 0.05) / (a.min(b) + 0.05);
            assert!(contrast >= 4.5, "{share} {contrast}");
        }
    }

    #[test]
    fn a_dark_page_changes_none_of_its_colours() {
        let page = LIGHT.colours();
        let own = (0..=1000).map(|i| colour(f64::from(i) / 1000.0)).chain(INKS);
        assert!(own.into_iter().all(|c| !page.contains(&c)));
    }
}
