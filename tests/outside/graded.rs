//! Graded films against Airy functions and the fields' equations integrated; textured half-spaces against rays in three dimensions.

use overcoat_engine::{Film, Gradient, Index, MixingRule, Polarisation, Profile, Stack, Steps};
use serde::Deserialize;

use crate::data::{Comparison, polarisation, reference};

#[derive(Deserialize)]
struct Graded {
    films: Vec<Row>,
}

#[derive(Deserialize)]
struct Row {
    incident: f64,
    front: [f64; 2],
    back: [f64; 2],
    thickness: f64,
    rule: String,
    exit: [f64; 2],
    wavelength_nm: f64,
    angle_rad: f64,
    polarised: String,
    reflectance: f64,
    transmittance: f64,
}

fn index([n, k]: [f64; 2]) -> Index {
    Index::constant(n, k).expect("a physical index")
}

fn graded(row: &Row, steps: Steps) -> Stack {
    let rule = match row.rule.as_str() {
        "volume" => MixingRule::Volume,
        "lorentz_lorenz" => MixingRule::LorentzLorenz,
        _ => MixingRule::Bruggeman,
    };
    let (front, back) = (index(row.front), index(row.back));
    let profile = Profile::Graded(Gradient { front, back, shares: (0.0, 1.0), rule, steps });
    let film = Film { profile, thickness_nm: row.thickness };
    Stack {
        incident: index([row.incident, 0.0]),
        coatings: vec![vec![film]],
        bodies: vec![],
        exit: index(row.exit),
        facets_rad: None,
    }
}

/// Source: G. B. Airy (1838), NIST Digital Library of Mathematical Functions, 9.2, for the profile whose permittivity is linear; the
/// equations of M. Born, E. Wolf, Principles of Optics, 1.6, for the others.
#[test]
fn graded_films_settle_to_the_solution_for_the_continuous_profile() {
    let file: Graded = reference("graded.json");
    let mut comparison = Comparison::default();
    for row in &file.films {
        let band = (row.wavelength_nm, row.wavelength_nm);
        let stack = graded(row, Steps::Smooth(1)).settled(&[band], row.angle_rad).expect("it settles");
        let polarisation = polarisation(&row.polarised);
        let found = stack.response(row.wavelength_nm, row.angle_rad, polarisation).expect("a response");
        let what = format!("{} {:?} {:?} {}", row.rule, row.front, row.back, row.polarised);
        comparison.add(&format!("R {what}"), found.reflectance, row.reflectance, 1e-8);
        comparison.add(&format!("T {what}"), found.transmittance, row.transmittance, 1e-8);
        // And from the other side the same light passes (H. A. Lorentz's reciprocity).
        let back = stack.reversed().expect("no texture");
        if row.exit[1] == 0.0 && row.angle_rad == 0.0 {
            let through = back.response(row.wavelength_nm, 0.0, polarisation).expect("a response");
            comparison.add(&format!("T back {what}"), through.transmittance, row.transmittance, 1e-8);
        }
    }
    comparison.finish(120);
}

/// So many films as are asked for come nearer by the square of their number.
#[test]
fn films_in_place_of_a_profile_come_nearer_by_the_square_of_their_number() {
    let file: Graded = reference("graded.json");
    let row = &file.films[1];
    let error = |films| {
        let stack = graded(row, Steps::Films(films));
        let found = stack.response(row.wavelength_nm, row.angle_rad, Polarisation::S).expect("a response");
        (found.reflectance - row.reflectance).abs()
    };
    let (coarse, fine) = (error(24), error(48));
    assert!(coarse > 1e-6 && (coarse / fine - 4.0).abs() < 0.1, "{coarse} {fine}");
}

#[derive(Deserialize)]
struct Textures {
    textures: Vec<Texture>,
}

#[derive(Deserialize)]
struct Texture {
    facets_deg: f64,
    index: [f64; 2],
    reflectance: f64,
}

/// Source: P. Campbell, M. A. Green, J. Appl. Phys. 62, 243–249 (1987), for the method.
///
/// The rays fall on an even grid, whose edges take part in no facet: the share of a facet is known to 1 % of all rays.
#[test]
fn a_textured_half_space_reflects_what_rays_in_three_dimensions_do() {
    let file: Textures = reference("facets.json");
    let mut comparison = Comparison::default();
    for row in &file.textures {
        let stack = Stack {
            incident: index([1.0, 0.0]),
            coatings: vec![vec![]],
            bodies: vec![],
            exit: index(row.index),
            facets_rad: Some(row.facets_deg.to_radians()),
        };
        let found = stack.response(600.0, 0.0, Polarisation::Mean).expect("a response");
        let what = format!("R of {} deg, n = {}", row.facets_deg, row.index[0]);
        comparison.add(&what, found.reflectance, row.reflectance, 0.01 * row.reflectance.max(0.01));
        let balance = found.reflectance + found.transmittance;
        comparison.add(&format!("balance of {what}"), balance, 1.0, 1e-12);
    }
    comparison.finish(28);
}
