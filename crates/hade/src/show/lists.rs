//! Several values shown one after the other: lists, tuples, and what is only borrowed.

use super::html::line_html;
use super::notebook::Show;

/// A borrowed value is shown as the value itself, so that `(&here, &there)` shows both and keeps them.
impl<T: Show + ?Sized> Show for &T {
    fn text(&self) -> String {
        (**self).text()
    }
    fn html(&self) -> String {
        (**self).html()
    }
    fn svg(&self) -> Option<String> {
        (**self).svg()
    }
    fn extra(&self) -> Vec<(String, String)> {
        (**self).extra()
    }
}

impl<T: Show> Show for [T] {
    fn text(&self) -> String {
        if self.is_empty() {
            return EMPTY.to_owned();
        }
        self.iter().map(Show::text).collect::<Vec<_>>().join("\n")
    }
    fn html(&self) -> String {
        if self.is_empty() {
            return line_html(EMPTY);
        }
        self.iter().map(Show::html).collect()
    }
}

/// How a list without entries is shown.
const EMPTY: &str = "empty list";

impl<T: Show> Show for Vec<T> {
    fn text(&self) -> String {
        self.as_slice().text()
    }
    fn html(&self) -> String {
        self.as_slice().html()
    }
}

impl<T: Show, const N: usize> Show for [T; N] {
    fn text(&self) -> String {
        self.as_slice().text()
    }
    fn html(&self) -> String {
        self.as_slice().html()
    }
}

macro_rules! tuples {
    ($($($part:ident $place:tt),+;)*) => { $(
        impl<$($part: Show),+> Show for ($($part),+) {
            fn text(&self) -> String {
                [$(self.$place.text()),+].join("\n")
            }
            fn html(&self) -> String {
                [$(self.$place.html()),+].concat()
            }
        }
    )* };
}
tuples! {
    A 0, B 1;
    A 0, B 1, C 2;
    A 0, B 1, C 2, D 3;
    A 0, B 1, C 2, D 3, E 4;
    A 0, B 1, C 2, D 3, E 4, F 5;
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::prelude::*;

    #[test]
    fn lists_and_tuples_show_each_of_theirs() {
        assert_eq!(vec![1.mpa(), 2.mpa()].text().lines().count(), 2);
        assert_eq!([Some(1.mpa()), None].text().lines().count(), 2);
        assert_eq!((1.deg(), 2.m()).text(), "1°\n2 m (6.56168 ft)");
        assert_eq!(Vec::<Pressure>::new().text(), "empty list");
        let six = (1.deg(), 2.deg(), 3.deg(), 4.deg(), 5.deg(), 6.deg());
        assert_eq!(six.text(), "1°\n2°\n3°\n4°\n5°\n6°");
        assert_eq!(six.html().matches("<div").count(), 6);
    }

    /// A tuple of results that are no copies takes them away; of references it only looks at them.
    #[test]
    fn what_is_borrowed_shows_as_itself_and_stays() {
        let station =
            |md: f64| Station { md: md.m(), inclination: 0.deg(), azimuth: Azimuth::from_true_north(0.deg()) };
        let survey = Survey::from_stations(&[station(0.0), station(100.0)]).unwrap();
        let (here, there) = (survey.at(10.m()).unwrap(), survey.at(20.m()).unwrap());
        let both = (&here, &there).text();
        assert_eq!(both, format!("{}\n{}", here.text(), there.text()));
        assert_eq!([&here, &there].text(), both);
        assert_eq!((&here, 2.mpa(), 3.deg()).text().lines().last(), Some("3°"));
        assert_eq!(<&Position as Show>::svg(&&here), here.svg());
        // Compiled, not run: it would print into the test's output.
        let _ = || {
            (&here, &there).evcxr_display();
            (&here, 1.mpa(), Some(&there), vec![&here]).evcxr_display();
        };
        assert_eq!(here.md, 10.m());
    }
}
