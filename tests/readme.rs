//! The README prints the checking script as it is.

#[test]
fn the_script_in_the_readme_is_the_one_in_tests() {
    let (readme, script) = (include_str!("../README.md"), include_str!("check.py"));
    assert!(readme.contains(&format!("```python\n{script}```")), "copy tests/check.py into README.md");
    assert!(script.lines().count() <= 30);
}
