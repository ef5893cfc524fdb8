//! The CIEDE2000 colour difference.

use super::Lab;

/// How far two colours are apart, ΔE₀₀, with all parametric factors 1.
///
/// Source: ISO/CIE 11664-6:2022; G. Sharma, W. Wu, E. N. Dalal, Color Res. Appl. 30, 21–30 (2005), whose equation
/// numbers stand beside the steps.
pub fn ciede2000(first: Lab, second: Lab) -> f64 {
    // (2) to (7): a is stretched for colours near grey.
    let chroma = (first.a.hypot(first.b) + second.a.hypot(second.b)) / 2.0;
    let seventh = chroma.powi(7);
    let stretch = 1.5 - 0.5 * (seventh / (seventh + 25f64.powi(7))).sqrt();
    let (a1, a2) = (first.a * stretch, second.a * stretch);
    let (c1, c2) = (a1.hypot(first.b), a2.hypot(second.b));
    let (h1, h2) = (hue(a1, first.b), hue(a2, second.b));

    // (8) to (11): differences.
    let lightness = second.l - first.l;
    let saturation = c2 - c1;
    let grey = c1 * c2 == 0.0;
    let turn = if grey { 0.0 } else { (h2 - h1 + 540.0).rem_euclid(360.0) - 180.0 };
    let hues = 2.0 * (c1 * c2).sqrt() * (turn / 2.0).to_radians().sin();

    // (12) to (14): means.
    let l = (first.l + second.l) / 2.0;
    let c = (c1 + c2) / 2.0;
    let h = if grey {
        h1 + h2
    } else if (h1 - h2).abs() <= 180.0 {
        (h1 + h2) / 2.0
    } else if h1 + h2 < 360.0 {
        (h1 + h2 + 360.0) / 2.0
    } else {
        (h1 + h2 - 360.0) / 2.0
    };

    // (15) to (22): weights.
    let cosine = |degrees: f64| degrees.to_radians().cos();
    let t = 1.0 - 0.17 * cosine(h - 30.0) + 0.24 * cosine(2.0 * h) + 0.32 * cosine(3.0 * h + 6.0)
        - 0.20 * cosine(4.0 * h - 63.0);
    let from_fifty = (l - 50.0).powi(2);
    let s_l = 1.0 + 0.015 * from_fifty / (20.0 + from_fifty).sqrt();
    let s_c = 1.0 + 0.045 * c;
    let s_h = 1.0 + 0.015 * c * t;
    let turned = 30.0 * (-((h - 275.0) / 25.0).powi(2)).exp();
    let seventh = c.powi(7);
    let blue = -2.0 * (seventh / (seventh + 25f64.powi(7))).sqrt() * (2.0 * turned).to_radians().sin();

    let (dl, dc, dh) = (lightness / s_l, saturation / s_c, hues / s_h);
    (dl * dl + dc * dc + dh * dh + blue * dc * dh).max(0.0).sqrt()
}

/// The hue angle, 0 to 360°; 0 for a grey.
fn hue(a: f64, b: f64) -> f64 {
    if a == 0.0 && b == 0.0 { 0.0 } else { b.atan2(a).to_degrees().rem_euclid(360.0) }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn published_pairs() {
        // G. Sharma, W. Wu, E. N. Dalal, Color Res. Appl. 30, 21 (2005), table 1, to its four decimals.
        let pairs = [
            ((50.0, 2.6772, -79.7751), (50.0, 0.0, -82.7485), 2.0425),
            ((50.0, 3.1571, -77.2803), (50.0, 0.0, -82.7485), 2.8615),
            ((50.0, -1.3802, -84.2814), (50.0, 0.0, -82.7485), 1.0000),
            ((60.2574, -34.0099, 36.2677), (60.4626, -34.1751, 39.4387), 1.2644),
            ((2.0776, 0.0795, -1.135), (0.9033, -0.0636, -0.5514), 0.9082),
        ];
        for (first, second, expected) in pairs {
            let lab = |(l, a, b): (f64, f64, f64)| Lab { l, a, b };
            let found = ciede2000(lab(first), lab(second));
            assert!((found - expected).abs() <= 5.1e-5, "{first:?} {second:?}: {found}");
            assert!((ciede2000(lab(second), lab(first)) - found).abs() < 1e-12);
        }
    }
}
