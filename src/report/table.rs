//! Plain tables: no rules between rows, figures to the right.

use comfy_table::{CellAlignment, ColumnConstraint, ContentArrangement, Table, Width, presets};

/// A table without rules, the first column to the left and all others to the right, as wide as its content.
pub fn plain_table(
    header: impl IntoIterator<Item = impl Into<String>>,
    rows: impl IntoIterator<Item = Vec<String>>,
) -> String {
    aligned(base(header, rows)).trim_fmt()
}

/// The same within a width in characters: columns of figures alike, long headings broken, the first column never.
pub fn plain_table_within(
    width: u16,
    header: impl IntoIterator<Item = impl Into<String>>,
    rows: impl IntoIterator<Item = Vec<String>>,
) -> String {
    /// Room for a figure of eight characters with its padding.
    const LEAST: u16 = 10;
    /// Wider columns only spread the figures.
    const MOST: u16 = 18;
    let rows: Vec<_> = rows.into_iter().collect();
    let names = rows
        .iter()
        .filter_map(|row| row.first())
        .map(|name| name.chars().count());
    let first = u16::try_from(names.max().unwrap_or(0) + 2).unwrap_or(width);
    let mut table = base(header, rows);
    let figures = u16::try_from(table.column_count())
        .unwrap_or(1)
        .saturating_sub(1)
        .max(1);
    let each = (width.saturating_sub(first) / figures).clamp(LEAST, MOST);
    table
        .set_content_arrangement(ContentArrangement::Dynamic)
        .set_width(width);
    for (i, column) in table.column_iter_mut().enumerate() {
        let fixed = if i == 0 { first } else { each };
        column.set_constraint(ColumnConstraint::Absolute(Width::Fixed(fixed)));
    }
    aligned(table).trim_fmt()
}

fn base(
    header: impl IntoIterator<Item = impl Into<String>>,
    rows: impl IntoIterator<Item = Vec<String>>,
) -> Table {
    let mut table = Table::new();
    let header: Vec<String> = header.into_iter().map(Into::into).collect();
    table
        .load_style(presets::NOTHING)
        .set_header(header)
        .add_rows(rows);
    table
}

fn aligned(mut table: Table) -> Table {
    for column in table.column_iter_mut().skip(1) {
        column.set_cell_alignment(CellAlignment::Right);
    }
    table
}
