//! Whole stacks at every point: coatings solved, and joined by thick bodies and facets.
//!
//! The sums over bodies are those of [`Chain`](crate::bodies::Chain), those over facets of [`facets`](crate::facets), in lanes.

use std::f64::consts::LN_2;
use std::ops::Range;

use pulp::{Simd, WithSimd};

use super::face::{Face, Lossless, faces, power};
use super::march::{Fields, Flow, march, sign_of};
use super::media::Media;
use super::points::{Points, Row, WIDTH, parts};
use super::program::Program;
use crate::lanes::{Lanes, decay, dispatch};
use crate::response::Response;

/// What a stack does to light of one polarisation at the points of a block.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Outcome {
    pub(crate) reflectance: Row,
    /// T over 2^−halved.
    pub(crate) passed: Row,
    pub(crate) halved: Row,
    pub(crate) absorptance: Row,
    /// What is absorbed where a [`Within`] says.
    pub(crate) within: Row,
}

impl Outcome {
    pub(crate) const ZERO: Outcome = Outcome {
        reflectance: Row::ZERO,
        passed: Row::ZERO,
        halved: Row::ZERO,
        absorptance: Row::ZERO,
        within: Row::ZERO,
    };

    /// All of one point; none where a number was lost.
    pub(crate) fn response(&self, lane: usize) -> Option<Response> {
        let (reflectance, passed) = (self.reflectance.0[lane], self.passed.0[lane]);
        let halved = self.halved.0[lane];
        let finite = reflectance.is_finite() && passed.is_finite() && halved.is_finite();
        finite.then(|| Response {
            reflectance,
            transmittance: if halved == 0.0 { passed } else { passed * (-halved).exp2() },
            absorptance: self.absorptance.0[lane],
            ln_transmittance: passed.ln() - halved * LN_2,
        })
    }

    /// T.
    pub(crate) fn transmittance(&self) -> [f64; WIDTH] {
        let mut passed = self.passed.0;
        if self.halved.0 != [0.0; WIDTH] {
            passed.iter_mut().zip(self.halved.0).for_each(|(passed, halved)| *passed *= (-halved).exp2());
        }
        passed
    }
}

/// N and D of one coating at the points of a block, true up to exp(`ln_scale`).
#[derive(Clone, Copy, Debug)]
pub(crate) struct Channel {
    pub(crate) numerator: [Row; 2],
    pub(crate) denominator: [Row; 2],
    pub(crate) ln_scale: Row,
}

impl Channel {
    pub(crate) const ZERO: Channel =
        Channel { numerator: [Row::ZERO; 2], denominator: [Row::ZERO; 2], ln_scale: Row::ZERO };
}

/// In which layers and bodies absorption counts.
#[derive(Clone, Debug, Default)]
pub(crate) struct Within {
    /// By coating and layer, in the light's order.
    pub(crate) layers: Vec<Vec<bool>>,
    pub(crate) bodies: Vec<bool>,
    pub(crate) exit: bool,
}

/// One run over all points.
pub(crate) struct Spectrum<'a> {
    pub(crate) program: &'a Program,
    pub(crate) points: &'a Points,
    pub(crate) media: &'a Media,
    /// The media as each facet's light meets them.
    pub(crate) facets: &'a [Media],
    /// Which blocks.
    pub(crate) blocks: Range<usize>,
    /// Which polarisations: 0 is s, 1 is p.
    pub(crate) modes: &'a [usize],
    pub(crate) within: Option<&'a Within>,
    /// By block, from the first of those wanted: the polarisations' outcomes, at their numbers.
    pub(crate) outcomes: &'a mut [[Outcome; 2]],
    /// By block, if wanted: N and D of each flat coating, by polarisation, then of each facet, s and p.
    pub(crate) channels: Option<&'a mut [Channel]>,
}

impl Spectrum<'_> {
    /// Runs on whichever vector instructions there are. Each set of choices is a program of its own, so that none of them has to
    /// share the registers with another.
    pub(crate) fn run(self) {
        let textured = !self.facets.is_empty();
        match (self.modes, self.channels.is_some(), self.within.is_some(), textured) {
            (&[_], false, false, false) => dispatch(Chosen::<1, false, false, false>(self)),
            (&[_], true, false, false) => dispatch(Chosen::<1, true, false, false>(self)),
            (&[_], false, true, false) => dispatch(Chosen::<1, false, true, false>(self)),
            (&[_], true, true, false) => dispatch(Chosen::<1, true, true, false>(self)),
            (&[_], false, _, true) => dispatch(Chosen::<1, false, true, true>(self)),
            (&[_], true, _, true) => dispatch(Chosen::<1, true, true, true>(self)),
            (_, false, false, false) => dispatch(Chosen::<2, false, false, false>(self)),
            (_, true, false, false) => dispatch(Chosen::<2, true, false, false>(self)),
            (_, false, true, false) => dispatch(Chosen::<2, false, true, false>(self)),
            (_, true, true, false) => dispatch(Chosen::<2, true, true, false>(self)),
            (_, false, _, true) => dispatch(Chosen::<2, false, true, true>(self)),
            (_, true, _, true) => dispatch(Chosen::<2, true, true, true>(self)),
        }
    }
}

/// A run with its choices made.
struct Chosen<'a, const P: usize, const CHANNELS: bool, const LAYERS: bool, const TEXTURED: bool>(
    Spectrum<'a>,
);

impl<const P: usize, const CHANNELS: bool, const LAYERS: bool, const TEXTURED: bool> WithSimd
    for Chosen<'_, P, CHANNELS, LAYERS, TEXTURED>
{
    type Output = ();

    #[inline(always)]
    fn with_simd<S: Simd>(self, simd: S) {
        Run::<S, P, CHANNELS, LAYERS, TEXTURED>::new(simd, self.0).run();
    }
}

/// A coating for one polarisation as its neighbours see it.
#[derive(Clone, Copy, Debug)]
struct Powers<S: Simd> {
    reflectance: Lanes<S>,
    transmittance: Lanes<S>,
    passed: Lanes<S>,
    halved: Lanes<S>,
}

impl<S: Simd> Powers<S> {
    #[inline(always)]
    fn dark(simd: S) -> Self {
        let zero = Lanes::splat(simd, 0.0);
        Powers { reflectance: zero, transmittance: zero, passed: zero, halved: zero }
    }

    #[inline(always)]
    fn of(face: &Face<S>) -> Self {
        Powers {
            reflectance: face.reflectance,
            transmittance: face.transmittance,
            passed: face.passed,
            halved: face.halved,
        }
    }
}

/// The links of a stack at some points: powers by coating and polarisation from the front and from behind, and where asked for
/// what each layer takes, by polarisation.
struct Links<S: Simd, const P: usize> {
    front: Vec<[Powers<S>; P]>,
    back: Vec<[Powers<S>; P]>,
    /// By coating, in the light's order from the front.
    front_layers: Vec<Vec<[Lanes<S>; P]>>,
    back_layers: Vec<Vec<[Lanes<S>; P]>>,
}

/// A run and its memory.
struct Run<'a, S: Simd, const P: usize, const CHANNELS: bool, const LAYERS: bool, const TEXTURED: bool> {
    simd: S,
    given: Spectrum<'a>,
    /// Whether nothing absorbs in the block that is under way.
    all_lossless: bool,
    links: Links<S, P>,
    flows: Vec<Flow<S, P>>,
    both: Vec<Flow<S, 2>>,
}

impl<'a, S: Simd, const P: usize, const CHANNELS: bool, const LAYERS: bool, const TEXTURED: bool>
    Run<'a, S, P, CHANNELS, LAYERS, TEXTURED>
{
    #[inline(always)]
    fn new(simd: S, given: Spectrum<'a>) -> Self {
        let count = given.program.coatings.len();
        let none = vec![[Powers::dark(simd); P]; count];
        let layers = vec![Vec::new(); if LAYERS { count } else { 0 }];
        // A single coating is not met from behind.
        let back = if count > 1 { none.clone() } else { Vec::new() };
        let links = Links { front: none, back, front_layers: layers.clone(), back_layers: layers };
        Run { simd, given, all_lossless: false, links, flows: Vec::new(), both: Vec::new() }
    }

    /// The polarisations' numbers; both are written out, so that the compiler knows them.
    #[inline(always)]
    fn modes(&self) -> [usize; P] {
        let mut modes = [0; P];
        for p in 0..P {
            modes[p] = if P == 2 { p } else { self.given.modes[0] };
        }
        modes
    }

    #[inline(always)]
    fn run(mut self) {
        for block in self.given.blocks.clone() {
            self.all_lossless = self.given.points.all_lossless(block, self.given.program.exit);
            for part in 0..parts::<S>() {
                self.coatings(block, part);
                self.join(block, part);
            }
        }
    }

    #[inline(always)]
    fn coatings(&mut self, block: usize, part: usize) {
        let program = self.given.program;
        let flat = program.flat();
        for at in 0..flat {
            let sides = if at < program.bodies.len() { 2 } else { 1 };
            for side in 0..sides {
                self.flat(block, part, at, side == 1);
            }
        }
        if TEXTURED {
            self.textured(block, part, flat);
        }
    }

    /// One coating on a flat face, from the front or from behind.
    #[inline(always)]
    fn flat(&mut self, block: usize, part: usize, at: usize, behind: bool) {
        let Spectrum { program, points, media, .. } = self.given;
        let order = &program.coatings[at];
        let (before, after) = program.sides(at);
        let (layers, entry, exit) =
            if behind { (&order.from_behind, after, before) } else { (&order.from_front, before, after) };
        let waves = media.waves(block);
        self.flows.clear();
        let fields = march::<S, P, CHANNELS, LAYERS>(
            self.simd,
            media.slabs(block),
            layers,
            &waves[exit],
            self.modes(),
            part,
            &mut self.flows,
        );
        let lossless = Lossless::of(points, block, entry, &order.media);
        let faces = faces(self.simd, &fields, &waves[entry], &waves[exit], self.modes(), lossless, part);
        let to = if behind { &mut self.links.back[at] } else { &mut self.links.front[at] };
        for p in 0..P {
            to[p] = Powers::of(&faces[p]);
        }
        if LAYERS {
            let links = &mut self.links;
            let to = if behind { &mut links.back_layers[at] } else { &mut links.front_layers[at] };
            to.clear();
            let front = fields.flow();
            for (layer, step) in layers.iter().zip(self.flows.windows(2)) {
                to.push(taken(points.is_lossless(block, layer.material), &faces, &step[1], &step[0], &front));
            }
            if !behind {
                to.reverse();
            }
        }
        if CHANNELS && !behind {
            let from = block * program.channels(P) + at;
            for p in 0..P {
                self.channel(from + p * program.flat(), part, &faces[p], &fields);
            }
        }
    }

    /// N and D into their place.
    #[inline(always)]
    fn channel<const Q: usize>(&mut self, at: usize, part: usize, face: &Face<S>, fields: &Fields<S, Q>) {
        let Some(channels) = &mut self.given.channels else { return };
        let channel = &mut channels[at];
        let sign = sign_of(fields.turned) / fields.norm.sqrt();
        let (numerator, denominator) = (face.numerator.scale(sign), face.denominator.scale(sign));
        channel.numerator[0].store(part, numerator.re);
        channel.numerator[1].store(part, numerator.im);
        channel.denominator[0].store(part, denominator.re);
        channel.denominator[1].store(part, denominator.im);
        channel.ln_scale.store(part, face.halved * sign.of(0.5 * LN_2));
    }

    /// The last coating on its facets: half of them face along the field and half across it, whatever the light's polarisation.
    #[inline(always)]
    fn textured(&mut self, block: usize, part: usize, at: usize) {
        let Spectrum { program, points, facets, .. } = self.given;
        let layers = &program.coatings[at].from_front;
        let (before, after) = program.sides(at);
        let lossless = Lossless::of(points, block, before, &program.coatings[at].media);
        let zero = Lanes::splat(self.simd, 0.0);
        // What has come back from the facets before, per polarisation, and what has gone for good.
        let (mut returned, mut lost, mut passed) = ([zero.of(1.0); 2], [zero; 2], [zero; 2]);
        let mut sums: Vec<[Lanes<S>; 2]> = vec![[zero; 2]; if LAYERS { layers.len() } else { 0 }];
        let mut share = 1.0;
        for (number, (media, &next)) in facets.iter().zip(&program.facets).enumerate() {
            let waves = media.waves(block);
            self.both.clear();
            let fields = march::<S, 2, CHANNELS, LAYERS>(
                self.simd,
                media.slabs(block),
                layers,
                &waves[after],
                [0, 1],
                part,
                &mut self.both,
            );
            let faces = faces(self.simd, &fields, &waves[before], &waves[after], [0, 1], lossless, part);
            let front = fields.flow();
            for mode in 0..2 {
                lost[mode] = returned[mode].mul_add(zero.of(share - next), lost[mode]);
                let arriving = returned[mode] * zero.of(next);
                passed[mode] = arriving.mul_add(faces[mode].transmittance, passed[mode]);
                returned[mode] = returned[mode] * faces[mode].reflectance;
                for ((sum, layer), step) in sums.iter_mut().zip(layers).zip(self.both.windows(2)) {
                    let clear = points.is_lossless(block, layer.material);
                    let taken = taken(clear, &faces, &step[1], &step[0], &front);
                    sum[mode] = arriving.mul_add(taken[mode], sum[mode]);
                }
            }
            share = next;
            if CHANNELS {
                let from = block * program.channels(P) + P * program.flat() + 2 * number;
                for mode in 0..2 {
                    self.channel(from + mode, part, &faces[mode], &fields);
                }
            }
        }
        let half = zero.of(0.5);
        let back = [0, 1].map(|mode: usize| returned[mode].mul_add(zero.of(share), lost[mode]));
        let transmittance = (passed[0] + passed[1]) * half;
        let reflectance = (back[0] + back[1]) * half;
        self.links.front[at] =
            [Powers { reflectance, transmittance, passed: transmittance, halved: zero }; P];
        if LAYERS {
            let to = &mut self.links.front_layers[at];
            to.clear();
            for sum in sums.iter().rev() {
                to.push([(sum[0] + sum[1]) * half; P]);
            }
        }
    }

    /// The powers of the whole from those of its coatings.
    #[inline(always)]
    fn join(&mut self, block: usize, part: usize) {
        let program = self.given.program;
        let last = program.coatings.len() - 1;
        let (zero, one) = (Lanes::splat(self.simd, 0.0), Lanes::splat(self.simd, 1.0));
        for p in 0..P {
            let links = &self.links;
            let far = &links.front[last][p];
            if last == 0 {
                let within = if LAYERS { self.sum_within(block, p, &[(one, zero)], &[]) } else { zero };
                self.store(
                    block,
                    part,
                    p,
                    [far.reflectance, far.passed, far.halved, far.transmittance, within],
                );
                continue;
            }
            // From the exit towards the light: the reflectance of everything from each coating on.
            let mut behind = vec![far.reflectance; last + 1];
            let mut gain = vec![one; last + 1];
            let mut left = vec![(one, zero); last];
            for at in (0..last).rev() {
                let body = &program.bodies[at];
                let slabs = self.given.media.slabs(block).slabs;
                let slab = &slabs[body.material][self.modes()[p]];
                let halvings = slab.halvings.load(self.simd, part) * one.of(body.thickness_nm);
                let passed = decay(halvings).0;
                left[at] = (passed, halvings);
                let (front, back) = (&links.front[at][p], &links.back[at][p]);
                let twice = passed * passed;
                let lost = (back.reflectance * behind[at + 1]).neg_mul_add(twice, one);
                // No power enters a body in total reflection, so that it has nothing to sum.
                let nothing = zero.where_less(front.transmittance, one.of(f64::NAN), one);
                gain[at] = zero.where_less(lost, one / lost, nothing);
                let returned = front.transmittance * back.transmittance * twice * behind[at + 1];
                behind[at] = returned.mul_add(gain[at], front.reflectance);
            }
            // And with the light: the power that arrives at each coating from either side.
            let mut arriving = vec![(one, zero); last + 1];
            let (mut mantissa, mut halved) = (one, zero);
            for at in 0..last {
                let front = &links.front[at][p];
                let (passed, halvings) = left[at];
                arriving[at + 1].0 = arriving[at].0 * front.transmittance * gain[at] * passed;
                arriving[at].1 = arriving[at + 1].0 * behind[at + 1] * passed;
                mantissa = mantissa * front.passed * gain[at];
                halved = halved + front.halved + halvings;
            }
            mantissa = mantissa * far.passed;
            halved = halved + far.halved;
            let transmittance = arriving[last].0 * far.transmittance;
            let within = if LAYERS { self.sum_within(block, p, &arriving, &left) } else { zero };
            self.store(block, part, p, [behind[0], mantissa, halved, transmittance, within]);
        }
    }

    /// The absorptance in the layers and bodies that count.
    #[inline(always)]
    fn sum_within(
        &self,
        block: usize,
        p: usize,
        arriving: &[(Lanes<S>, Lanes<S>)],
        bodies: &[(Lanes<S>, Lanes<S>)],
    ) -> Lanes<S> {
        let mut sum = Lanes::splat(self.simd, 0.0);
        let Some(within) = self.given.within else { return sum };
        let links = &self.links;
        for (at, counts) in within.layers.iter().enumerate() {
            for (layer, _) in counts.iter().enumerate().filter(|(_, counts)| **counts) {
                sum = links.front_layers[at][layer][p].mul_add(arriving[at].0, sum);
                if at < bodies.len() {
                    sum = links.back_layers[at][layer][p].mul_add(arriving[at].1, sum);
                }
            }
        }
        for (at, _) in within.bodies.iter().enumerate().filter(|(_, counts)| **counts) {
            sum = sum + self.body(block, p, at, arriving, bodies);
        }
        if within.exit {
            let last = links.front.len() - 1;
            sum = arriving[last].0.mul_add(links.front[last][p].transmittance, sum);
        }
        sum
    }

    /// What the body behind a coating takes: what enters it, less what leaves it, less what the films about it take of the
    /// light in it.
    #[inline(always)]
    fn body(
        &self,
        block: usize,
        p: usize,
        at: usize,
        arriving: &[(Lanes<S>, Lanes<S>)],
        bodies: &[(Lanes<S>, Lanes<S>)],
    ) -> Lanes<S> {
        let zero = Lanes::splat(self.simd, 0.0);
        if self.given.points.is_lossless(block, self.given.program.bodies[at].material) {
            return zero;
        }
        let links = &self.links;
        let last = bodies.len();
        let (near, far) = (&links.front[at][p], &links.front[at + 1][p]);
        let from_far =
            if at + 1 < last { links.back[at + 1][p].transmittance * arriving[at + 1].1 } else { zero };
        let entering = near.transmittance.mul_add(arriving[at].0, from_far);
        let leaving =
            links.back[at][p].transmittance.mul_add(arriving[at].1, far.transmittance * arriving[at + 1].0);
        let mut sum = entering - leaving;
        for layer in &links.back_layers[at] {
            sum = layer[p].neg_mul_add(arriving[at].1, sum);
        }
        for layer in &links.front_layers[at + 1] {
            sum = layer[p].neg_mul_add(arriving[at + 1].0, sum);
        }
        sum
    }

    /// R, T over 2^−halved, halved, T and what is absorbed within.
    #[inline(always)]
    fn store(&mut self, block: usize, part: usize, p: usize, values: [Lanes<S>; 5]) {
        let [reflectance, passed, halved, transmittance, within] = values;
        let outcome = &mut self.given.outcomes[block - self.given.blocks.start][self.modes()[p]];
        outcome.reflectance.store(part, reflectance);
        outcome.passed.store(part, passed);
        outcome.halved.store(part, halved);
        outcome.within.store(part, within);
        // Rounding must not make a loss, or a gain, where there is none.
        let rest = if self.all_lossless {
            reflectance.of(0.0)
        } else {
            ((reflectance.of(1.0) - reflectance) - transmittance).max(reflectance.of(0.0))
        };
        outcome.absorptance.store(part, rest);
    }
}

/// What a film takes of light that arrives at its coating: the power flow before it less that behind it. A film that does not
/// absorb takes nothing, and not what rounding leaves either.
#[inline(always)]
fn taken<S: Simd, const P: usize>(
    clear: bool,
    faces: &[Face<S>; P],
    near: &Flow<S, P>,
    far: &Flow<S, P>,
    front: &Flow<S, P>,
) -> [Lanes<S>; P] {
    let mut taken = [front.norm.of(0.0); P];
    if clear {
        return taken;
    }
    for p in 0..P {
        let scale_near = front.norm / near.norm * power(front.halved[p] - near.halved[p]);
        let scale_far = front.norm / far.norm * power(front.halved[p] - far.halved[p]);
        taken[p] = faces[p].share * (near.flux[p] * scale_near - far.flux[p] * scale_far);
    }
    taken
}
