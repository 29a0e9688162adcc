//! Rule sets against laws, standards and guides: published figures and arithmetic on published formulas, one row each.
//!
//! A row has a name with its inputs, the expected figure as printed, a tolerance (half a unit of the last printed digit unless
//! it says otherwise), its source, and how well that source is known. `../README.md` says what was left out and why.

mod ansi_b11_19;
mod case;
mod dguv;
mod east_asia;
mod exact;
mod iso_13855_2010;
mod iso_13855_2024;
mod iso_13857;
mod osha_chart;
mod psdi;
mod reaching_over;
mod row;
mod table_o10;
mod us_1910_217;
mod wac_296_806;

use row::Row;

fn all() -> Vec<Row> {
    [
        us_1910_217::rows(),
        table_o10::rows(),
        wac_296_806::rows(),
        osha_chart::rows(),
        psdi::rows(),
        ansi_b11_19::rows(),
        iso_13855_2010::rows(),
        reaching_over::rows(),
        iso_13855_2024::rows(),
        iso_13857::rows(),
        dguv::rows(),
        east_asia::rows(),
    ]
    .concat()
}

#[test]
fn every_row_agrees_with_its_source() {
    let wrong: Vec<String> = all().iter().filter_map(Row::disagreement).collect();
    assert!(wrong.is_empty(), "{} rows disagree:\n{}", wrong.len(), wrong.join("\n"));
}

/// Rows may be added; taking one away needs a reason in the README and a change here.
#[test]
fn the_number_of_rows_only_grows() {
    let count = all().len();
    assert!(count >= 1391, "only {count} rows are left");
}

#[test]
fn every_row_names_its_source_and_has_a_name_of_its_own() {
    let rows = all();
    for row in &rows {
        assert!(
            !row.source.is_empty() && row::BASES.contains(&row.basis),
            "{}: {} / {}",
            row.name,
            row.source,
            row.basis
        );
    }
    let mut names: Vec<(&str, &str)> = rows.iter().map(|row| (row.source, row.name.as_str())).collect();
    names.sort_unstable();
    let twice: Vec<_> = names.windows(2).filter(|pair| pair[0] == pair[1]).collect();
    assert!(twice.is_empty(), "the same row stands twice: {twice:?}");
}
