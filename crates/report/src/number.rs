//! Numbers as text: four significant digits, thousands separated, a true minus sign.

const MINUS: char = '\u{2212}';
const NARROW_SPACE: char = '\u{202f}';

/// Four significant digits, or all digits of the whole part where it has more; trailing zeros
/// dropped; powers of ten outside 0.0001 to a milliard.
///
/// ```
/// assert_eq!(hullward_report::number::short(1234.6), "1,235");
/// assert_eq!(hullward_report::number::short(-0.12345), "−0.1235");
/// ```
#[must_use]
pub fn short(value: f64) -> String {
    if !value.is_finite() {
        return infinite(value);
    }
    let size = value.abs();
    if size == 0.0 {
        return "0".to_owned();
    }
    if !(1e-4..1e9).contains(&size) {
        return scientific(value);
    }
    if is_whole(value) {
        return fixed(value, 0);
    }
    trimmed(fixed(value, decimals(size)))
}

/// The shortest text that reads back as the same number, thousands separated.
#[must_use]
pub fn full(value: f64) -> String {
    if value.is_finite() { signed_groups(&value.to_string()) } else { infinite(value) }
}

/// Ten significant digits, thousands separated: as much as two machines, or two codes, have in common.
///
/// ```
/// assert_eq!(hullward_report::number::ten_digits(44.0 / 3.0), "14.66666667");
/// ```
#[must_use]
pub fn ten_digits(value: f64) -> String {
    full(format!("{value:.9e}").parse().unwrap_or(value))
}

/// A number with a given count of decimals.
#[must_use]
pub fn fixed(value: f64, decimals: usize) -> String {
    signed_groups(&format!("{value:.decimals$}"))
}

/// A count, thousands separated.
#[must_use]
pub fn count(value: u64) -> String {
    signed_groups(&value.to_string())
}

/// A share as a percentage: three significant digits, "0 %" only for an exact 0.
#[must_use]
pub fn percent(share: f64) -> String {
    let hundred = share * 100.0;
    let size = hundred.abs();
    let text = if size == 0.0 {
        "0".to_owned()
    } else if size < 0.01 {
        return format!("< 0.01{NARROW_SPACE}%");
    } else if size < 10.0 {
        trimmed(fixed(hundred, 2))
    } else {
        fixed(hundred, usize::from(size < 100.0))
    };
    format!("{text}{NARROW_SPACE}%")
}

/// `number noun` with an s where the number is not 1: "1 node", "2 nodes".
#[must_use]
pub fn of(value: u64, noun: &str) -> String {
    let plural = if value == 1 { "" } else { "s" };
    format!("{} {noun}{plural}", count(value))
}

fn infinite(value: f64) -> String {
    let text = if value.is_nan() {
        "–"
    } else if value > 0.0 {
        "∞"
    } else {
        "−∞"
    };
    text.to_owned()
}

fn is_whole(value: f64) -> bool {
    let size = value.abs();
    let scale = if size > 1.0 { size } else { 1.0 };
    (value - value.round()).abs() <= 1e-9 * scale && value.round() != 0.0
}

/// Decimals that show four significant digits of a size in 0.0001 to a milliard.
fn decimals(size: f64) -> usize {
    let mut decimals = 3;
    let mut limit = 10.0;
    while decimals > 0 && size >= limit {
        decimals -= 1;
        limit *= 10.0;
    }
    let mut below = 1.0;
    while size < below && decimals < 7 {
        decimals += 1;
        below /= 10.0;
    }
    decimals
}

fn trimmed(mut text: String) -> String {
    if text.contains('.') {
        let kept = text.trim_end_matches('0').trim_end_matches('.').len();
        text.truncate(kept);
    }
    text
}

fn scientific(value: f64) -> String {
    let text = format!("{value:.3e}");
    let Some((mantissa, exponent)) = text.split_once('e') else { return text };
    let mantissa = trimmed(signed_groups(mantissa));
    let raised: String = exponent.chars().map(superscript).collect();
    format!("{mantissa} × 10{raised}")
}

fn superscript(digit: char) -> char {
    match digit {
        '-' => '⁻',
        '1' => '¹',
        '2' => '²',
        '3' => '³',
        '4' => '⁴',
        '5' => '⁵',
        '6' => '⁶',
        '7' => '⁷',
        '8' => '⁸',
        '9' => '⁹',
        _ => '⁰',
    }
}

/// Separates the thousands of a plain decimal text and sets the sign; "-0" loses its sign.
fn signed_groups(text: &str) -> String {
    let (negative, digits) = text.strip_prefix('-').map_or((false, text), |rest| (true, rest));
    let (whole, rest) =
        digits.find('.').map_or((digits, ""), |point| (&digits[..point], &digits[point..]));
    let mut out = String::with_capacity(text.len() + 8);
    if negative && digits.bytes().any(|digit| (b'1'..=b'9').contains(&digit)) {
        out.push(MINUS);
    }
    for (place, digit) in whole.char_indices() {
        if place > 0 && (whole.len() - place) % 3 == 0 {
            out.push(',');
        }
        out.push(digit);
    }
    out.push_str(rest);
    out
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn four_significant_digits() {
        for (value, text) in [
            (0.0, "0"),
            (-0.0, "0"),
            (152.0, "152"),
            (122.529_411, "122.5"),
            (0.118, "0.118"),
            (12_345.6, "12,346"),
            (-1_234_567.0, "−1,234,567"),
            (1.0 / 3.0, "0.3333"),
            (0.000_123_456, "0.0001235"),
            (1.5e12, "1.5 × 10¹²"),
            (-2e-7, "−2 × 10⁻⁷"),
            (f64::INFINITY, "∞"),
        ] {
            assert_eq!(short(value), text);
        }
    }

    #[test]
    fn full_and_fixed_keep_the_digits() {
        assert_eq!(full(-1_234.062_5), "−1,234.0625");
        assert_eq!(fixed(-0.000_1, 2), "0.00");
        assert_eq!(fixed(1000.0, 1), "1,000.0");
    }

    #[test]
    fn percentages_never_round_to_a_false_zero() {
        assert_eq!(percent(0.199), "19.9\u{202f}%");
        assert_eq!(percent(1.5), "150\u{202f}%");
        assert_eq!(percent(0.0), "0\u{202f}%");
        assert_eq!(percent(1e-6), "< 0.01\u{202f}%");
        assert_eq!(percent(0.0075), "0.75\u{202f}%");
    }

    #[test]
    fn nouns_agree_with_their_number() {
        assert_eq!(of(1, "node"), "1 node");
        assert_eq!(of(1200, "node"), "1,200 nodes");
    }

    proptest! {
        #[test]
        fn full_reads_back(value in -1e12f64..1e12) {
            let plain: String =
                full(value).chars().filter(|&c| c != ',').map(|c| if c == MINUS { '-' } else { c }).collect();
            let read: f64 = plain.parse().unwrap();
            prop_assert!(read == value);
        }

        #[test]
        fn short_is_within_a_thousandth(value in 1e-4f64..1e9) {
            let plain: String = short(value).chars().filter(|&c| c != ',').collect();
            let read: f64 = plain.parse().unwrap();
            prop_assert!((read - value).abs() <= value * 5.1e-4);
        }
    }
}
