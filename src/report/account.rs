//! The household's account as text: bills by period, and what the meters should read.

use std::fmt::Write as _;

use comfy_table::{CellAlignment, Table, presets};
use rust_decimal::Decimal;

use super::table::plain_table;
use crate::answer::{Estimate, MeterAnswer};
use crate::bill::{Bill, Charge, Line};
use crate::locale::MONTHS;
use crate::study::AccountBill;
use crate::units::Currency;

/// A bill as a table: by period every line with quantity, rate and amount, and what is to pay.
pub fn bill_table(bill: &Bill) -> String {
    let mut table = Table::new();
    table.load_style(presets::NOTHING).set_header([
        "bill",
        "what",
        "quantity",
        "",
        "rate",
        bill.currency.code(),
    ]);
    let bills: Vec<_> = bill.lines.chunk_by(|a, b| a.period == b.period).collect();
    for lines in &bills {
        let mut period = lines
            .first()
            .map_or(String::new(), |line| line.period.to_string());
        for line in *lines {
            table.add_row([
                &std::mem::take(&mut period),
                &line.what,
                &line.quantity.round_dp(2).to_string(),
                &line.unit,
                &rate(line, bill.currency),
                &line.amount.to_string(),
            ]);
        }
        let sum: Decimal = lines.iter().map(|line| line.amount).sum();
        let sum = bill.currency.round(sum).to_string();
        table.add_row(["", "to pay", "", "", "", &sum]);
    }
    if bills.len() > 1 {
        let total = bill.total().to_string();
        table.add_row(["all", "to pay", "", "", "", &total]);
    }
    for index in [2, 4, 5] {
        if let Some(column) = table.column_mut(index) {
            column.set_cell_alignment(CellAlignment::Right);
        }
    }
    table.to_string()
}

fn rate(line: &Line, currency: Currency) -> String {
    if line.charge == Charge::Tax {
        let percent = (line.rate * Decimal::ONE_HUNDRED).normalize();
        return format!("{percent} %");
    }
    let per = line.unit.strip_suffix('s').unwrap_or(&line.unit);
    currency.price_words(line.rate, per)
}

/// The bills of every system, and after each what its meters should read. The bills stand in the order of the systems.
pub fn accounts_text(estimate: &Estimate, bills: &[Vec<AccountBill>]) -> String {
    let mut text = String::new();
    for (system, bills) in estimate.systems.iter().zip(bills) {
        // Writing to a String cannot fail.
        let _ = writeln!(text, "Bills: {}", system.label);
        for account in bills {
            let _ = writeln!(
                text,
                "\n{} ({})\n{}",
                account.tariff,
                account.fuel,
                bill_table(&account.bill)
            );
        }
        for meter in &system.meters {
            let _ = writeln!(
                text,
                "\nWhat the {} meter should read, kWh bought: {}\n{}",
                meter.fuel,
                meter.basis,
                meter_table(meter)
            );
        }
        let _ = writeln!(text);
    }
    text
}

fn meter_table(meter: &MeterAnswer) -> String {
    let rows = meter.months.iter().map(|month| {
        let name = MONTHS.get(month.month.wrapping_sub(1)).unwrap_or(&"");
        vec![
            (*name).to_owned(),
            format!("{:.0}", month.low_kwh),
            format!("{:.0}", month.likely_kwh),
            format!("{:.0}", month.high_kwh),
        ]
    });
    plain_table(["", "from", "likely", "to"], rows)
}
