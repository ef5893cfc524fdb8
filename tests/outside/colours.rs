//! Colours against colour-science.
//!
//! Sources: CIE 015:2018; ISO/CIE 11664-4 (CIELAB) and -6 (CIEDE2000), as colour-science 0.4.7 has them; the reflectance
//! of one film by its closed formula, O. S. Heavens, Optical Properties of Thin Solid Films (1955).

use overcoat_engine::{Lab, Light, Observer, Quantity, ciede2000, colour};
use serde::Deserialize;

use crate::data::{Comparison, constant, films, reference};
use crate::handbook::weight;

#[derive(Deserialize)]
struct File {
    films: Vec<Film>,
    differences: Vec<Difference>,
}

#[derive(Deserialize)]
struct Film {
    n: f64,
    thickness_nm: f64,
    light: String,
    observer: String,
    lab: [f64; 3],
}

#[derive(Deserialize)]
struct Difference {
    pair: [[f64; 3]; 2],
    difference: f64,
}

#[test]
fn films_have_the_colours_of_colour_science() {
    let file: File = reference("colours.json");
    let mut comparison = Comparison::default();
    for film in &file.films {
        let stack = films(
            constant([1.0, 0.0]),
            vec![(constant([film.n, 0.0]), film.thickness_nm)],
            constant([1.5168, 0.0]),
        );
        let observer = if film.observer == "ten" { Observer::Ten } else { Observer::Two };
        let light = weight(&film.light);
        let seen =
            colour(&stack, &Quantity::Reflectance, &Light::normal(), &light, observer).expect("a colour");
        let what = format!("{} of {} nm under {}, {}", film.n, film.thickness_nm, film.light, film.observer);
        // There the integrals are trapezoidal sums at 1 nm, here they are exact between the tables' rows.
        for (axis, (got, expected)) in [seen.l, seen.a, seen.b].into_iter().zip(film.lab).enumerate() {
            comparison.add(&format!("{what}, axis {axis}"), got, expected, 5e-3);
        }
    }
    comparison.finish(70);
}

#[test]
fn differences_are_those_of_colour_science() {
    let file: File = reference("colours.json");
    let lab = |[l, a, b]: [f64; 3]| Lab { l, a, b };
    let mut comparison = Comparison::default();
    for one in &file.differences {
        let got = ciede2000(lab(one.pair[0]), lab(one.pair[1]));
        comparison.add(&format!("{:?}", one.pair), got, one.difference, 1e-8);
    }
    comparison.finish(120);
}
