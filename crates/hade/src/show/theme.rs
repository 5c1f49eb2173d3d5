//! What each role looks like, on each ground.
//!
//! Lines take the colours of the palette of Okabe, M. and Ito, K. (2008), "Color Universal Design:
//! how to make figures and presentations that are friendly to colorblind people", University of
//! Tokyo; blue, vermillion, bluish green and reddish purple each keep a contrast of 3 : 1 on white
//! and on near-black (WCAG 2.2, criterion 1.4.11). The words beside them are shades of the same
//! hues with at least 4.5 : 1 (criterion 1.4.3). Colour is never alone: each role has its own dash
//! and weight, each band its own hatching, and every line a label.

use crate::card::Role;

/// The ground a figure is drawn for.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Theme {
    /// A notebook: the figure brings its own ground, white, or dark where the page around it says
    /// that it is dark (JupyterLab does), so that ink and ground always fit each other.
    #[default]
    Notebook,
    /// Dark ink on a transparent ground, for a light page.
    Light,
    /// Light ink on a transparent ground, for a dark page.
    Dark,
    /// Black ink on a transparent ground, for paper.
    Print,
}

/// A colour.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Colour(pub u8, pub u8, pub u8);

impl Colour {
    /// As SVG writes it (upper case, as the plotting backend does).
    pub fn hex(self) -> String {
        format!("#{:02X}{:02X}{:02X}", self.0, self.1, self.2)
    }

    /// Relative luminance (WCAG 2.2, definitions).
    pub fn luminance(self) -> f64 {
        let part = |v: u8| {
            let s = f64::from(v) / 255.0;
            if s <= 0.04045 { s / 12.92 } else { ((s + 0.055) / 1.055).powf(2.4) }
        };
        0.2126 * part(self.0) + 0.7152 * part(self.1) + 0.0722 * part(self.2)
    }
}

/// Every colour of one ground.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Palette {
    /// The ground itself.
    pub ground: Colour,
    /// Text and limits.
    pub ink: Colour,
    /// Numbers at ticks, quiet words.
    pub soft: Colour,
    /// Axes and helping lines.
    pub axis: Colour,
    /// The grid.
    pub grid: Colour,
    first: [Colour; 2],
    second: [Colour; 2],
    third: [Colour; 2],
    fourth: [Colour; 2],
    failing: [Colour; 2],
    range: [Colour; 2],
}

/// The palette of white grounds: line and word of each role.
pub(super) const LIGHT: Palette = Palette {
    ground: Colour(0xff, 0xff, 0xff),
    ink: Colour(0x1d, 0x22, 0x28),
    soft: Colour(0x55, 0x5e, 0x68),
    axis: Colour(0x82, 0x8b, 0x95),
    grid: Colour(0xe6, 0xe9, 0xec),
    first: [Colour(0x00, 0x72, 0xb2), Colour(0x00, 0x63, 0x9c)],
    second: [Colour(0xd5, 0x5e, 0x00), Colour(0xa8, 0x48, 0x00)],
    third: [Colour(0x00, 0x9e, 0x73), Colour(0x00, 0x70, 0x52)],
    fourth: [Colour(0xcc, 0x79, 0xa7), Colour(0x9b, 0x45, 0x75)],
    failing: [Colour(0xe6, 0x9f, 0x00), Colour(0x82, 0x58, 0x00)],
    range: [Colour(0x56, 0xb4, 0xe9), Colour(0x12, 0x66, 0x98)],
};

/// The palette of dark grounds.
pub(super) const DARK: Palette = Palette {
    ground: Colour(0x16, 0x19, 0x1d),
    ink: Colour(0xe8, 0xea, 0xed),
    soft: Colour(0xa9, 0xb1, 0xba),
    axis: Colour(0x76, 0x7f, 0x89),
    grid: Colour(0x2b, 0x30, 0x36),
    first: [Colour(0x56, 0xb4, 0xe9), Colour(0x7c, 0xc6, 0xf0)],
    second: [Colour(0xd5, 0x5e, 0x00), Colour(0xf0, 0x8c, 0x45)],
    third: [Colour(0x00, 0x9e, 0x73), Colour(0x3f, 0xc8, 0xa0)],
    fourth: [Colour(0xcc, 0x79, 0xa7), Colour(0xe0, 0x9d, 0xc2)],
    failing: [Colour(0xe6, 0x9f, 0x00), Colour(0xf2, 0xbd, 0x4b)],
    range: [Colour(0x00, 0x72, 0xb2), Colour(0x86, 0xc8, 0xee)],
};

/// How a role is drawn as a line.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Pen {
    /// The colour of the line.
    pub line: Colour,
    /// The colour of the words beside it.
    pub word: Colour,
    /// The width in pixels.
    pub width: f64,
    /// Dash and gap lengths in pixels, empty for a whole line.
    pub dash: &'static [f64],
}

/// How a band of a role is filled.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Hatch {
    /// Slanting strokes.
    Slanted,
    /// Level strokes.
    Level,
    /// No strokes.
    Plain,
}

impl Palette {
    /// The palette of a theme (of its white ground, for a notebook).
    pub fn of(theme: Theme) -> Palette {
        match theme {
            Theme::Notebook | Theme::Light => LIGHT,
            Theme::Dark => DARK,
            Theme::Print => Palette { ink: Colour(0, 0, 0), soft: Colour(0x3a, 0x3a, 0x3a), ..LIGHT },
        }
    }

    /// How a role is drawn.
    pub fn pen(&self, role: Role) -> Pen {
        let pen = |[line, word]: [Colour; 2], width, dash| Pen { line, word, width, dash };
        match role {
            Role::First => pen(self.first, 2.2, &[]),
            Role::Second => pen(self.second, 2.2, &[11.0, 4.0]),
            Role::Third => pen(self.third, 2.2, &[11.0, 3.5, 2.5, 3.5]),
            Role::Fourth => pen(self.fourth, 2.4, &[2.6, 3.4]),
            Role::Limit => pen([self.ink, self.ink], 3.2, &[]),
            Role::Failing => pen(self.failing, 4.0, &[]),
            Role::Range => pen(self.range, 3.2, &[6.0, 3.0]),
            Role::Quiet => pen([self.axis, self.soft], 1.1, &[4.0, 4.0]),
        }
    }

    /// The hatching of a band.
    pub fn hatch(role: Role) -> Hatch {
        match role {
            Role::Failing => Hatch::Slanted,
            Role::Range => Hatch::Level,
            _ => Hatch::Plain,
        }
    }

    pub(super) fn colours(&self) -> [Colour; 17] {
        let [a, b] = self.first;
        let [c, d] = self.second;
        let [e, f] = self.third;
        let [g, h] = self.fourth;
        let [i, j] = self.failing;
        let [k, l] = self.range;
        [self.ground, self.ink, self.soft, self.axis, self.grid, a, b, c, d, e, f, g, h, i, j, k, l]
    }
}

/// The style sheet that turns a figure drawn in [`LIGHT`] into one drawn in [`DARK`] where the
/// page around it is dark. It lives inside the picture and reaches nothing else.
pub(super) fn dark_where_the_page_is() -> String {
    let rules: String = LIGHT
        .colours()
        .iter()
        .zip(DARK.colours())
        .map(|(light, dark)| {
            let (light, dark) = (light.hex(), dark.hex());
            format!("[fill=\"{light}\"]{{fill:{dark}}}[stroke=\"{light}\"]{{stroke:{dark}}}")
        })
        .collect();
    format!("<style>@media (prefers-color-scheme:dark){{{rules}}}</style>\n")
}

#[cfg(test)]
mod tests {
    use super::*;

    /// WCAG 2.2, definitions.
    fn contrast(a: Colour, b: Colour) -> f64 {
        let (a, b) = (a.luminance(), b.luminance());
        (a.max(b) + 0.05) / (a.min(b) + 0.05)
    }

    const LINES: [Role; 6] = [Role::First, Role::Second, Role::Third, Role::Fourth, Role::Limit, Role::Quiet];
    const ALL: [Role; 8] =
        [Role::First, Role::Second, Role::Third, Role::Fourth, Role::Limit, Role::Failing, Role::Range, Role::Quiet];

    #[test]
    fn words_and_lines_stand_out_from_their_ground() {
        for (palette, ground) in [
            (LIGHT, LIGHT.ground),
            (DARK, DARK.ground),
            (DARK, Colour(0x21, 0x21, 0x21)),
            (Palette::of(Theme::Print), LIGHT.ground),
        ] {
            assert!(contrast(palette.ink, ground) > 7.0);
            assert!(contrast(palette.soft, ground) > 4.5);
            for role in ALL {
                let ratio = contrast(palette.pen(role).word, ground);
                assert!(ratio >= 4.5, "{role:?} {ratio:.2}");
            }
            for role in LINES {
                let ratio = contrast(palette.pen(role).line, ground);
                assert!(ratio >= 3.0, "{role:?} {ratio:.2}");
            }
        }
    }

    #[test]
    fn every_role_differs_without_colour() {
        for (i, a) in ALL.iter().enumerate() {
            for b in ALL.iter().skip(i + 1) {
                let (a, b) = (LIGHT.pen(*a), LIGHT.pen(*b));
                assert!(a.dash != b.dash || (a.width - b.width).abs() > 0.5);
            }
        }
    }

    #[test]
    fn each_light_colour_has_one_dark_one() {
        let light = LIGHT.colours();
        for (i, a) in light.iter().enumerate() {
            assert!(light.iter().skip(i + 1).all(|b| a != b), "{}", a.hex());
        }
        assert!(!dark_where_the_page_is().contains("]]>"));
    }
}
