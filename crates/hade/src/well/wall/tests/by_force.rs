//! Walls by force, for the properties: the formulas as they stand in print, in MPa and degrees, at
//! one place after the other. Nothing of the wall's own code is used.
#![cfg(test)]

use super::walls_at_random::{Plain, PlainRock};

type V3 = [f64; 3];

/// A wall by force.
pub(super) struct Force {
    /// x, y, z, xy, yz, xz in the hole's axes.
    far: [f64; 6],
    /// The plane's normal in the hole's axes, its cohesion and the tangent of its friction angle.
    weak: Option<(V3, f64, f64)>,
    plain: Plain,
}

fn dot(a: V3, b: V3) -> f64 {
    a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
}

impl Force {
    pub fn new(plain: &Plain) -> Self {
        let [nn, ee, dd, ne, ed, nd] = plain.six;
        let s = [[nn, ne, nd], [ne, ee, ed], [nd, ed, dd]];
        let (i, a) = (plain.inclination.to_radians(), plain.azimuth.to_radians());
        let top = [i.cos() * a.cos(), i.cos() * a.sin(), -i.sin()];
        let right = [-a.sin(), a.cos(), 0.0];
        let along = [i.sin() * a.cos(), i.sin() * a.sin(), i.cos()];
        let of = |u: V3, v: V3| dot(u, s.map(|row| dot(row, v)));
        let far = [of(top, top), of(right, right), of(along, along), of(top, right), of(right, along), of(top, along)];
        let weak = plain.weak.map(|[strike, dip, cohesion, friction]| {
            let (p, d) = (strike.to_radians(), dip.to_radians());
            // Down into the footwall: opposite the dip direction, and down.
            let n = [d.sin() * p.sin(), -d.sin() * p.cos(), d.cos()];
            ([dot(n, top), dot(n, right), dot(n, along)], cohesion, friction.to_radians().tan())
        });
        Force { far, weak, plain: *plain }
    }

    pub fn pore_behind(&self, p: f64) -> f64 {
        let w = self.plain.seepage.map_or(0.0, |[_, sealing]| 1.0 - sealing);
        self.plain.pore + w * (p - self.plain.pore)
    }

    /// Total radial, hoop and axial stress and τθz; θ in degrees.
    pub fn parts(&self, theta: f64, p: f64) -> [f64; 4] {
        let [x, y, z, xy, yz, xz] = self.far;
        let nu = self.plain.poisson;
        let (s, c) = theta.to_radians().sin_cos();
        let (s2, c2) = (2.0 * theta.to_radians()).sin_cos();
        let mut added = 0.0;
        if let Some([alpha, sealing]) = self.plain.seepage {
            let eta = alpha * (1.0 - 2.0 * nu) / (2.0 * (1.0 - nu));
            added += 2.0 * eta * (1.0 - sealing) * (p - self.plain.pore);
        }
        if let Some([warming, e, expansion]) = self.plain.thermal {
            added += e * expansion * warming / (1.0 - nu);
        }
        [
            p,
            x + y - 2.0 * (x - y) * c2 - 4.0 * xy * s2 - p + added,
            z - nu * (2.0 * (x - y) * c2 + 4.0 * xy * s2) + added,
            2.0 * (yz * c - xz * s),
        ]
    }

    /// σ1', σ2', σ3'.
    pub fn principal(&self, theta: f64, p: f64) -> V3 {
        let [r, h, z, t] = self.parts(theta, p);
        let (mean, radius) = (0.5 * (h + z), (0.25 * (h - z) * (h - z) + t * t).sqrt());
        let behind = self.pore_behind(p);
        let mut all = [mean + radius - behind, mean - radius - behind, r - behind];
        all.sort_by(|a, b| b.total_cmp(a));
        all
    }

    /// Slip on the plane of weakness: τ − c_w − σn' tan φ_w.
    pub fn slip(&self, theta: f64, p: f64) -> f64 {
        let Some((n, cohesion, friction)) = self.weak else { return f64::NEG_INFINITY };
        let [r, h, z, t] = self.parts(theta, p);
        let behind = self.pore_behind(p);
        let (s, c) = theta.to_radians().sin_cos();
        let n = [c * n[0] + s * n[1], -s * n[0] + c * n[1], n[2]];
        let traction = [(r - behind) * n[0], (h - behind) * n[1] + t * n[2], t * n[1] + (z - behind) * n[2]];
        let normal = dot(traction, n);
        let along = [0, 1, 2].map(|k| traction[k] - normal * n[k]);
        dot(along, along).sqrt() - cohesion - normal * friction
    }

    /// Positive where the rock or its plane fails, negative where both hold. Only its sign is
    /// anything but the criterion's own measure.
    pub fn excess(&self, theta: f64, p: f64) -> f64 {
        self.intact(theta, p).max(self.slip(theta, p))
    }

    fn intact(&self, theta: f64, p: f64) -> f64 {
        let [s1, s2, s3] = self.principal(theta, p);
        let octahedral = ((s1 - s2).powi(2) + (s2 - s3).powi(2) + (s3 - s1).powi(2)).sqrt() / 3.0;
        let sines = |phi: f64| phi.to_radians().sin_cos();
        match self.plain.rock {
            PlainRock::MohrCoulomb { c, phi } => {
                let (s, k) = sines(phi);
                0.5 * (s1 - s3) - c * k - 0.5 * (s1 + s3) * s
            }
            PlainRock::MogiCoulomb { c, phi } => {
                let (s, k) = sines(phi);
                let share = 2.0 * 2.0_f64.sqrt() / 3.0;
                octahedral - share * (c * k + s * 0.5 * (s1 + s3))
            }
            PlainRock::ModifiedLade { c, phi } => {
                let (s, k) = sines(phi);
                let t = s / k;
                let shift = c / t;
                let eta = 4.0 * t * t * (9.0 - 7.0 * s) / (1.0 - s);
                if s3 + shift <= 0.0 {
                    return shift - s3;
                }
                let sum = s1 + s2 + s3 + 3.0 * shift;
                let product = (s1 + shift) * (s2 + shift) * (s3 + shift);
                // As a stress: how much less the product may be.
                sum / 3.0 * (1.0 - (27.0 + eta) * product / sum.powi(3)) / 3.0
            }
            PlainRock::DruckerPrager { fit, c, phi } => {
                let (s, k) = sines(phi);
                let root = 3.0_f64.sqrt();
                let (alpha, bears) = match fit {
                    0 => (s / (root * (3.0 + s * s).sqrt()), 3.0 * c * k / (root * (3.0 + s * s).sqrt())),
                    1 => (2.0 * s / (root * (3.0 - s)), 6.0 * c * k / (root * (3.0 - s))),
                    _ => (2.0 * s / (root * (3.0 + s)), 6.0 * c * k / (root * (3.0 + s))),
                };
                // √J2 = √(3/2) τoct.
                1.5_f64.sqrt() * octahedral - bears - alpha * (s1 + s2 + s3)
            }
            PlainRock::HoekBrown { sigma_ci, m_i, gsi, disturbance } => {
                let m_b = m_i * ((gsi - 100.0) / (28.0 - 14.0 * disturbance)).exp();
                let s = ((gsi - 100.0) / (9.0 - 3.0 * disturbance)).exp();
                let a = 0.5 + ((-gsi / 15.0).exp() - (-20.0 / 3.0_f64).exp()) / 6.0;
                let under = m_b * s3 / sigma_ci + s;
                if under <= 0.0 { s1 - s3 - under * sigma_ci } else { s1 - s3 - sigma_ci * under.powf(a) }
            }
        }
    }

    /// The worst excess at a pressure: on a grid, then closing in on its three best places.
    pub fn worst(&self, p: f64, places: u32) -> f64 {
        let step = 180.0 / f64::from(places);
        let values: Vec<f64> = (0..places).map(|k| self.excess(f64::from(k) * step, p)).collect();
        let n = values.len();
        let mut hills: Vec<usize> =
            (0..n).filter(|k| values[*k] >= values[(k + 1) % n] && values[*k] >= values[(k + n - 1) % n]).collect();
        hills.sort_by(|a, b| values[*b].total_cmp(&values[*a]));
        let mut worst = f64::NEG_INFINITY;
        for k in hills.into_iter().take(6) {
            worst = worst.max(values[k]);
            let middle = k as f64 * step;
            for (mut low, mut high) in [(middle - step, middle), (middle, middle + step)] {
                for _ in 0..36 {
                    let (a, b) = (low + (high - low) / 3.0, high - (high - low) / 3.0);
                    if self.excess(a, p) > self.excess(b, p) { high = b } else { low = a }
                }
                worst = worst.max(self.excess(0.5 * (low + high), p));
            }
        }
        worst
    }

    /// Whether anything fails on a grid.
    pub fn fails(&self, p: f64, places: u32) -> bool {
        (0..places).any(|k| self.excess(f64::from(k) * 180.0 / f64::from(places), p) > 0.0)
    }

    /// Whether each place of a grid fails.
    pub fn failing(&self, p: f64, places: u32) -> Vec<bool> {
        (0..places).map(|k| self.excess(f64::from(k) * 180.0 / f64::from(places), p) > 0.0).collect()
    }

    /// Between a pressure that fails and one that holds, on a grid.
    pub fn edge(&self, mut fails: f64, mut holds: f64, places: u32) -> f64 {
        for _ in 0..48 {
            let middle = 0.5 * (fails + holds);
            if self.fails(middle, places) { fails = middle } else { holds = middle }
        }
        0.5 * (fails + holds)
    }
}
