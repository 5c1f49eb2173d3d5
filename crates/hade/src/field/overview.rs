//! A density log at a glance.

use super::density_log::{DensityLog, LogSource};
use crate::units::{Length, fixed, with_typed_unit};

impl DensityLog {
    /// "KF-1: RHOB of data/kf1-density.las, 5701 values from 100.0 m to 3100.0 m below the rotary table, 1.95 to
    /// 2.71 g/cm³, no gap; …".
    pub fn words(&self) -> String {
        let data = self.data();
        let hole = data.about.hole.map_or("A log", |name| name.text());
        let from = match &data.about.source {
            LogSource::File { path, curve, .. } => format!("{curve} of {path}"),
            LogSource::Typed => "densities typed in the notebook".to_owned(),
        };
        let (top, bottom) = self.range();
        let densities = data.densities.iter().copied();
        let (least, most) = densities.fold((f64::INFINITY, f64::NEG_INFINITY), |(l, m), d| (l.min(d), m.max(d)));
        let longest = data.gaps.iter().copied().reduce(|a, b| if b.length() > a.length() { b } else { a });
        let gaps = match (longest, data.gaps.len()) {
            (None, _) => "no gap".to_owned(),
            (Some(gap), 1) => format!("a gap from {} to {}", gap.top, gap.bottom),
            (Some(gap), n) => format!("{n} gaps, the longest from {} to {}", gap.top, gap.bottom),
        };
        let bridged = data.bridged.filter(|_| longest.is_some()).map_or_else(String::new, |length: Length| {
            format!(" (those up to {} may be bridged)", with_typed_unit(length))
        });
        let tie = data.about.tie.map_or_else(|| "no levels stated".to_owned(), |tie| tie.words());
        format!(
            "{hole}: {from}, {} values from {top} to {bottom} below {}, {} to {} g/cm³, {gaps}{bridged}; {tie}",
            data.depths.len(),
            data.about.datum.words(),
            fixed(least * 1e-3, 2),
            fixed(most * 1e-3, 2),
        )
    }
}
