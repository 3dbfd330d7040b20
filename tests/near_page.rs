//! The generated page of near plans is up to date.

#[test]
#[ignore = "seventeen searches"]
fn the_page_is_what_its_first_line_makes() {
    let made = trysquare::hunt::near::page().unwrap();
    let kept = include_str!("../catalog/NEAR.md");
    if let Some((n, (a, b))) = made.lines().zip(kept.lines()).enumerate().find(|(_, (a, b))| a != b) {
        panic!("line {}: run the command of the first line\n made: {a}\n kept: {b}", n + 1);
    }
    assert_eq!(made.len(), kept.len(), "run the command of the first line");
    assert_eq!(made.lines().filter(|l| l.starts_with("| ") && l.as_bytes()[2].is_ascii_digit()).count(), 17);
}
