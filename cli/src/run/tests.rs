use crate::status::Status;

fn status(words: &[&str]) -> Status {
    super::program(std::iter::once("coilwright").chain(words.iter().copied()))
}

#[test]
fn wrong_words_are_status_2() {
    assert_eq!(status(&["solv"]), Status::Wrong);
    assert_eq!(status(&["solve"]), Status::Wrong);
    assert_eq!(status(&["solve", "/nowhere/no-such-case.toml"]), Status::Wrong);
    assert_eq!(status(&["stock", "no-such-material"]), Status::Wrong);
}

#[test]
fn what_is_not_built_yet_says_so() {
    assert_eq!(status(&["sweep", "a.toml"]), Status::Wrong);
    assert_eq!(status(&["gather", "a", "--out", "b.csv"]), Status::Wrong);
}

#[test]
fn help_is_no_failure() {
    assert_eq!(status(&["--help"]), Status::Done);
    assert_eq!(status(&["--version"]), Status::Done);
}
