//! The fonts of a memo: those packed with Typst, and Inter. No font of the machine is used, so a
//! memo looks the same everywhere.

use std::sync::OnceLock;

use typst::foundations::Bytes;
use typst::text::{Font, FontInfo};
use typst_kit::fonts::FontStore;

/// Inter, unchanged, under the SIL Open Font License (`assets/fonts/OFL.txt`).
const INTER: [&[u8]; 3] = [
    include_bytes!("../assets/fonts/Inter-Regular.otf"),
    include_bytes!("../assets/fonts/Inter-Italic.otf"),
    include_bytes!("../assets/fonts/Inter-SemiBold.otf"),
];

struct Fonts {
    store: FontStore,
    infos: Vec<FontInfo>,
}

fn fonts() -> &'static Fonts {
    static FONTS: OnceLock<Fonts> = OnceLock::new();
    FONTS.get_or_init(|| {
        let mut fonts = Fonts { store: FontStore::new(), infos: Vec::new() };
        let inter = INTER.into_iter().flat_map(|file| Font::iter(Bytes::new(file)));
        for font in inter.chain(typst_kit::fonts::embedded().map(|(font, _)| font)) {
            let info = font.info().clone();
            fonts.infos.push(info.clone());
            fonts.store.push((font, info));
        }
        fonts
    })
}

/// The fonts, as Typst asks for them.
pub(crate) fn store() -> &'static FontStore {
    &fonts().store
}

/// Whether some font has a character. Private-use characters have no meaning a reader could look
/// up, and PDF/A refuses them.
pub(crate) fn covers(c: char) -> bool {
    let private = matches!(u32::from(c), 0xE000..=0xF8FF | 0xF_0000..=0x10_FFFF);
    !private && (c.is_ascii_graphic() || fonts().infos.iter().any(|f| f.coverage.contains(u32::from(c))))
}

/// Whether a family is there.
pub(crate) fn has_family(name: &str) -> bool {
    fonts().infos.iter().any(|f| f.family.eq_ignore_ascii_case(name))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_memos_write_is_covered_and_what_no_font_has_is_not() {
        let written = "Aé σθ τ ≤ ± ° µ ² ³ ⁻ ⁴ ⁰ ₁ ∑ × · − – — … → ✓ ½ ′ ≥ ∞ √ ρ φ ν η α Δ \u{202f}\u{a0}";
        for c in written.chars() {
            assert!(covers(c), "{c:?}");
        }
        for c in ['漢', '\u{e000}', '\u{1f600}', '\u{f8ff}'] {
            assert!(!covers(c), "{c:?}");
        }
        assert!(has_family("Inter") && has_family("Libertinus Serif") && !has_family("Comic Sans MS"));
    }
}
