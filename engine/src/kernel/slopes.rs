//! The change of a whole stack's quantity with the thickness of every layer, at every point.
//!
//! The sums over bodies and facets of [`Spectrum`](super::Spectrum) are gone through backwards: every intermediate result hands
//! on how the quantity changes with it to those that it was made from.

use pulp::{Simd, WithSimd};

use super::gradient::{Coat, Passage, Place, Seeds};
use super::media::Media;
use super::points::{Points, Row, parts};
use super::program::Program;
use super::spectrum::Within;
use crate::lanes::{Lanes, decay, dispatch};

/// How a quantity changes with R and T of the whole; of the absorptance of some layers, which.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Wanted<'a> {
    pub(crate) reflectance: f64,
    pub(crate) transmittance: f64,
    /// Whether it is no less than zero by rounding.
    pub(crate) absorptance: bool,
    pub(crate) within: Option<&'a Within>,
}

/// One run over all points.
pub(crate) struct Gradient<'a> {
    pub(crate) program: &'a Program,
    pub(crate) points: &'a Points,
    pub(crate) media: &'a Media,
    pub(crate) facets: &'a [Media],
    /// Which polarisations, and the share of each.
    pub(crate) modes: &'a [usize],
    pub(crate) shares: [f64; 2],
    pub(crate) wanted: Wanted<'a>,
    /// By block: the quantity.
    pub(crate) values: &'a mut [Row],
    /// By block and layer, all coatings one after the other: its changes per nm.
    pub(crate) slopes: &'a mut [Row],
}

impl Gradient<'_> {
    /// Runs on whichever vector instructions there are. Each set of choices is a program of its own, so that none of them has to
    /// share the registers with another.
    pub(crate) fn run(self) {
        let textured = !self.facets.is_empty();
        match (self.modes, self.wanted.within.is_some(), textured) {
            (&[_], false, false) => dispatch(Chosen::<1, false, false>(self)),
            (&[_], true, false) => dispatch(Chosen::<1, true, false>(self)),
            (&[_], _, true) => dispatch(Chosen::<1, true, true>(self)),
            (_, false, false) => dispatch(Chosen::<2, false, false>(self)),
            (_, true, false) => dispatch(Chosen::<2, true, false>(self)),
            (_, _, true) => dispatch(Chosen::<2, true, true>(self)),
        }
    }
}

/// A run with its choices made.
struct Chosen<'a, const P: usize, const LAYERS: bool, const TEXTURED: bool>(Gradient<'a>);

impl<const P: usize, const LAYERS: bool, const TEXTURED: bool> WithSimd for Chosen<'_, P, LAYERS, TEXTURED> {
    type Output = ();

    #[inline(always)]
    fn with_simd<S: Simd>(self, simd: S) {
        Run::<S, P, LAYERS, TEXTURED>::new(simd, self.0).run();
    }
}

/// A value and how the quantity changes with it.
#[derive(Clone, Copy, Debug)]
struct Var<S: Simd> {
    is: Lanes<S>,
    bar: Lanes<S>,
}

impl<S: Simd> Var<S> {
    #[inline(always)]
    fn of(is: Lanes<S>) -> Self {
        Var { is, bar: is.of(0.0) }
    }

    /// Something made from this changes by `by` for each unit of it.
    #[inline(always)]
    fn hands_on(&mut self, by: Lanes<S>) {
        self.bar = self.bar + by;
    }
}

/// A coating from one side for one polarisation.
#[derive(Clone, Debug)]
struct Link<S: Simd> {
    reflectance: Var<S>,
    transmittance: Var<S>,
    /// What the layers take, from the far side towards the light, and how the quantity changes with each.
    layers: Vec<Var<S>>,
}

impl<S: Simd> Link<S> {
    #[inline(always)]
    fn none(simd: S) -> Self {
        let zero = Var::of(Lanes::splat(simd, 0.0));
        Link { reflectance: zero, transmittance: zero, layers: Vec::new() }
    }

    /// What all layers take.
    #[inline(always)]
    fn sum(&self) -> Lanes<S> {
        let mut sum = self.reflectance.is.of(0.0);
        for layer in &self.layers {
            sum = sum + layer.is;
        }
        sum
    }

    #[inline(always)]
    fn hands_on_to_layers(&mut self, by: Lanes<S>) {
        for layer in &mut self.layers {
            layer.hands_on(by);
        }
    }
}

struct Run<'a, S: Simd, const P: usize, const LAYERS: bool, const TEXTURED: bool> {
    simd: S,
    given: Gradient<'a>,
    /// By coating: from the front and from behind.
    passages: Vec<[Passage<S, P>; 2]>,
    links: Vec<[[Link<S>; 2]; P]>,
    /// By facet, s and p.
    facets: Vec<Passage<S, 2>>,
    weights: [Vec<Lanes<S>>; P],
    both: [Vec<Lanes<S>>; 2],
    changes: Vec<Lanes<S>>,
}

impl<'a, S: Simd, const P: usize, const LAYERS: bool, const TEXTURED: bool> Run<'a, S, P, LAYERS, TEXTURED> {
    #[inline(always)]
    fn new(simd: S, given: Gradient<'a>) -> Self {
        let mut passages = Vec::new();
        let mut links = Vec::new();
        for _ in &given.program.coatings {
            passages.push([Passage::empty(simd), Passage::empty(simd)]);
            links.push(std::array::from_fn(|_| [Link::none(simd), Link::none(simd)]));
        }
        let mut facets = Vec::new();
        for _ in given.facets {
            facets.push(Passage::empty(simd));
        }
        let weights = std::array::from_fn(|_| Vec::new());
        let both = [Vec::new(), Vec::new()];
        Run { simd, given, passages, links, facets, weights, both, changes: Vec::new() }
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
        let layers: usize = self.given.program.coatings.iter().map(|order| order.from_front.len()).sum();
        let zero = Lanes::splat(self.simd, 0.0);
        for block in 0..self.given.points.blocks() {
            for part in 0..parts::<S>() {
                self.changes.clear();
                self.changes.resize(layers, zero);
                self.there(block, part);
                let mut value = zero;
                for p in 0..P {
                    let share = zero.of(self.given.shares[self.modes()[p]]);
                    value = self.whole(block, part, p, share).mul_add(share, value);
                }
                self.given.values[block].store(part, value);
                self.back(block, part);
                let rows = &mut self.given.slopes[block * layers..(block + 1) * layers];
                for (row, change) in rows.iter_mut().zip(&self.changes) {
                    row.store(part, *change);
                }
            }
        }
    }

    #[inline(always)]
    fn place(&self, block: usize, part: usize) -> Place<'a, S, P> {
        let Gradient { points, media, .. } = self.given;
        Place { simd: self.simd, points, media, modes: self.modes(), block, part }
    }

    #[inline(always)]
    fn coat(&self, at: usize, behind: bool) -> Coat<'a> {
        let program = self.given.program;
        let order = &program.coatings[at];
        let (before, after) = program.sides(at);
        if behind {
            Coat { layers: &order.from_behind, media: &order.media, entry: after, exit: before }
        } else {
            Coat { layers: &order.from_front, media: &order.media, entry: before, exit: after }
        }
    }

    /// Every coating solved from both sides.
    #[inline(always)]
    fn there(&mut self, block: usize, part: usize) {
        let Gradient { program, points, .. } = self.given;
        let flat = program.flat();
        for at in 0..flat {
            let sides = if at < program.bodies.len() { 2 } else { 1 };
            for side in 0..sides {
                let (place, coat) = (self.place(block, part), self.coat(at, side == 1));
                let passage = &mut self.passages[at][side];
                passage.go::<LAYERS>(place, coat);
                for p in 0..P {
                    let face = &passage.faces[p];
                    let link = &mut self.links[at][p][side];
                    link.reflectance = Var::of(face.reflectance);
                    link.transmittance = Var::of(face.transmittance);
                    if LAYERS {
                        passage.taken(points, block, coat.layers, p, &mut self.both[0]);
                        link.layers.clear();
                        for taken in &self.both[0] {
                            link.layers.push(Var::of(*taken));
                        }
                    }
                }
            }
        }
        if TEXTURED {
            self.textured(block, part, flat);
        }
    }

    /// The last coating on its facets.
    #[inline(always)]
    fn textured(&mut self, block: usize, part: usize, at: usize) {
        let Gradient { points, facets, program, .. } = self.given;
        let coat = self.coat(at, false);
        let zero = Lanes::splat(self.simd, 0.0);
        let half = zero.of(0.5);
        let (mut returned, mut back, mut passed) = ([zero.of(1.0); 2], zero, zero);
        let mut layers = vec![zero; if LAYERS { coat.layers.len() } else { 0 }];
        let mut share = 1.0;
        for (number, (media, &next)) in facets.iter().zip(&program.facets).enumerate() {
            let place = Place { simd: self.simd, points, media, modes: [0, 1], block, part };
            let passage = &mut self.facets[number];
            passage.go::<LAYERS>(place, coat);
            for mode in 0..2 {
                let face = &passage.faces[mode];
                back = returned[mode].mul_add(half * zero.of(share - next), back);
                let arriving = returned[mode] * half * zero.of(next);
                passed = arriving.mul_add(face.transmittance, passed);
                if LAYERS {
                    passage.taken(points, block, coat.layers, mode, &mut self.both[0]);
                    for (sum, taken) in layers.iter_mut().zip(&self.both[0]) {
                        *sum = arriving.mul_add(*taken, *sum);
                    }
                }
                returned[mode] = returned[mode] * face.reflectance;
            }
            share = next;
        }
        for mode in 0..2 {
            back = returned[mode].mul_add(half * zero.of(share), back);
        }
        for p in 0..P {
            let link = &mut self.links[at][p][0];
            link.reflectance = Var::of(back);
            link.transmittance = Var::of(passed);
            link.layers.clear();
            for layer in &layers {
                link.layers.push(Var::of(*layer));
            }
        }
    }

    /// The quantity of the whole for one polarisation; every link is told how it changes with it.
    #[inline(always)]
    fn whole(&mut self, block: usize, part: usize, p: usize, share: Lanes<S>) -> Lanes<S> {
        let Gradient { program, points, media, wanted, .. } = self.given;
        let last = program.coatings.len() - 1;
        let (zero, one) = (share.of(0.0), share.of(1.0));
        let modes = self.modes();
        let links = &mut self.links;
        if last == 0 && !LAYERS && !wanted.absorptance {
            // A single coating is all there is.
            let link = &mut links[0][p][0];
            let (of_r, of_t) = (one.of(wanted.reflectance), one.of(wanted.transmittance));
            link.reflectance.hands_on(of_r * share);
            link.transmittance.hands_on(of_t * share);
            return link.reflectance.is.mul_add(of_r, link.transmittance.is * of_t);
        }
        // There, as the spectrum's kernel goes.
        let mut passed = vec![one; last];
        let mut gain = vec![Var::of(one); last];
        let mut behind = vec![Var::of(links[last][p][0].reflectance.is); last + 1];
        for at in (0..last).rev() {
            let slabs = media.slabs(block).slabs;
            let body = &program.bodies[at];
            let halvings = slabs[body.material][modes[p]].halvings.load(self.simd, part);
            passed[at] = decay(halvings * one.of(body.thickness_nm)).0;
            let twice = passed[at] * passed[at];
            let [front, back] = &links[at][p];
            let lost = (back.reflectance.is * behind[at + 1].is).neg_mul_add(twice, one);
            gain[at] = Var::of(zero.where_less(lost, one / lost, one));
            let returned = front.transmittance.is * back.transmittance.is * twice * behind[at + 1].is;
            behind[at] = Var::of(returned.mul_add(gain[at].is, front.reflectance.is));
        }
        let mut ahead = vec![Var::of(one); last + 1];
        let mut back_again = vec![Var::of(zero); last];
        for at in 0..last {
            let step = links[at][p][0].transmittance.is * gain[at].is * passed[at];
            ahead[at + 1] = Var::of(ahead[at].is * step);
            back_again[at] = Var::of(ahead[at + 1].is * behind[at + 1].is * passed[at]);
        }
        let transmittance = ahead[last].is * links[last][p][0].transmittance.is;
        // The quantity, and how it changes with R, T and what the layers and bodies take.
        let (reflectance, mut of_r, mut of_t) =
            (behind[0].is, one.of(wanted.reflectance), one.of(wanted.transmittance));
        let mut value = reflectance.mul_add(of_r, transmittance * of_t);
        if wanted.absorptance {
            let rest = (one - reflectance) - transmittance;
            let some = !points.all_lossless(block, program.exit);
            value = if some { rest.max(zero) } else { zero };
            // Only rounding makes it less than nothing, and has no part in its change.
            let counts = if some { -one } else { zero };
            (of_r, of_t) = (counts, counts);
        }
        if LAYERS && let Some(within) = wanted.within {
            if within.exit {
                value = value + transmittance;
                of_t = of_t + one;
            }
            for (at, counts) in within.layers.iter().enumerate() {
                let number = counts.len();
                for (layer, _) in counts.iter().enumerate().filter(|(_, counts)| **counts) {
                    // From the front the list runs from the far side.
                    let taken = &mut links[at][p][0].layers[number - 1 - layer];
                    value = taken.is.mul_add(ahead[at].is, value);
                    ahead[at].hands_on(taken.is * share);
                    taken.hands_on(ahead[at].is * share);
                    if at < last {
                        let taken = &mut links[at][p][1].layers[layer];
                        value = taken.is.mul_add(back_again[at].is, value);
                        back_again[at].hands_on(taken.is * share);
                        taken.hands_on(back_again[at].is * share);
                    }
                }
            }
            for (at, _) in within.bodies.iter().enumerate().filter(|(_, counts)| **counts) {
                if points.is_lossless(block, program.bodies[at].material) {
                    continue;
                }
                let (near, far) = links.split_at_mut(at + 1);
                let [front, back] = &mut near[at][p];
                let [next, next_back] = &mut far[0][p];
                let (to_next, from_next) = (ahead[at + 1].is, back_again[at].is);
                value = front.transmittance.is.mul_add(ahead[at].is, value);
                ahead[at].hands_on(front.transmittance.is * share);
                front.transmittance.hands_on(ahead[at].is * share);
                if at + 1 < last {
                    value = next_back.transmittance.is.mul_add(back_again[at + 1].is, value);
                    back_again[at + 1].hands_on(next_back.transmittance.is * share);
                    next_back.transmittance.hands_on(back_again[at + 1].is * share);
                }
                let leaving = back.transmittance.is + back.sum();
                value = leaving.neg_mul_add(from_next, value);
                back_again[at].hands_on(-(leaving * share));
                back.transmittance.hands_on(-(from_next * share));
                back.hands_on_to_layers(-(from_next * share));
                let leaving = next.transmittance.is + next.sum();
                value = leaving.neg_mul_add(to_next, value);
                ahead[at + 1].hands_on(-(leaving * share));
                next.transmittance.hands_on(-(to_next * share));
                next.hands_on_to_layers(-(to_next * share));
            }
        }
        // And back.
        let of_t = of_t * share;
        ahead[last].hands_on(of_t * links[last][p][0].transmittance.is);
        links[last][p][0].transmittance.hands_on(of_t * ahead[last].is);
        for at in (0..last).rev() {
            let front = &mut links[at][p][0];
            let bar = back_again[at].bar * passed[at];
            let (next, far) = (ahead[at + 1], behind[at + 1].is);
            ahead[at + 1].hands_on(bar * far);
            behind[at + 1].hands_on(bar * next.is);
            let bar = ahead[at + 1].bar * passed[at];
            let (t, g) = (front.transmittance.is, gain[at].is);
            let here = ahead[at].is;
            ahead[at].hands_on(bar * t * g);
            front.transmittance.hands_on(bar * here * g);
            gain[at].hands_on(bar * here * t);
        }
        behind[0].hands_on(of_r * share);
        for at in 0..last {
            let [front, back] = &mut links[at][p];
            let (bar, twice) = (behind[at].bar, passed[at] * passed[at]);
            let (t, u) = (front.transmittance.is, back.transmittance.is);
            let (g, far) = (gain[at].is, behind[at + 1].is);
            front.reflectance.hands_on(bar);
            front.transmittance.hands_on(bar * u * twice * far * g);
            back.transmittance.hands_on(bar * t * twice * far * g);
            behind[at + 1].hands_on(bar * t * u * twice * g);
            gain[at].hands_on(bar * t * u * twice * far);
            let bar = gain[at].bar * g * g * twice;
            let reflectance = back.reflectance.is;
            back.reflectance.hands_on(bar * far);
            behind[at + 1].hands_on(bar * reflectance);
        }
        links[last][p][0].reflectance.hands_on(behind[last].bar);
        value
    }

    /// From the links back to the films.
    #[inline(always)]
    fn back(&mut self, block: usize, part: usize) {
        let program = self.given.program;
        let flat = program.flat();
        let zero = Lanes::splat(self.simd, 0.0);
        let mut first = 0;
        for at in 0..program.coatings.len() {
            let number = program.coatings[at].from_front.len();
            if TEXTURED && at == flat {
                self.textured_back(block, part, at, first);
                break;
            }
            let sides = if at < program.bodies.len() { 2 } else { 1 };
            for side in 0..sides {
                let mut seeds = [Seeds { reflectance: zero, transmittance: zero }; P];
                for p in 0..P {
                    let link = &self.links[at][p][side];
                    seeds[p] =
                        Seeds { reflectance: link.reflectance.bar, transmittance: link.transmittance.bar };
                    self.weights[p].clear();
                    for (layer, taken) in self.coat(at, side == 1).layers.iter().zip(&link.layers) {
                        // A film that does not absorb takes nothing, whatever its thickness.
                        let clear = self.given.points.is_lossless(block, layer.material);
                        self.weights[p].push(if clear { zero } else { taken.bar });
                    }
                }
                let (place, coat) = (self.place(block, part), self.coat(at, side == 1));
                let changes = &mut self.changes[first..first + number];
                if side == 1 {
                    changes.reverse();
                }
                self.passages[at][side].back::<LAYERS>(place, coat, &seeds, &self.weights, changes);
                if side == 1 {
                    changes.reverse();
                }
            }
            first += number;
        }
    }

    /// The same for the facets.
    #[inline(always)]
    fn textured_back(&mut self, block: usize, part: usize, at: usize, first: usize) {
        let Gradient { points, facets, program, .. } = self.given;
        let coat = self.coat(at, false);
        let zero = Lanes::splat(self.simd, 0.0);
        let half = zero.of(0.5);
        let (mut of_r, mut of_t) = (zero, zero);
        let mut of_layers = vec![zero; if LAYERS { coat.layers.len() } else { 0 }];
        for p in 0..P {
            let link = &self.links[at][p][0];
            of_r = of_r + link.reflectance.bar;
            of_t = of_t + link.transmittance.bar;
            for (sum, layer) in of_layers.iter_mut().zip(&link.layers) {
                *sum = *sum + layer.bar;
            }
        }
        // What has come as far as each facet.
        let mut arrived: Vec<[Lanes<S>; 2]> = vec![[zero.of(1.0); 2]];
        for passage in &self.facets {
            let before = arrived[arrived.len() - 1];
            let [s, p] = &passage.faces;
            arrived.push([before[0] * s.reflectance, before[1] * p.reflectance]);
        }
        let end = facets.len();
        let share = |number: usize| if number == 0 { 1.0 } else { program.facets[number - 1] };
        let mut bar = [of_r * half * zero.of(share(end)); 2];
        for number in (0..end).rev() {
            let media = &facets[number];
            let passage = &self.facets[number];
            let (before, next) = (share(number), share(number + 1));
            let mut seeds = [Seeds { reflectance: zero, transmittance: zero }; 2];
            for mode in 0..2 {
                let came = arrived[number][mode];
                let arriving = came * half * zero.of(next);
                let face = &passage.faces[mode];
                seeds[mode] = Seeds { reflectance: bar[mode] * came, transmittance: of_t * arriving };
                let mut inner = of_t * face.transmittance;
                self.both[mode].clear();
                if LAYERS {
                    let mut taken = Vec::new();
                    passage.taken(points, block, coat.layers, mode, &mut taken);
                    for ((layer, taken), of_layer) in coat.layers.iter().zip(&taken).zip(&of_layers) {
                        inner = of_layer.mul_add(*taken, inner);
                        let clear = points.is_lossless(block, layer.material);
                        self.both[mode].push(if clear { zero } else { *of_layer * arriving });
                    }
                }
                bar[mode] = (bar[mode] * face.reflectance)
                    + half * (of_r * zero.of(before - next) + inner * zero.of(next));
            }
            let place = Place { simd: self.simd, points, media, modes: [0, 1], block, part };
            let changes = &mut self.changes[first..first + coat.layers.len()];
            passage.back::<LAYERS>(place, coat, &seeds, &self.both, changes);
        }
    }
}
