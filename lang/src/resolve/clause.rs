//! Clauses of requirements: bands, angles, polarisation, light.

use super::names::Kind;
use super::{ModuleId, Resolver};
use crate::finding::FormFact;
use crate::model::{Angles, Beam, Bound, Observer, Quantity, Weighting};
use crate::source::Span;
use crate::syntax::ast::{self, AtItem, ClauseKind, Range, Require};
use crate::units::Dimension;
use std::f64::consts::FRAC_PI_2;

/// The band of EN 410 and ISO 9050 for solar quantities, nm.
const SOLAR_BAND: (f64, f64) = (300.0, 2500.0);

/// The most parts that a yield may ask for.
const MOST_PARTS: f64 = 1e9;

/// What the clauses of a requirement say.
#[derive(Default)]
pub(super) struct Clauses {
    pub(super) bands: Vec<(f64, f64)>,
    pub(super) wavelengths: Vec<f64>,
    pub(super) angles: Option<Angles>,
    pub(super) cone: Option<f64>,
    pub(super) polarisation: Option<Beam>,
    pub(super) under: Option<Weighting>,
    pub(super) from_exit: bool,
    pub(super) temperature: Option<f64>,
    pub(super) hemispherical: bool,
    pub(super) observer: Option<Observer>,
    pub(super) parts: Option<u32>,
    pub(super) nominal: bool,
    /// What each clause sets, and where it stands.
    pub(super) places: Vec<(&'static str, Span)>,
}

impl Resolver<'_> {
    /// The clauses of a requirement; none where one of them was wrong.
    pub(super) fn clauses(
        &mut self,
        module: ModuleId,
        written: &Require,
        quantity: Option<&Quantity>,
    ) -> Option<Clauses> {
        let mut clauses = Clauses::default();
        let mut sound = true;
        for clause in &written.clauses {
            let (word, understood) = self.clause(module, clause, quantity, &mut clauses);
            sound &= understood;
            match clauses.places.iter().find(|(other, _)| *other == word) {
                Some((_, first)) => {
                    let first = self.place(module, *first);
                    self.report(module, clause.span, FormFact::Repeated { what: word.to_owned(), first });
                    sound = false;
                }
                None => clauses.places.push((word, clause.span)),
            }
        }
        sound.then_some(clauses)
    }

    /// Reads one clause into `clauses`; returns what it sets and whether it was understood.
    fn clause(
        &mut self,
        module: ModuleId,
        clause: &ast::Clause,
        quantity: Option<&Quantity>,
        clauses: &mut Clauses,
    ) -> (&'static str, bool) {
        match &clause.kind {
            ClauseKind::Over(ranges) => ("over", self.over(module, ranges, clauses).is_some()),
            ClauseKind::OverParts(expr) => {
                clauses.parts = self.count(module, expr, "the number of parts", MOST_PARTS);
                ("over … parts", clauses.parts.is_some())
            }
            ClauseKind::At(items) => match self.at(module, items, quantity, clauses) {
                Some(word) => (word, true),
                None => ("at …", false),
            },
            ClauseKind::Cone(expr) => {
                let value = self.value(module, expr);
                clauses.cone =
                    value.and_then(|value| self.incidence(module, expr.span, value, "a cone's half-angle"));
                ("cone", clauses.cone.is_some())
            }
            ClauseKind::Polarised(name) => {
                clauses.polarisation = match name.text.as_str() {
                    "s" => Some(Beam::S),
                    "p" => Some(Beam::P),
                    other => {
                        let fact = FormFact::UnknownName {
                            kind: "polarisation",
                            name: other.to_owned(),
                            near: vec!["s".to_owned(), "p".to_owned()],
                            import: None,
                        };
                        self.report(module, name.span, fact);
                        None
                    }
                };
                ("polarised", clauses.polarisation.is_some())
            }
            ClauseKind::Under { spectrum, photons } => {
                let found =
                    self.lookup(module, spectrum, Kind::Spectrum).and_then(|item| self.spectrum(item));
                let place = self.place(module, clause.span);
                clauses.under = found.filter(|spectrum| spectrum.kind.is_some()).map(|spectrum| Weighting {
                    spectrum,
                    photons: *photons,
                    place,
                });
                ("under", clauses.under.is_some())
            }
            ClauseKind::FromExit => {
                clauses.from_exit = true;
                ("from exit", true)
            }
            ClauseKind::Nominal => {
                clauses.nominal = true;
                ("nominal", true)
            }
            ClauseKind::Hemispherical => {
                clauses.hemispherical = true;
                ("hemispherical", true)
            }
            ClauseKind::Observer(expr) => {
                let degrees = self
                    .quantity(module, expr, Dimension::Angle, "the observer's field")
                    .map(f64::to_degrees);
                clauses.observer = match degrees {
                    Some(field) if (field - 2.0).abs() < 1e-9 => Some(Observer::Two),
                    Some(field) if (field - 10.0).abs() < 1e-9 => Some(Observer::Ten),
                    Some(_) => {
                        let shown = self.written(module, expr.span);
                        self.invalid(module, expr.span, "the observer's field", &shown, "2 deg or 10 deg");
                        None
                    }
                    None => None,
                };
                ("observer", clauses.observer.is_some())
            }
        }
    }

    fn over(&mut self, module: ModuleId, ranges: &[Range], clauses: &mut Clauses) -> Option<()> {
        let bands: Vec<Option<(f64, f64)>> =
            ranges.iter().map(|range| self.band(module, range, "a band")).collect();
        let bands: Vec<(f64, f64)> = bands.into_iter().collect::<Option<_>>()?;
        for (number, band) in bands.iter().enumerate() {
            if let Some(earlier) =
                bands[..number].iter().find(|earlier| band.0 < earlier.1 && earlier.0 < band.1)
            {
                let shown = self.written(module, ranges[number].span);
                let must = format!("apart from {} .. {} nm", earlier.0, earlier.1);
                self.invalid(module, ranges[number].span, "a band", &shown, &must);
                return None;
            }
        }
        clauses.bands = bands;
        Some(())
    }

    /// Reads `at …`: wavelengths, angles or a temperature, told by the dimension. Returns which.
    fn at(
        &mut self,
        module: ModuleId,
        items: &[AtItem],
        quantity: Option<&Quantity>,
        clauses: &mut Clauses,
    ) -> Option<&'static str> {
        if let [AtItem::Range(range)] = items {
            let (low, high) = self.ends(module, range)?;
            if low.dimension.spectral() || high.dimension.spectral() {
                let shown = self.written(module, range.span);
                self.invalid(
                    module,
                    range.span,
                    "what `at` takes",
                    &shown,
                    "single wavelengths; a band follows `over`",
                );
                return None;
            }
            let low_angle = self.incidence(module, range.low.span, low, "an angle of incidence");
            let high_angle = self.incidence(module, range.high.span, high, "an angle of incidence");
            let (low, high) = (low_angle?, high_angle?);
            if low >= high {
                let shown = self.written(module, range.span);
                self.invalid(
                    module,
                    range.span,
                    "a range of angles",
                    &shown,
                    "written from its lower to its higher end",
                );
                return None;
            }
            clauses.angles = Some(Angles::Range(low, high));
            return Some("at … deg");
        }
        let mut exprs = Vec::new();
        for item in items {
            match item {
                AtItem::Value(expr) => exprs.push(expr),
                AtItem::Range(range) => {
                    let shown = self.written(module, range.span);
                    self.invalid(
                        module,
                        range.span,
                        "a list",
                        &shown,
                        "of single values, or one range alone",
                    );
                    return None;
                }
            }
        }
        let values = self.list(module, &exprs);
        let first = values.first().copied().flatten()?;
        if first.dimension.spectral() {
            let wavelengths: Vec<Option<f64>> = values
                .iter()
                .zip(&exprs)
                .map(|(value, expr)| self.as_wavelength(module, expr.span, (*value)?, "a wavelength"))
                .collect();
            clauses.wavelengths = wavelengths.into_iter().collect::<Option<_>>()?;
            return Some("at … nm");
        }
        if first.dimension == Dimension::Temperature {
            if quantity.is_some_and(|quantity| !matches!(quantity, Quantity::Emittance)) {
                let span = exprs[0].span.to(exprs[exprs.len() - 1].span);
                let shown = self.written(module, span);
                self.invalid(
                    module,
                    span,
                    "what `at` takes here",
                    &shown,
                    "a wavelength or an angle; only an emittance is at a temperature",
                );
                return None;
            }
            if exprs.len() > 1 {
                let shown = self.written(module, exprs[1].span);
                self.invalid(
                    module,
                    exprs[1].span,
                    "a second temperature",
                    &shown,
                    "in a requirement of its own",
                );
                return None;
            }
            clauses.temperature = Some(self.kelvin(module, exprs[0].span, first.number)?);
            return Some("at … K");
        }
        if first.dimension != Dimension::Angle {
            let emittance = matches!(quantity, Some(Quantity::Emittance));
            let needed = if emittance { "a temperature or an angle" } else { "a wavelength or an angle" };
            // From 90 up it can't be an angle of incidence; below, an angle is likelier than anything else.
            let unit = match (first.number < 90.0, emittance) {
                (true, _) => "deg",
                (false, true) => "K",
                (false, false) => "nm",
            };
            let suggestion = (first.dimension == Dimension::Ratio).then_some(unit);
            let found = self.found(module, exprs[0].span, first);
            self.mismatch(module, exprs[0].span, "what `at` takes", needed, found, suggestion);
            return None;
        }
        let angles: Vec<Option<f64>> = values
            .iter()
            .zip(&exprs)
            .map(|(value, expr)| self.incidence(module, expr.span, (*value)?, "an angle of incidence"))
            .collect();
        clauses.angles = Some(Angles::List(angles.into_iter().collect::<Option<_>>()?));
        Some("at … deg")
    }

    /// Supplies what a quantity implies and reports what it needs and lacks.
    pub(super) fn complete(
        &mut self,
        module: ModuleId,
        written: &Require,
        quantity: &Quantity,
        bound: &Bound,
        mut clauses: Clauses,
        span: Span,
    ) -> Option<Clauses> {
        use Quantity::*;
        if !self.all_apply(module, written, quantity, bound, &clauses) {
            return None;
        }
        let of = "the requirement";
        let standard = match quantity {
            Luminous(_) | Colour(_) => Some("d65"),
            Solar(_) | SolarAbsorptance => Some("am15g"),
            _ => None,
        };
        if let (Some(name), None) = (standard, &clauses.under) {
            let spectrum = self.standard(name).and_then(|(item, _)| self.spectrum(item));
            let place = self.place(module, span);
            clauses.under = spectrum.map(|spectrum| Weighting { spectrum, photons: false, place });
        }
        if matches!(quantity, Solar(_) | SolarAbsorptance) && clauses.bands.is_empty() {
            clauses.bands.push(SOLAR_BAND);
        }
        let plain = matches!(
            quantity,
            Reflectance
                | Transmittance
                | Absorptance
                | AbsorptanceIn(_)
                | OpticalDensity
                | Phase(_)
                | GroupDelay(_)
                | GroupDelayDispersion(_)
                | PeakField
        );
        if let (true, None, Some(under)) = (plain, written.mean, &clauses.under) {
            let (span, name) = (under.place.span, format!("`under {}`", under.spectrum.name));
            let must = "with `mean`: light weights a mean, and a bound at every wavelength needs no weight";
            self.invalid(module, span, "this clause", &name, must);
            return None;
        }
        let lacks_where = clauses.bands.is_empty() && clauses.wavelengths.is_empty();
        let hint = "write `over 420 .. 680 nm`";
        match quantity {
            Yield | Luminous(_) | Colour(_) | Solar(_) | SolarAbsorptance => {}
            Emittance => {
                if clauses.bands.is_empty() {
                    self.missing(
                        module,
                        span,
                        "`over` with a band",
                        of,
                        "write, for example, `over 5 .. 25 um`",
                    );
                    return None;
                }
                if clauses.temperature.is_none() {
                    self.missing(
                        module,
                        span,
                        "`at` with a temperature",
                        of,
                        "write, for example, `at 300 K`",
                    );
                    return None;
                }
            }
            Photocurrent(_) | PhotocurrentLoss(_) => {
                if clauses.bands.is_empty() {
                    self.missing(module, span, "`over` with a band", of, hint);
                    return None;
                }
                if clauses.under.is_none() {
                    self.missing(
                        module,
                        span,
                        "`under` with a light source",
                        of,
                        "write, for example, `under am15g`",
                    );
                    return None;
                }
            }
            _ if written.mean.is_some() && clauses.bands.is_empty() => {
                self.missing(module, span, "`over` with a band for the mean", of, hint);
                return None;
            }
            _ if lacks_where => {
                let implied = match bound {
                    Bound::Crosses { within, .. } => within.is_some(),
                    Bound::AtMostMask(_) | Bound::AtLeastMask(_) => true,
                    _ => false,
                };
                if !implied {
                    let hint = "write `over 420 .. 680 nm` or `at 550 nm`";
                    self.missing(module, span, "`over` with a band or `at` with a wavelength", of, hint);
                    return None;
                }
            }
            _ => {}
        }
        let axis = match &clauses.angles {
            Some(Angles::List(angles)) => angles.iter().copied().fold(0.0, f64::max),
            Some(Angles::Range(_, high)) => *high,
            None => 0.0,
        };
        if clauses.cone.is_some_and(|cone| cone + axis >= FRAC_PI_2 - 1e-12) {
            let degrees = |angle: f64| super::quantity::rounded(angle.to_degrees());
            let shown = format!("{} deg about {} deg", degrees(clauses.cone.unwrap_or(0.0)), degrees(axis));
            self.invalid(module, span, "the cone", &shown, "less than 90 deg at its edge");
            return None;
        }
        Some(clauses)
    }
}
