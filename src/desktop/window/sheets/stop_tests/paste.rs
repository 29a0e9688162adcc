//! A block of stops copied from a spreadsheet or a timer's list. It is taken whole or not at all.

use calc::limits::STOPPING_TIME;
use calc::units::Time;

use super::model::MOST_STOPS;

/// Whether a pasted text holds several entries, so that it fills cells instead of going into one.
pub fn is_block(text: &str) -> bool {
    entries(text).nth(1).is_some()
}

/// Reads the entries of a block: they stand apart by tabs, line ends, semicolons or spaces; point and comma are decimal marks.
///
/// # Errors
/// One line for each entry that is no stopping time, and one when the block is longer than the `room` there is.
pub fn read_block(text: &str, room: usize) -> Result<Vec<Time>, Vec<String>> {
    let mut stops = Vec::new();
    let mut refused = Vec::new();
    for (index, entry) in entries(text).enumerate() {
        match Time::parse(entry, &STOPPING_TIME.named("It")) {
            Ok(stop) => stops.push(stop),
            Err(refusal) => refused.push(format!("Entry {}. {refusal}", index + 1)),
        }
    }
    let count = stops.len() + refused.len();
    if count > room {
        refused.push(format!(
            "The block holds {count} entries. There is room for {room} more; a test holds at most {MOST_STOPS} stops. Paste fewer."
        ));
    }
    if refused.is_empty() { Ok(stops) } else { Err(refused) }
}

fn entries(text: &str) -> impl Iterator<Item = &str> {
    text.split(|c: char| c.is_whitespace() || c == ';').filter(|entry| !entry.is_empty())
}

#[cfg(test)]
mod tests {
    use super::*;

    fn us(counts: &[i64]) -> Result<Vec<Time>, Vec<String>> {
        Ok(counts.iter().map(|count| Time::from_base(*count)).collect())
    }

    #[test]
    fn entries_stand_apart_by_what_spreadsheets_use() {
        let read = |text| read_block(text, MOST_STOPS);
        assert_eq!(read("182\t185.5\t181"), us(&[182_000, 185_500, 181_000]));
        assert_eq!(read("182\r\n185,5\r\n181\r\n"), us(&[182_000, 185_500, 181_000]));
        assert_eq!(read("182;185,5; 181"), us(&[182_000, 185_500, 181_000]));
        assert_eq!(read(" 182  185.5 181 "), us(&[182_000, 185_500, 181_000]));
        assert!(is_block("182\t185") && is_block("182\n185") && !is_block(" 182 \n") && !is_block(""));
    }

    #[test]
    fn every_bad_entry_is_named_and_nothing_is_taken() {
        let refused = read_block("182\tn/a\t20000\t1,234.5", MOST_STOPS).unwrap_err();
        assert_eq!(refused.len(), 3);
        assert_eq!(
            refused[1],
            "Entry 3. It is 20000 ms. It must be from 1 to 10000 ms. Correct the entry, or measure again."
        );
        assert!(refused[0].starts_with("Entry 2. It is n/a.") && refused[2].starts_with("Entry 4. It is 1,234.5."));
    }

    #[test]
    fn a_block_longer_than_the_room_is_refused() {
        assert_eq!(read_block("182 183 184", 2).unwrap_err().len(), 1);
        assert!(read_block("182 183", 2).is_ok());
    }
}
