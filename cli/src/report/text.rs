//! The report a person reads, on the terminal and as `report.txt`.

mod page;
mod parts;
mod series;
#[cfg(test)]
mod tests;

use crate::case::Case;

use self::page::Page;
use super::json::Report;

/// Width of wrapped text, characters.
const WIDTH: usize = 100;

/// The whole report as text, with a line feed at its end.
pub fn report(case: &Case, report: &Report) -> String {
    let mut page = Page::new(WIDTH);
    page.title(&report.title);
    page.paragraph(&format!(
        "coilwright {}, {} field, {} °C. A number is followed by its range, (low .. high), estimated from a pair \
         of nested meshes; a number without a range follows from the drawing and the data alone. Forces and \
         fields that are positive point up (+z) or outward (+r); positive currents run into the page right of \
         the axis.",
        report.version, report.regime, case.temperature_c
    ));
    parts::solved(&mut page, case, report);
    series::travel(&mut page, case, report);
    series::linkage(&mut page, report);
    if let Some(outcome) = report.results.get(report.shown) {
        parts::windings(&mut page, case, outcome);
        parts::inductance(&mut page, outcome);
        parts::energy(&mut page, outcome);
        parts::forces(&mut page, outcome);
        parts::regions(&mut page, case, outcome);
        parts::magnets(&mut page, case, outcome);
        parts::stray(&mut page, case, outcome);
        parts::traverses(&mut page, case, outcome);
        parts::search_coils(&mut page, outcome);
    }
    parts::accuracy(&mut page, report);
    parts::cautions(&mut page, report);
    page.finish()
}

/// The lines that tell where the files went.
pub fn files(paths: &[std::path::PathBuf]) -> String {
    let mut page = Page::new(WIDTH);
    page.section("Files");
    for path in paths {
        page.line(&path.display().to_string());
    }
    page.finish()
}
