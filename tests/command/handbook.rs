//! `overcoat handbook`: listing, searching, and an entry with its curves.

use crate::project::Project;

fn run(arguments: &[&str]) -> crate::project::Run {
    Project::new().run(&[&["handbook"], arguments].concat())
}

/// The names that a list begins its lines with.
fn names(text: &str) -> Vec<&str> {
    text.lines().filter_map(|line| line.split_whitespace().next()).collect()
}

#[test]
fn a_search_lists_what_holds_every_word() {
    let all = run(&[]);
    let fluorides = run(&["--search", "fluoride"]);
    assert_eq!(fluorides.status, Some(0), "{fluorides:?}");
    let found = names(&fluorides.stdout);
    assert!(found.contains(&"ytterbium_fluoride") && found.contains(&"calcium_fluoride"), "{found:?}");
    assert!(!found.contains(&"silicon") && found.len() < names(&all.stdout).len());
    // More words find less; capitals don't count.
    let films = run(&["--search", "Fluoride", "evaporated"]);
    let films = names(&films.stdout);
    assert!(films.contains(&"ytterbium_fluoride") && !films.contains(&"calcium_fluoride"), "{films:?}");
    assert!(films.iter().all(|name| found.contains(name)));
}

#[test]
fn a_search_for_nothing_known_says_so() {
    let nothing = run(&["--search", "unobtainium"]);
    assert_eq!((nothing.status, nothing.stdout.as_str()), (Some(2), ""), "{nothing:?}");
    assert!(nothing.stderr.contains("nothing in the handbook holds `unobtainium`"), "{}", nothing.stderr);
    assert_eq!(run(&["silicon", "--search", "film"]).status, Some(2));
}

#[test]
fn a_list_gives_form_and_range() {
    let list = run(&["--search", "hafnia_sputtered", "reactively"]).stdout;
    let words = "hafnia_sputtered  384.62 .. 49934 nm  Hafnium dioxide, reactively sputtered films of 180 to 500 nm, on silicon";
    assert_eq!(list.trim_end(), words);
}

#[test]
fn an_entry_is_told_whole() {
    let page = run(&["yttria", "--at", "550nm", "--at", "1064nm"]);
    insta::assert_snapshot!(page.stdout);
}

#[test]
fn a_spread_over_decades_is_drawn_by_decades() {
    let page = run(&["silicon"]).stdout;
    assert!(
        page.contains("\nk, logarithmic\n") && page.contains("1e-13") || page.contains("1e-10"),
        "{page}"
    );
    // The index of air is drawn nowhere: it is the same everywhere.
    assert!(!run(&["air"]).stdout.contains('*'));
}
