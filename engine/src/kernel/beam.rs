//! A stack under one beam at many points, with everything prepared that its thicknesses have no part in.

use std::f64::consts::FRAC_PI_2;

use super::{Channel, Gradient, Media, Outcome, Points, Program, Row, Spectrum, Tilt, WIDTH, Wanted, Within};
use crate::error::OpticsError;
use crate::plan::{Layer, Plan};

/// So many halvings of the power on a single pass leave nothing that could make a fringe.
const OPAQUE: f64 = 58.0;

/// So many blocks' outcomes stay in the processor's nearest memory.
const BLOCKS: usize = 20;

/// The media of a stack under one beam.
#[derive(Clone, Debug)]
pub(crate) struct Beam {
    media: Media,
    facets: Vec<Media>,
}

impl Beam {
    /// # Errors
    /// An angle that is not from 0 to below 90°; one other than 0 where the exit is textured.
    pub(crate) fn new(plan: &Plan, points: &Points, angles_rad: &[f64]) -> Result<Beam, OpticsError> {
        for &angle_rad in angles_rad {
            if !(0.0..FRAC_PI_2).contains(&angle_rad) {
                return Err(OpticsError::Angle { angle_rad });
            }
            if plan.is_textured() && angle_rad > 0.0 {
                return Err(OpticsError::Textured { angle_rad });
            }
        }
        let media = Media::new(plan, points, Tilt { from: 0, incident: true, angles_rad });
        let from = plan.bodies.last().map_or(0, |body| body.material);
        let facet = |angle_rad: f64| {
            Media::new(plan, points, Tilt { from, incident: false, angles_rad: &[angle_rad] })
        };
        let facets = plan.bounces.iter().flatten().map(|bounce| facet(bounce.angle_rad)).collect();
        Ok(Beam { media, facets })
    }

    /// The half-turns of one pass through each coating at a point. Light that does not come back from a film's far side makes no
    /// fringe with the rest: there the film counts as none.
    pub(crate) fn phases<'a>(&'a self, program: &'a Program, point: usize) -> impl Iterator<Item = f64> + 'a {
        let (block, lane) = (point / WIDTH, point % WIDTH);
        let slabs = self.media.slabs(block).slabs;
        let turns = move |layer: &Layer| {
            let slab = &slabs[layer.material][0];
            if slab.halvings.0[lane] * layer.thickness_nm > OPAQUE {
                0.0
            } else {
                slab.turns.0[lane] * layer.thickness_nm
            }
        };
        program.coatings.iter().map(move |order| order.from_front.iter().map(turns).sum())
    }

    /// What the stack does to light of the given polarisations (0 is s, 1 is p), handed on in order, some blocks at a time.
    pub(crate) fn outcomes(
        &self,
        program: &Program,
        points: &Points,
        modes: &[usize],
        within: Option<&Within>,
        mut take: impl FnMut(&[[Outcome; 2]]),
    ) {
        let mut buffer = [[Outcome::ZERO; 2]; BLOCKS];
        let (media, facets) = (&self.media, &self.facets[..]);
        let mut first = 0;
        while first < points.blocks() {
            let count = BLOCKS.min(points.blocks() - first);
            let (blocks, outcomes, channels) = (first..first + count, &mut buffer[..count], None);
            Spectrum { program, points, media, facets, blocks, modes, within, outcomes, channels }.run();
            take(&buffer[..count]);
            first += count;
        }
    }

    /// The same, with N and D of every coating: so many a block, by polarisation and coating, then those of the facets.
    pub(crate) fn channels(
        &self,
        program: &Program,
        points: &Points,
        modes: &[usize],
        within: Option<&Within>,
    ) -> (Vec<[Outcome; 2]>, Vec<Channel>) {
        let mut outcomes = vec![[Outcome::ZERO; 2]; points.blocks()];
        let mut channels = vec![Channel::ZERO; points.blocks() * program.channels(modes.len())];
        let (media, facets) = (&self.media, &self.facets[..]);
        Spectrum {
            program,
            points,
            media,
            facets,
            blocks: 0..points.blocks(),
            modes,
            within,
            outcomes: &mut outcomes,
            channels: Some(&mut channels),
        }
        .run();
        (outcomes, channels)
    }

    /// A quantity and its changes with the thickness of every layer, into lists by block, and by block and layer.
    pub(crate) fn slopes(
        &self,
        program: &Program,
        points: &Points,
        shares: [f64; 2],
        wanted: Wanted<'_>,
        (values, slopes): (&mut Vec<Row>, &mut Vec<Row>),
    ) {
        let layers: usize = program.coatings.iter().map(|order| order.from_front.len()).sum();
        values.resize(points.blocks(), Row::ZERO);
        slopes.resize(points.blocks() * layers, Row::ZERO);
        let modes: &[usize] = match shares {
            [_, 0.0] => &[0],
            [0.0, _] => &[1],
            _ => &[0, 1],
        };
        Gradient {
            program,
            points,
            media: &self.media,
            facets: &self.facets,
            modes,
            shares,
            wanted,
            values,
            slopes,
        }
        .run();
    }
}
