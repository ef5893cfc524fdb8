//! How a quantity in power changes with the thickness of every layer: exact, from one pass there and one back.
//!
//! On the way back from the front a row (α, β) is carried through the films, with dQ = Re(α dB + β dC) for the fields at each
//! face; a film's matrix obeys dM/dd = −i κ [[0, 1/η], [η, 0]] M with κ = k₀ q, so the change with its thickness is
//! Re(−i κ (α C/η + β η B)) at its front. It is the reverse mode of differentiation of A. Griewank, A. Walther, *Evaluating
//! Derivatives*, 2nd ed. (2008), chapter 3.

use std::f64::consts::{LN_2, PI};

use pulp::Simd;

use super::face::{Face, Lossless, faces, power};
use super::march::{Fields, LOOK, Pair, Turn};
use super::media::{Kind, Media, Slab};
use super::points::Points;
use crate::lanes::{Complex, Lanes};
use crate::plan::Layer;

/// A film passed, with the fields at its front.
#[derive(Clone, Copy, Debug)]
struct Saved<S: Simd, const P: usize> {
    cosine: Complex<S>,
    lift: Complex<S>,
    pairs: [Pair<S>; P],
}

/// A coating as light from one side meets it, with all that the way back needs.
#[derive(Debug)]
pub(crate) struct Passage<S: Simd, const P: usize> {
    pub(crate) faces: [Face<S>; P],
    /// The films from the far side towards the light.
    saved: Vec<Saved<S, P>>,
    /// After how many films the fields were brought back to size, and by which factor.
    scaled: Vec<(usize, Lanes<S>)>,
    /// Where layers count for themselves: the norm and the halvings at each face from the exit on, and from them the size of the true power flow over that of the fields at each face, from the exit on.
    scales: Vec<(Lanes<S>, Lanes<S>)>,
    flows: Vec<Lanes<S>>,
    exit: [Pair<S>; P],
}

/// What is evaluated where.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Place<'a, S: Simd, const P: usize> {
    pub(crate) simd: S,
    pub(crate) points: &'a Points,
    pub(crate) media: &'a Media,
    pub(crate) modes: [usize; P],
    pub(crate) block: usize,
    pub(crate) lane: usize,
}

/// A coating from one side: its films from the far side towards the light, and the media before and behind it.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Coat<'a> {
    pub(crate) layers: &'a [Layer],
    pub(crate) entry: usize,
    pub(crate) exit: usize,
}

/// How a quantity changes with the powers of a coating.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Seeds<S: Simd> {
    pub(crate) reflectance: Lanes<S>,
    pub(crate) transmittance: Lanes<S>,
}

impl<S: Simd, const P: usize> Passage<S, P> {
    #[inline(always)]
    pub(crate) fn empty(simd: S) -> Self {
        let zero = Lanes::splat(simd, 0.0);
        let none = Complex { re: zero, im: zero };
        let pairs = [Pair { b: none, c: none }; P];
        let face = Face {
            reflectance: zero,
            passed: zero,
            halved: zero,
            numerator: none,
            denominator: none,
            share: zero,
        };
        Passage {
            faces: [face; P],
            saved: Vec::new(),
            scaled: Vec::new(),
            scales: Vec::new(),
            flows: Vec::new(),
            exit: pairs,
        }
    }

    /// The way there. With `LAYERS` what every layer takes can be told as well.
    #[inline(always)]
    pub(crate) fn go<const LAYERS: bool>(&mut self, place: Place<'_, S, P>, coat: Coat<'_>) {
        let Place { simd, points, media, modes, block, lane } = place;
        let (slabs, kinds) = media.slabs(block);
        let waves = media.waves(block);
        let mut fields = Fields::new(simd, &waves[coat.exit], modes, lane);
        self.saved.clear();
        self.scaled.clear();
        self.flows.clear();
        self.exit = fields.pairs;
        self.scales.clear();
        if LAYERS {
            self.scales.push((fields.norm, fields.halved));
        }
        for (at, layer) in coat.layers.iter().enumerate() {
            let (slab, kind) = (&slabs[layer.material], kinds[layer.material]);
            let (cosine, lift) = fields.through::<false>(simd, slab, kind, modes, lane, layer.thickness_nm);
            self.saved.push(Saved { cosine, lift, pairs: fields.pairs });
            if LAYERS {
                self.scales.push((fields.norm, fields.halved));
            }
            if (at + 1) % LOOK == 0 || kind == Kind::Mean {
                if let Some(factor) = fields.look() {
                    self.scaled.push((at + 1, factor));
                }
            }
        }
        if let Some(factor) = fields.look() {
            self.scaled.push((coat.layers.len(), factor));
        }
        let lossless = Lossless::of(points, block, coat.entry, coat.layers);
        self.faces = faces(simd, &fields, &waves[coat.entry], &waves[coat.exit], modes, lossless, lane);
        for &(norm, halved) in &self.scales {
            self.flows.push(fields.norm / norm * power(fields.halved - halved));
        }
    }

    /// What each layer takes, from the far side towards the light.
    #[inline(always)]
    pub(crate) fn taken(
        &self,
        points: &Points,
        block: usize,
        layers: &[Layer],
        p: usize,
        to: &mut Vec<Lanes<S>>,
    ) {
        to.clear();
        let share = self.faces[p].share;
        let mut far = share * self.exit[p].flux() * self.flows[0];
        for (at, layer) in layers.iter().enumerate() {
            let near = share * self.saved[at].pairs[p].flux() * self.flows[at + 1];
            let clear = points.is_lossless(block, layer.material);
            to.push(if clear { share.of(0.0) } else { near - far });
            far = near;
        }
    }

    /// The way back: adds the change of the quantity with each layer's thickness to those of a list that starts at the light.
    /// With `LAYERS` `weights` says how the quantity changes with what each layer takes, from the far side.
    #[inline(always)]
    pub(crate) fn back<const LAYERS: bool>(
        &self,
        place: Place<'_, S, P>,
        coat: Coat<'_>,
        seeds: &[Seeds<S>; P],
        weights: &[Vec<Lanes<S>>; P],
        changes: &mut [Lanes<S>],
    ) {
        let Place { simd, media, modes, block, lane, .. } = place;
        let (slabs, kinds) = media.slabs(block);
        let waves = media.waves(block);
        let zero = Lanes::splat(simd, 0.0);
        let two = zero.of(2.0);
        let none = Complex { re: zero, im: zero };
        let mut rows = [Pair { b: none, c: none }; P];
        for p in 0..P {
            let face = &self.faces[p];
            let (n, d) = (face.numerator, face.denominator);
            let over = zero.of(1.0) / d.norm_sqr();
            let Seeds { reflectance, transmittance } = seeds[p];
            let mut through = reflectance * face.reflectance + transmittance * face.transmittance();
            if LAYERS {
                through = through + self.absorbed(p, &weights[p]);
            }
            let of_n = n.conj().scale(two * reflectance * over);
            let of_d = d.conj().scale(-(two * through * over));
            let arriving = Pair::of_wave(simd, &waves[coat.entry][modes[p]], lane);
            // Where no light arrives nothing changes.
            let lit = zero.where_less(face.share, zero.of(1.0), zero);
            rows[p] = Pair {
                b: ((of_n + of_d) * arriving.c).scale(lit),
                c: ((of_d - of_n) * arriving.b).scale(lit),
            };
        }
        let mut scaled = self.scaled.iter().rev().peekable();
        for at in (0..coat.layers.len()).rev() {
            while let Some((_, factor)) = scaled.next_if(|scaled| scaled.0 == at + 1) {
                for row in &mut rows {
                    *row = Pair { b: row.b.scale(*factor), c: row.c.scale(*factor) };
                }
            }
            let layer = &coat.layers[at];
            let (slab, kind) = (&slabs[layer.material], kinds[layer.material]);
            let saved = &self.saved[at];
            let mut sum = zero;
            for p in 0..P {
                if LAYERS {
                    // The flow at this face counts for the layer behind it, and against the one before it.
                    let before = weights[p].get(at + 1).copied().unwrap_or(zero);
                    let weight = (weights[p][at] - before) * self.faces[p].share * self.flows[at + 1];
                    let Pair { b, c } = saved.pairs[p];
                    rows[p].b = rows[p].b + c.conj().scale(weight);
                    rows[p].c = rows[p].c + b.conj().scale(weight);
                }
                sum = sum + self.step(place, at, slab, kind, layer, p, &mut rows[p]);
            }
            let change = &mut changes[coat.layers.len() - 1 - at];
            *change = *change + sum;
        }
    }

    /// The change with one layer's thickness, and the row taken through it.
    #[inline(always)]
    #[allow(clippy::too_many_arguments)]
    fn step(
        &self,
        place: Place<'_, S, P>,
        at: usize,
        slabs: &[Slab; 2],
        kind: Kind,
        layer: &Layer,
        p: usize,
        row: &mut Pair<S>,
    ) -> Lanes<S> {
        let Place { simd, modes, lane, .. } = place;
        let slab = &slabs[modes[p]];
        let Saved { cosine, lift, pairs } = &self.saved[at];
        let Pair { b, c } = pairs[p];
        let (alpha, beta) = (row.b, row.c);
        let turns = Lanes::load(simd, &slab.turns.0[lane..]) * b.re.of(PI);
        if kind == Kind::Clear {
            let (over, times) = (
                Lanes::load(simd, &slab.impedance.re.0[lane..]),
                Lanes::load(simd, &slab.admittance.re.0[lane..]),
            );
            // Im(α C/η + β η B).
            let electric = alpha.re.mul_add(c.im, alpha.im * c.re) * over;
            let change = beta.re.mul_add(b.im, beta.im * b.re).mul_add(times, electric);
            // The lift is −i sin δ.
            let (sine, cosine) = (lift.im, cosine.re);
            let (over, times) = (sine * over, sine * times);
            *row = Pair {
                b: Complex {
                    re: times.neg_mul_add(beta.im, cosine * alpha.re),
                    im: times.mul_add(beta.re, cosine * alpha.im),
                },
                c: Complex {
                    re: over.neg_mul_add(alpha.im, cosine * beta.re),
                    im: over.mul_add(alpha.re, cosine * beta.im),
                },
            };
            return change * turns;
        }
        let (mut cosine, mut lift) = (*cosine, *lift);
        if kind == Kind::Mean {
            let turn = Turn::new(simd, slab, lane, b.re.of(layer.thickness_nm)).whole();
            (cosine, lift) = (turn.cosine, turn.lift);
        }
        let (over, times) = (slab.impedance.load(simd, lane), slab.admittance.load(simd, lane));
        let inner = (alpha * c) * over + (beta * b) * times;
        let rate = Lanes::load(simd, &slab.halvings.0[lane..]) * b.re.of(0.5 * LN_2);
        // Re(−i κ x) = Re κ Im x + Im κ Re x.
        let change = turns.mul_add(inner.im, rate * inner.re);
        let (over, times) = (lift * over, lift * times);
        *row = Pair { b: times.mul_add(beta, cosine * alpha), c: over.mul_add(alpha, cosine * beta) };
        change
    }

    /// What the layers take, weighed.
    #[inline(always)]
    fn absorbed(&self, p: usize, weights: &[Lanes<S>]) -> Lanes<S> {
        let share = self.faces[p].share;
        let mut far = self.exit[p].flux() * self.flows[0];
        let mut sum = far.of(0.0);
        for (at, weight) in weights.iter().enumerate() {
            let near = self.saved[at].pairs[p].flux() * self.flows[at + 1];
            sum = (near - far).mul_add(*weight, sum);
            far = near;
        }
        sum * share
    }
}
