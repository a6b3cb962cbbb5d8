//! Nearest known names, for "did you mean".

/// Most known names that a message lists.
const FEW: usize = 12;

/// The known name nearest to `name`, if any is near enough to be meant.
pub fn nearest<'a>(name: &str, known: impl IntoIterator<Item = &'a str>) -> Option<&'a str> {
    let allowed = (name.chars().count() / 3).max(1);
    // A swapped pair counts once; case counts for nothing; units differ by case only, so case breaks ties.
    known
        .into_iter()
        .map(|candidate| {
            let loose = strsim::damerau_levenshtein(&name.to_lowercase(), &candidate.to_lowercase());
            let exact = strsim::damerau_levenshtein(name, candidate);
            (loose, exact, candidate)
        })
        .filter(|(loose, ..)| *loose <= allowed)
        .min_by_key(|(loose, exact, _)| (*loose, *exact))
        .map(|(.., candidate)| candidate)
}

/// Up to three known names near to `name`, the nearest first, as words: `` `mm`, `min` or `mN` ``.
pub fn several_near<'a>(name: &str, known: impl IntoIterator<Item = &'a str>) -> Option<String> {
    let allowed = (name.chars().count() / 3).max(1);
    let mut near: Vec<(usize, &str)> = known
        .into_iter()
        .map(|candidate| (strsim::damerau_levenshtein(name, candidate), candidate))
        .filter(|(distance, candidate)| *distance <= allowed || candidate.eq_ignore_ascii_case(name))
        .collect();
    // Stable: of equally near ones the earlier known goes first.
    near.sort_by_key(|(distance, _)| *distance);
    let words: Vec<String> = near
        .iter()
        .take(3)
        .map(|(_, candidate)| format!("`{candidate}`"))
        .collect();
    match words.as_slice() {
        [] => None,
        [only] => Some(only.clone()),
        [first @ .., last] => Some(format!("{} or {last}", first.join(", "))),
    }
}

/// Help for an unknown name: the nearest known one, and all known ones when they are few. `what` is their plural.
pub fn known_names_help<'a>(name: &str, known: impl IntoIterator<Item = &'a str>, what: &str) -> String {
    let known: Vec<&str> = known.into_iter().collect();
    let near = nearest(name, known.iter().copied());
    let listed = match known.len() {
        0 => format!("there are no {what}"),
        1..=FEW => format!("known {what}: {}", known.join(", ")),
        many => format!("there are {many} {what}"),
    };
    match near {
        Some(near) => format!("did you mean `{near}`? ({listed})"),
        None => listed,
    }
}
