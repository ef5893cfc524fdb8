//! The mean of a quantity over bands, weighted.

use super::chebyshev::{DEGREE, Series};
use super::extremes::{check_band, mesh_angles};
use super::mesh::{Along, Mesh};
use super::probe::Probe;
use crate::error::OpticsError;
use crate::quadrature::gauss_legendre;
use crate::quantity::{Light, Quantity};
use crate::stack::Stack;
use crate::weight::SpectralWeight;

/// The accuracy that a mean is promised to.
const ACCURACY: f64 = 1e-8;
/// The accuracy asked of every panel, so that their sum keeps the promise.
const PANEL: f64 = 1e-9;
/// Steps of the mesh, each an eighth of a fringe, that a panel starts with.
const STEPS: usize = 8;
/// How often a panel may be halved.
const DEEPEST: u32 = 48;
/// The most panels over a band.
const MOST: usize = 200_000;

/// A mean, and how uncertain it is.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Mean {
    /// The value.
    pub value: f64,
    /// An estimate of its error.
    pub error: f64,
}

/// ∫ q w dλ / ∫ w dλ over the union of bands of vacuum wavelengths in nm, to 1e-8 of the quantity's size.
///
/// The stack's response becomes a piecewise Chebyshev series, halved where it has not settled, and is then
/// integrated against the weight between each two of the weight's own rows: a rough weight costs no
/// evaluations of the stack.
///
/// # Errors
/// As [`extremes`](super::extremes); a band without width; a weight that does not reach over the bands or is
/// zero all over them; [`OpticsError::NotConverged`] if the accuracy is not reached.
pub fn mean(
    stack: &Stack,
    quantity: &Quantity,
    light: &Light,
    bands_nm: &[(f64, f64)],
    weight: &SpectralWeight,
) -> Result<Mean, OpticsError> {
    let means = means(stack, quantity, light, bands_nm, std::slice::from_ref(weight))?;
    // One weight in, one mean out.
    means.first().copied().ok_or(OpticsError::Band { band_nm: (f64::NAN, f64::NAN) })
}

/// The means of one quantity under several weights, in their order: the stack is evaluated once for all.
///
/// # Errors
/// As [`mean`].
pub fn means(
    stack: &Stack,
    quantity: &Quantity,
    light: &Light,
    bands_nm: &[(f64, f64)],
    weights: &[SpectralWeight],
) -> Result<Vec<Mean>, OpticsError> {
    let probe = Probe::new(stack, quantity, light)?;
    let bands = union(bands_nm)?;
    for (&band_nm, weight) in bands.iter().flat_map(|band| weights.iter().map(move |weight| (band, weight))) {
        if let Some(range_nm) = weight.range_nm()
            && !(range_nm.0 <= band_nm.0 && band_nm.1 <= range_nm.1)
        {
            return Err(OpticsError::WeightOutside { band_nm, range_nm });
        }
    }
    let width: f64 = bands.iter().map(|band| band.1 - band.0).sum();
    let mut series = Vec::new();
    for &band in &bands {
        series.extend(panels(&probe, band, width)?);
    }
    let mut knots: Vec<f64> = weights.iter().flat_map(SpectralWeight::knots_nm).collect();
    knots.sort_by(f64::total_cmp);
    knots.dedup();
    let nodes = Nodes::new(&series, &knots);
    weights.iter().map(|weight| Sum::over(&series, &nodes, weight).mean(&bands)).collect()
}

/// The bands in order, those that touch or overlap joined.
fn union(bands_nm: &[(f64, f64)]) -> Result<Vec<(f64, f64)>, OpticsError> {
    let mut sorted = bands_nm.to_vec();
    sorted.sort_by(|a, b| a.0.total_cmp(&b.0));
    let mut joined: Vec<(f64, f64)> = Vec::new();
    for band_nm in sorted {
        check_band(band_nm)?;
        if band_nm.0 == band_nm.1 {
            return Err(OpticsError::Band { band_nm });
        }
        match joined.last_mut() {
            Some(last) if band_nm.0 <= last.1 => last.1 = last.1.max(band_nm.1),
            _ => joined.push(band_nm),
        }
    }
    if joined.is_empty() { Err(OpticsError::Band { band_nm: (f64::NAN, f64::NAN) }) } else { Ok(joined) }
}

/// Where the product of the series and the weights is looked at: Gauss's nodes between each two knots, with their shares and
/// the series' values. Exact for a panel's series times a straight line times a wavelength.
struct Nodes {
    wavelengths: Vec<f64>,
    shares: Vec<f64>,
    values: Vec<f64>,
    /// How many nodes lie before the end of each panel.
    ends: Vec<usize>,
}

/// The number of Gauss's nodes.
const GAUSS: usize = DEGREE / 2 + 2;

impl Nodes {
    fn new(series: &[Series], knots: &[f64]) -> Nodes {
        let rule = gauss_legendre(GAUSS);
        let mut nodes =
            Nodes { wavelengths: Vec::new(), shares: Vec::new(), values: Vec::new(), ends: Vec::new() };
        for series in series {
            let first = knots.partition_point(|&knot| knot <= series.lo);
            let inside = knots[first..].iter().copied().take_while(|&knot| knot < series.hi);
            let mut from = series.lo;
            for to in inside.chain([series.hi]) {
                // Smooth weights, such as a black body's, are cut where the wavelength has grown by a tenth.
                let pieces = ((to / from).ln() / 0.1).ceil().max(1.0);
                let half = 0.5 * (to - from) / pieces;
                for piece in 0..pieces as usize {
                    let middle = from + half * (2 * piece + 1) as f64;
                    let places: [f64; GAUSS] = std::array::from_fn(|at| middle + half * rule[at].0);
                    nodes.values.extend(series.at(&places));
                    nodes.wavelengths.extend(places);
                    nodes.shares.extend(rule.iter().map(|node| half * node.1));
                }
                from = to;
            }
            nodes.ends.push(nodes.wavelengths.len());
        }
        nodes
    }
}

/// ∫ q w dλ with its error, and ∫ w dλ.
struct Sum {
    product: f64,
    weight: f64,
    error: f64,
    worst_nm: f64,
    worst: f64,
}

impl Sum {
    fn over(series: &[Series], nodes: &Nodes, weight: &SpectralWeight) -> Sum {
        let mut sum = Sum { product: 0.0, weight: 0.0, error: 0.0, worst_nm: 0.0, worst: -1.0 };
        let weights = weight.inside_all(&nodes.wavelengths);
        let mut from = 0;
        for (series, &to) in series.iter().zip(&nodes.ends) {
            let mut weighed = 0.0;
            let shares = nodes.shares[from..to].iter().zip(&weights[from..to]);
            for ((share, weight), value) in shares.zip(&nodes.values[from..to]) {
                let weight = share * weight;
                weighed += weight;
                sum.product += weight * value;
            }
            from = to;
            sum.weight += weighed;
            let error = series.tail() * weighed;
            sum.error += error;
            if error > sum.worst {
                (sum.worst, sum.worst_nm) = (error, 0.5 * (series.lo + series.hi));
            }
        }
        sum
    }

    fn mean(&self, bands: &[(f64, f64)]) -> Result<Mean, OpticsError> {
        if self.weight <= 0.0 {
            let band_nm = (bands[0].0, bands[bands.len() - 1].1);
            return Err(OpticsError::WeightZero { band_nm });
        }
        let mean = Mean { value: self.product / self.weight, error: self.error / self.weight };
        if mean.error <= ACCURACY * mean.value.abs().max(1.0) {
            Ok(mean)
        } else {
            Err(OpticsError::NotConverged {
                estimate: mean.value,
                error: mean.error,
                wavelength_nm: self.worst_nm,
            })
        }
    }
}

/// The quantity over a band, as series that have settled, in order.
fn panels(probe: &Probe<'_>, band_nm: (f64, f64), total_nm: f64) -> Result<Vec<Series>, OpticsError> {
    let mut ends: Vec<f64> = Vec::new();
    for angle_rad in mesh_angles(probe) {
        let along = Along::Wavelength { angle_rad };
        let mesh = Mesh::build(probe, probe.cone.is_some(), along, band_nm)?;
        ends.extend(mesh.points().step_by(STEPS));
    }
    ends.extend([band_nm.0, band_nm.1]);
    let knots = probe.plan.materials.iter().flat_map(|material| material.knots_nm());
    ends.extend(knots.filter(|&knot| band_nm.0 < knot && knot < band_nm.1));
    ends.sort_by(f64::total_cmp);
    ends.dedup();
    let mut open: Vec<(f64, f64)> = ends.windows(2).map(|ends| (ends[0], ends[1])).collect();
    let mut settled = Vec::new();
    for depth in 0.. {
        let places: Vec<f64> = open.iter().flat_map(|&(lo, hi)| Series::places(lo, hi)).collect();
        let values = probe.values(&places)?;
        let mut halves = Vec::new();
        for (&(lo, hi), values) in open.iter().zip(values.chunks(DEGREE + 1)) {
            let series = Series::new(lo, hi, values);
            let tail = series.tail();
            let share = (hi - lo) / total_nm;
            let middle = 0.5 * (lo + hi);
            let fine = tail <= PANEL || tail * share <= 1e-3 * PANEL;
            let most = settled.len() + open.len() + halves.len() >= MOST;
            if fine || depth >= DEEPEST || most || middle <= lo || middle >= hi {
                settled.push(series);
            } else {
                halves.extend([(lo, middle), (middle, hi)]);
            }
        }
        if halves.is_empty() {
            break;
        }
        open = halves;
    }
    settled.sort_by(|a, b| a.lo.total_cmp(&b.lo));
    Ok(settled)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The same integrals one node after the other, between each two knots of the weight itself.
    fn defined(series: &[Series], weight: &SpectralWeight) -> (f64, f64) {
        let rule = gauss_legendre(GAUSS);
        let (mut product, mut flux) = (0.0, 0.0);
        for series in series {
            let mut ends = weight.knots_nm();
            ends.retain(|knot| series.lo < *knot && *knot < series.hi);
            ends.insert(0, series.lo);
            ends.push(series.hi);
            for ends in ends.windows(2) {
                let pieces = ((ends[1] / ends[0]).ln() / 0.1).ceil().max(1.0);
                let half = 0.5 * (ends[1] - ends[0]) / pieces;
                for piece in 0..pieces as usize {
                    let middle = ends[0] + half * (2 * piece + 1) as f64;
                    for &(x, share) in &rule {
                        let wavelength = middle + half * x;
                        let weight = half * share * weight.inside(wavelength);
                        flux += weight;
                        product += weight * series.at(&[wavelength])[0];
                    }
                }
            }
        }
        (product, flux)
    }

    #[test]
    fn weights_that_share_their_nodes_have_the_integrals_that_each_has_alone() {
        let rough: Vec<(f64, f64)> =
            (0..500).map(|at| (320.0 + 1.7 * f64::from(at), f64::from(at * 7919 % 101))).collect();
        let lamp = SpectralWeight::table(&rough).expect("valid");
        let mask =
            SpectralWeight::table(&[(350.0, 0.0), (401.3, 1.0), (401.4, 0.0), (1100.0, 0.9)]).expect("valid");
        let observer = &crate::Observer::Two.functions()[1];
        let body = SpectralWeight::blackbody(2856.0).expect("valid");
        let weights = [
            SpectralWeight::constant(),
            lamp.clone(),
            lamp.photons(),
            lamp.times(observer),
            body.times(&mask),
            lamp.times(&mask).photons(),
        ];
        // Panels with knots on their ends, between them, and none at all; then a second band.
        let ends = [400.0, 401.3, 401.35, 401.4, 433.0, 433.1, 520.0, 700.0];
        let bands = ends.windows(2).map(|ends| (ends[0], ends[1])).chain([(720.0, 780.0)]);
        let value = |x: f64| 0.5 + 0.4 * (x / 30.0).sin();
        let series: Vec<Series> = bands
            .map(|(lo, hi)| Series::new(lo, hi, &Series::places(lo, hi).map(value).collect::<Vec<_>>()))
            .collect();
        let mut knots: Vec<f64> = weights.iter().flat_map(SpectralWeight::knots_nm).collect();
        knots.sort_by(f64::total_cmp);
        knots.dedup();
        let nodes = Nodes::new(&series, &knots);
        for (at, weight) in weights.iter().enumerate() {
            let (product, flux) = defined(&series, weight);
            let sum = Sum::over(&series, &nodes, weight);
            assert!((sum.product / product - 1.0).abs() < 1e-13, "{at}: {} {product}", sum.product);
            assert!((sum.weight / flux - 1.0).abs() < 1e-13, "{at}: {} {flux}", sum.weight);
        }
    }
}
