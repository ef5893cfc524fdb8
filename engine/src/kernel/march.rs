//! The tangential fields (B, C) carried through the films, from the far side towards the light.
//!
//! A film's matrix is [[cos δ, −i sin δ/η], [−i η sin δ, cos δ]] (F. Abelès, Ann. Phys. (Paris) 5, 596 (1950)). Sine and cosine
//! come up to a common factor, whose square is kept in `norm` and whose sign in the parity of `turned`; what absorption takes is
//! kept out of the fields, in `halved`. So the fields themselves stay numbers through a thousand films or a millimetre of metal.

use pulp::{Simd, bytemuck};

use super::media::{Kind, Slab, Slabs, Wave};
use crate::lanes::{Complex, FEW_BITS, Lanes, decay, half_turn, power_of_two, weak_decay};
use crate::plan::Layer;

/// After how many films the fields' size is looked at. A film changes it by less than 10⁵.
pub(crate) const LOOK: usize = 32;
/// Fields greater than this, or smaller than one over it, are brought back to a size near 1.
const LARGE: f64 = 1e60;

/// Electric and magnetic field.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Pair<S: Simd> {
    pub(crate) b: Complex<S>,
    pub(crate) c: Complex<S>,
}

impl<S: Simd> Pair<S> {
    #[inline(always)]
    pub(crate) fn of_wave(simd: S, wave: &Wave, part: usize) -> Self {
        Pair { b: wave.b.load(simd, part), c: wave.c.load(simd, part) }
    }

    /// The mean normal power flow Re(B* C), in the fields' own scale.
    #[inline(always)]
    pub(crate) fn flux(self) -> Lanes<S> {
        self.b.dot(self.c)
    }

    /// Through a film in which all is real: `over` is sin δ/η, `times` is η sin δ.
    #[inline(always)]
    fn clear(self, cosine: Lanes<S>, over: Lanes<S>, times: Lanes<S>) -> Self {
        let Pair { b, c } = self;
        Pair {
            b: Complex { re: over.mul_add(c.im, cosine * b.re), im: over.neg_mul_add(c.re, cosine * b.im) },
            c: Complex { re: times.mul_add(b.im, cosine * c.re), im: times.neg_mul_add(b.re, cosine * c.im) },
        }
    }

    /// Through any film: `over` is −i sin δ/η, `times` is −i η sin δ.
    #[inline(always)]
    fn dim(self, cosine: Complex<S>, over: Complex<S>, times: Complex<S>) -> Self {
        let Pair { b, c } = self;
        Pair { b: over.mul_add(c, cosine * b), c: times.mul_add(b, cosine * c) }
    }
}

/// The fields at one face for `P` polarisations. The true ones are these times 2^(halved/2)/√norm, and times −1 where `turned`
/// is odd: s and p have the last two in common, but one may grow a thousand orders above the other.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Fields<S: Simd, const P: usize> {
    pub(crate) pairs: [Pair<S>; P],
    pub(crate) norm: Lanes<S>,
    pub(crate) turned: Lanes<S>,
    pub(crate) halved: [Lanes<S>; P],
}

/// The sine and cosine of a film that absorbs, up to what is kept beside the fields.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Turn<S: Simd> {
    pub(crate) cosine: Complex<S>,
    /// −i sin δ.
    pub(crate) lift: Complex<S>,
    norm: Lanes<S>,
    whole: Lanes<S>,
    halvings: Lanes<S>,
}

impl<S: Simd> Turn<S> {
    /// With δ = x + iy: cos δ = cos x cosh y − i sin x sinh y, and −i sin δ = cos x sinh y − i sin x cosh y.
    #[inline(always)]
    pub(crate) fn new(simd: S, slab: &Slab, part: usize, strongest: f64, thickness_nm: f64) -> Self {
        let thickness = Lanes::splat(simd, thickness_nm);
        let (sine, cosine, whole) = half_turn(slab.turns.load(simd, part) * thickness);
        let halvings = slab.halvings.load(simd, part) * thickness;
        // Both hyperbolic functions over e^y, whose square is 2^halvings.
        let (left, lost) =
            if strongest * thickness_nm < FEW_BITS { weak_decay(halvings) } else { decay(halvings) };
        let half = thickness.of(0.5);
        let (cosh, sinh) = (left.mul_add(half, half), lost * half);
        Turn {
            cosine: Complex { re: cosine * cosh, im: -(sine * sinh) },
            lift: Complex { re: cosine * sinh, im: -(sine * cosh) },
            norm: sine.mul_add(sine, cosine * cosine),
            whole,
            halvings,
        }
    }

    /// With nothing kept beside the fields.
    #[inline(always)]
    pub(crate) fn whole(self) -> Self {
        let (left, _) = decay(self.halvings);
        let factor = sign_of(self.whole) / (self.norm * left).sqrt();
        Turn { cosine: self.cosine.scale(factor), lift: self.lift.scale(factor), ..self }
    }
}

impl<S: Simd, const P: usize> Fields<S, P> {
    #[inline(always)]
    pub(crate) fn new(simd: S, waves: &[Wave; 2], modes: [usize; P], part: usize) -> Self {
        let zero = Lanes::splat(simd, 0.0);
        let mut pairs = [Pair { b: Complex { re: zero, im: zero }, c: Complex { re: zero, im: zero } }; P];
        for (pair, mode) in pairs.iter_mut().zip(modes) {
            *pair = Pair::of_wave(simd, &waves[mode], part);
        }
        Fields { pairs, norm: zero.of(1.0), turned: zero, halved: [zero; P] }
    }

    /// Through a clear film; its sine and cosine up to the factor that was taken out. The sign is kept only if `SIGNED`.
    #[inline(always)]
    pub(crate) fn through_clear<const SIGNED: bool>(
        &mut self,
        simd: S,
        slabs: &[Slab; 2],
        modes: [usize; P],
        part: usize,
        thickness_nm: f64,
    ) -> (Lanes<S>, Lanes<S>) {
        let turns = slabs[0].turns.load(simd, part) * Lanes::splat(simd, thickness_nm);
        let (sine, cosine, whole) = half_turn(turns);
        for p in 0..P {
            let slab = &slabs[modes[p]];
            let over = sine * slab.impedance.re.load(simd, part);
            let times = sine * slab.admittance.re.load(simd, part);
            self.pairs[p] = self.pairs[p].clear(cosine, over, times);
        }
        self.norm = self.norm * sine.mul_add(sine, cosine * cosine);
        if SIGNED {
            self.turned = self.turned + whole;
        }
        (sine, cosine)
    }

    /// Through any film; its cosine and −i times its sine, of a mean of two media those for the last polarisation.
    #[inline(always)]
    pub(crate) fn through_dim<const SIGNED: bool>(
        &mut self,
        simd: S,
        slabs: &[Slab; 2],
        (kind, strongest): (Kind, f64),
        modes: [usize; P],
        part: usize,
        thickness_nm: f64,
    ) -> (Complex<S>, Complex<S>) {
        let mut turn = Turn::new(simd, &slabs[modes[0]], part, strongest, thickness_nm);
        for p in 0..P {
            let slab = &slabs[modes[p]];
            if kind == Kind::Mean {
                turn = Turn::new(simd, slab, part, strongest, thickness_nm).whole();
            }
            let over = turn.lift * slab.impedance.load(simd, part);
            let times = turn.lift * slab.admittance.load(simd, part);
            self.pairs[p] = self.pairs[p].dim(turn.cosine, over, times);
        }
        if kind == Kind::Mean {
            return (turn.cosine, turn.lift);
        }
        self.norm = self.norm * turn.norm;
        for halved in &mut self.halved {
            *halved = *halved + turn.halvings;
        }
        if SIGNED {
            self.turned = self.turned + turn.whole;
        }
        (turn.cosine, turn.lift)
    }

    /// Brings fields that have become very large or small back to a size near 1; by which factor, if so.
    #[inline(always)]
    pub(crate) fn look(&mut self) -> Option<[Lanes<S>; P]> {
        let zero = self.norm.of(0.0);
        let mut sizes = [zero; P];
        let mut extreme = self.norm;
        for (size, Pair { b, c }) in sizes.iter_mut().zip(self.pairs) {
            *size = b.re.abs().max(b.im.abs()).max(c.re.abs().max(c.im.abs()));
            extreme = extreme.max(size.max(zero.of(1.0) / *size));
        }
        if extreme.greatest() > LARGE { Some(self.rescale(sizes)) } else { None }
    }

    #[inline(always)]
    fn rescale(&mut self, sizes: [Lanes<S>; P]) -> [Lanes<S>; P] {
        let of_norm = exponent(self.norm);
        self.norm = self.norm * power_of_two(-of_norm);
        let mut factors = sizes;
        for p in 0..P {
            let of_fields = exponent(sizes[p]);
            factors[p] = power_of_two(-of_fields);
            let Pair { b, c } = self.pairs[p];
            self.pairs[p] = Pair { b: b.scale(factors[p]), c: c.scale(factors[p]) };
            self.halved[p] = self.halved[p] + of_fields + of_fields - of_norm;
        }
        factors
    }
}

/// −1 where a whole number is odd, else 1.
#[inline(always)]
pub(crate) fn sign_of<S: Simd>(turned: Lanes<S>) -> Lanes<S> {
    let half = turned * turned.of(0.5);
    // The rest of a half is a half itself, of either sign, or nothing.
    let (_, _, whole) = half_turn(half);
    (half - whole).abs().mul_add(turned.of(-4.0), turned.of(1.0))
}

/// The exponent of a positive normal number, as a number; 0 of zero.
#[inline(always)]
fn exponent<S: Simd>(size: Lanes<S>) -> Lanes<S> {
    let mut values = size.values;
    let each: &mut [f64] = bytemuck::cast_slice_mut(std::slice::from_mut(&mut values));
    for value in each {
        let exponent = ((value.to_bits() >> 52) & 0x7ff) as i64 - 1023;
        *value = if *value > 0.0 && exponent > -1023 && exponent < 1024 { exponent as f64 } else { 0.0 };
    }
    Lanes { values, ..size }
}

/// The power flow at a face, Re(B* C), in a scale of its own.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Flow<S: Simd, const P: usize> {
    pub(crate) flux: [Lanes<S>; P],
    pub(crate) norm: Lanes<S>,
    pub(crate) halved: [Lanes<S>; P],
}

impl<S: Simd, const P: usize> Fields<S, P> {
    #[inline(always)]
    pub(crate) fn flow(&self) -> Flow<S, P> {
        let mut flux = [self.norm; P];
        for (flux, pair) in flux.iter_mut().zip(self.pairs) {
            *flux = pair.flux();
        }
        Flow { flux, norm: self.norm, halved: self.halved }
    }
}

/// The fields at a coating's front from those behind it, its films listed from the far side towards the light. With `FLOWS`
/// the power flow at every face is added to a list, in the same order.
#[inline(always)]
pub(crate) fn march<S: Simd, const P: usize, const SIGNED: bool, const FLOWS: bool>(
    simd: S,
    Slabs { slabs, kinds, strongest }: Slabs<'_>,
    layers: &[Layer],
    exit: &[Wave; 2],
    modes: [usize; P],
    part: usize,
    flows: &mut Vec<Flow<S, P>>,
) -> Fields<S, P> {
    let mut fields = Fields::new(simd, exit, modes, part);
    if FLOWS {
        flows.push(fields.flow());
    }
    for some in layers.chunks(LOOK) {
        let mut rest = some;
        while !rest.is_empty() {
            // A loop of its own for each kind keeps the fields in registers.
            let mut passed = 0;
            for layer in rest {
                if kinds[layer.material] != Kind::Clear {
                    break;
                }
                let slab = &slabs[layer.material];
                fields.through_clear::<SIGNED>(simd, slab, modes, part, layer.thickness_nm);
                if FLOWS {
                    flows.push(fields.flow());
                }
                passed += 1;
            }
            rest = &rest[passed..];
            let mut passed = 0;
            for layer in rest {
                let (slab, kind) = (&slabs[layer.material], kinds[layer.material]);
                if kind == Kind::Clear {
                    break;
                }
                let kinds = (kind, strongest[layer.material]);
                fields.through_dim::<SIGNED>(simd, slab, kinds, modes, part, layer.thickness_nm);
                if kind == Kind::Mean {
                    fields.look();
                }
                if FLOWS {
                    flows.push(fields.flow());
                }
                passed += 1;
            }
            rest = &rest[passed..];
        }
        fields.look();
    }
    fields
}
