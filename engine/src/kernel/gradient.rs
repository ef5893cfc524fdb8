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
use super::media::{Kind, Media, Slabs};
use super::points::Points;
use crate::lanes::{Complex, Lanes};
use crate::plan::Layer;

/// A film passed, with the fields at its front.
#[derive(Clone, Copy, Debug)]
struct Saved<S: Simd, const P: usize> {
    /// Of a clear film.
    cosine: Lanes<S>,
    sine: Lanes<S>,
    pairs: [Pair<S>; P],
}

/// A coating as light from one side meets it, with all that the way back needs.
#[derive(Debug)]
pub(crate) struct Passage<S: Simd, const P: usize> {
    pub(crate) faces: [Face<S>; P],
    /// The films from the far side towards the light.
    saved: Vec<Saved<S, P>>,
    /// The cosine and −i times the sine of those that are not clear, in the same order.
    dim: Vec<(Complex<S>, Complex<S>)>,
    /// After how many films the fields were brought back to size, and by which factor.
    scaled: Vec<(usize, [Lanes<S>; P])>,
    /// Where layers count for themselves: the norm and the halvings at each face from the exit on, and from them the size of the true power flow over that of the fields at each face, from the exit on.
    scales: Vec<(Lanes<S>, [Lanes<S>; P])>,
    flows: Vec<[Lanes<S>; P]>,
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
    pub(crate) part: usize,
}

/// A coating from one side: its films from the far side towards the light, and the media before and behind it.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Coat<'a> {
    pub(crate) layers: &'a [Layer],
    /// Of what they are.
    pub(crate) media: &'a [usize],
    pub(crate) entry: usize,
    pub(crate) exit: usize,
}

/// How a quantity changes with the powers of a coating.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Seeds<S: Simd> {
    pub(crate) reflectance: Lanes<S>,
    pub(crate) transmittance: Lanes<S>,
}

impl<S: Simd, const P: usize> Saved<S, P> {
    /// Im(α C/η + β η B) for a clear film, and the row taken through it.
    #[inline(always)]
    fn clear(&self, p: usize, row: &mut Pair<S>, over: Lanes<S>, times: Lanes<S>) -> Lanes<S> {
        let Pair { b, c } = self.pairs[p];
        let (alpha, beta, cosine) = (row.b, row.c, self.cosine);
        let electric = alpha.re.mul_add(c.im, alpha.im * c.re) * over;
        let change = beta.re.mul_add(b.im, beta.im * b.re).mul_add(times, electric);
        let (over, times) = (self.sine * over, self.sine * times);
        *row = Pair {
            b: Complex {
                re: times.mul_add(beta.im, cosine * alpha.re),
                im: times.neg_mul_add(beta.re, cosine * alpha.im),
            },
            c: Complex {
                re: over.mul_add(alpha.im, cosine * beta.re),
                im: over.neg_mul_add(alpha.re, cosine * beta.im),
            },
        };
        change
    }

    /// α C/η + β η B for any film, and the row taken through it.
    #[inline(always)]
    fn dim(
        &self,
        p: usize,
        row: &mut Pair<S>,
        (cosine, lift): (Complex<S>, Complex<S>),
        over: Complex<S>,
        times: Complex<S>,
    ) -> Complex<S> {
        let Pair { b, c } = self.pairs[p];
        let (alpha, beta) = (row.b, row.c);
        let inner = (alpha * c) * over + (beta * b) * times;
        let (over, times) = (lift * over, lift * times);
        *row = Pair { b: times.mul_add(beta, cosine * alpha), c: over.mul_add(alpha, cosine * beta) };
        inner
    }
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
            transmittance: zero,
            numerator: none,
            denominator: none,
            share: zero,
        };
        Passage {
            faces: [face; P],
            saved: Vec::new(),
            dim: Vec::new(),
            scaled: Vec::new(),
            scales: Vec::new(),
            flows: Vec::new(),
            exit: pairs,
        }
    }

    /// The way there. With `LAYERS` what every layer takes can be told as well.
    #[inline(always)]
    pub(crate) fn go<const LAYERS: bool>(&mut self, place: Place<'_, S, P>, coat: Coat<'_>) {
        let Place { simd, points, media, modes, block, part } = place;
        let Slabs { slabs, kinds, strongest } = media.slabs(block);
        let waves = media.waves(block);
        let mut fields = Fields::new(simd, &waves[coat.exit], modes, part);
        self.saved.clear();
        self.scaled.clear();
        self.flows.clear();
        self.exit = fields.pairs;
        self.scales.clear();
        if LAYERS {
            self.scales.push((fields.norm, fields.halved));
        }
        let zero = Lanes::splat(simd, 0.0);
        self.dim.clear();
        self.saved.resize(coat.layers.len(), Saved { cosine: zero, sine: zero, pairs: fields.pairs });
        let mut at = 0;
        for some in coat.layers.chunks(LOOK) {
            let mut rest = some;
            while !rest.is_empty() {
                // A loop of its own for each kind keeps the fields in registers.
                let first = at;
                for (layer, saved) in rest.iter().zip(&mut self.saved[first..]) {
                    if kinds[layer.material] != Kind::Clear {
                        break;
                    }
                    let slab = &slabs[layer.material];
                    let (sine, cosine) =
                        fields.through_clear::<false>(simd, slab, modes, part, layer.thickness_nm);
                    *saved = Saved { cosine, sine, pairs: fields.pairs };
                    if LAYERS {
                        self.scales.push((fields.norm, fields.halved));
                    }
                    at += 1;
                }
                rest = &rest[at - first..];
                let first = at;
                for (layer, saved) in rest.iter().zip(&mut self.saved[first..]) {
                    let (slab, kind) = (&slabs[layer.material], kinds[layer.material]);
                    if kind == Kind::Clear {
                        break;
                    }
                    self.dim.push(fields.through_dim::<false>(
                        simd,
                        slab,
                        (kind, strongest[layer.material]),
                        modes,
                        part,
                        layer.thickness_nm,
                    ));
                    saved.pairs = fields.pairs;
                    if LAYERS {
                        self.scales.push((fields.norm, fields.halved));
                    }
                    at += 1;
                    if kind == Kind::Mean
                        && let Some(factor) = fields.look()
                    {
                        self.scaled.push((at, factor));
                    }
                }
                rest = &rest[at - first..];
            }
            if let Some(factor) = fields.look() {
                self.scaled.push((at, factor));
            }
        }
        let lossless = Lossless::of(points, block, coat.entry, coat.media);
        self.faces = faces(simd, &fields, &waves[coat.entry], &waves[coat.exit], modes, lossless, part);
        for &(norm, halved) in &self.scales {
            let mut flow = [fields.norm / norm; P];
            for p in 0..P {
                flow[p] = flow[p] * power(fields.halved[p] - halved[p]);
            }
            self.flows.push(flow);
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
        let mut far = share * self.exit[p].flux() * self.flows[0][p];
        for (at, layer) in layers.iter().enumerate() {
            let near = share * self.saved[at].pairs[p].flux() * self.flows[at + 1][p];
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
        let Place { simd, media, modes, block, part, .. } = place;
        let Slabs { slabs, kinds, strongest } = media.slabs(block);
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
            let mut through = reflectance * face.reflectance + transmittance * face.transmittance;
            if LAYERS {
                through = through + self.absorbed(p, &weights[p]);
            }
            let of_n = n.conj().scale(two * reflectance * over);
            let of_d = d.conj().scale(-(two * through * over));
            let arriving = Pair::of_wave(simd, &waves[coat.entry][modes[p]], part);
            // Where no light arrives nothing changes.
            let lit = zero.where_less(face.share, zero.of(1.0), zero);
            rows[p] = Pair {
                b: ((of_n + of_d) * arriving.c).scale(lit),
                c: ((of_d - of_n) * arriving.b).scale(lit),
            };
        }
        let mut scaled = self.scaled.iter().rev().peekable();
        let mut dim = self.dim.len();
        let mut at = coat.layers.len();
        while at > 0 {
            while let Some((_, factors)) = scaled.next_if(|scaled| scaled.0 >= at) {
                for (row, factor) in rows.iter_mut().zip(factors) {
                    *row = Pair { b: row.b.scale(*factor), c: row.c.scale(*factor) };
                }
            }
            // As far as the fields have not been brought back to size.
            let end = scaled.peek().map_or(0, |scaled| scaled.0);
            let own = &coat.layers[end..at];
            let mut passed = 0;
            for (layer, saved) in own.iter().zip(&self.saved[end..at]).rev() {
                if kinds[layer.material] != Kind::Clear {
                    break;
                }
                let here = at - 1 - passed;
                if LAYERS {
                    self.inject(here, weights, &mut rows);
                }
                let slabs = &slabs[layer.material];
                let mut sum = zero;
                for p in 0..P {
                    let slab = &slabs[modes[p]];
                    let turns = slab.turns.load(simd, part) * zero.of(PI);
                    let over = slab.impedance.re.load(simd, part);
                    let times = slab.admittance.re.load(simd, part);
                    sum = saved.clear(p, &mut rows[p], over, times).mul_add(turns, sum);
                }
                let change = &mut changes[coat.layers.len() - 1 - here];
                *change = *change + sum;
                passed += 1;
            }
            at -= passed;
            let mut passed = 0;
            for (layer, saved) in coat.layers[end..at].iter().zip(&self.saved[end..at]).rev() {
                let (slabs, kind) = (&slabs[layer.material], kinds[layer.material]);
                if kind == Kind::Clear {
                    break;
                }
                let here = at - 1 - passed;
                if LAYERS {
                    self.inject(here, weights, &mut rows);
                }
                dim -= 1;
                let mut turn = self.dim[dim];
                let mut sum = zero;
                for p in 0..P {
                    let slab = &slabs[modes[p]];
                    if kind == Kind::Mean {
                        let own = Turn::new(simd, slab, part, strongest[layer.material], layer.thickness_nm)
                            .whole();
                        turn = (own.cosine, own.lift);
                    }
                    let rate = Complex {
                        re: slab.turns.load(simd, part) * zero.of(PI),
                        im: slab.halvings.load(simd, part) * zero.of(0.5 * LN_2),
                    };
                    let over = slab.impedance.load(simd, part);
                    let times = slab.admittance.load(simd, part);
                    let inner = saved.dim(p, &mut rows[p], turn, over, times);
                    // Re(−i κ x) = Re κ Im x + Im κ Re x.
                    sum = sum + rate.re.mul_add(inner.im, rate.im * inner.re);
                }
                let change = &mut changes[coat.layers.len() - 1 - here];
                *change = *change + sum;
                passed += 1;
            }
            at -= passed;
        }
    }

    /// Adds to the rows that the flow at a layer's front counts for the layer, and against the one before it.
    #[inline(always)]
    fn inject(&self, at: usize, weights: &[Vec<Lanes<S>>; P], rows: &mut [Pair<S>; P]) {
        for p in 0..P {
            let own = weights[p][at];
            let before = weights[p].get(at + 1).copied().unwrap_or(own.of(0.0));
            let weight = (own - before) * self.faces[p].share * self.flows[at + 1][p];
            let Pair { b, c } = self.saved[at].pairs[p];
            rows[p].b = rows[p].b + c.conj().scale(weight);
            rows[p].c = rows[p].c + b.conj().scale(weight);
        }
    }

    /// What the layers take, weighed.
    #[inline(always)]
    fn absorbed(&self, p: usize, weights: &[Lanes<S>]) -> Lanes<S> {
        let share = self.faces[p].share;
        let mut far = self.exit[p].flux() * self.flows[0][p];
        let mut sum = far.of(0.0);
        for (at, weight) in weights.iter().enumerate() {
            let near = self.saved[at].pairs[p].flux() * self.flows[at + 1][p];
            sum = (near - far).mul_add(*weight, sum);
            far = near;
        }
        sum * share
    }
}
