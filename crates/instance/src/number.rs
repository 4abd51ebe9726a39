//! Exact numbers from decimal text, and back.

use dashu_int::{IBig, UBig, ops::BitTest};
use dashu_ratio::RBig;

/// An exact rational number.
pub type Number = RBig;

/// Digits and powers of ten beyond this are refused: no table needs them.
const MAX_DIGITS: usize = 36;

/// Why a text is no number.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum NotNumber {
    /// It holds a decimal comma where decimals have a point.
    Comma,
    /// It holds a point where decimals have a comma.
    Point,
    /// It looks like a time of day or a duration.
    Clock,
    /// Its thousands are marked by blanks or apostrophes.
    Grouped,
    /// A number is followed by a word, as in `12 min`.
    Suffix,
    /// It has too many digits or too large a power of ten.
    TooLong,
    /// Anything else.
    Other,
}

impl NotNumber {
    /// How to mend it.
    pub(crate) fn mend(self) -> &'static str {
        match self {
            Self::Comma => "This table has decimal points: write a point, and no thousands marks.",
            Self::Point => "This table has decimal commas: write a comma, and no thousands marks.",
            Self::Clock => "Write a time as hours and minutes, 07:45, or as one number.",
            Self::Grouped => "Put marks between thousands only, as in 1 234, or leave them out.",
            Self::Suffix => "Write the number alone, without its unit.",
            Self::TooLong => "Write at most 36 digits and powers of ten up to 36.",
            Self::Other => "Write a number, or leave the cell blank where there is no drive.",
        }
    }
}

/// Reads a decimal number (`12`, `-1.5`, `.5`, `2e3`), also with marks between its thousands
/// (`1'234.5`), a fraction (`1/3`), or a clock time, in minutes (`07:45`, `1:30:30`), exactly.
pub(crate) fn parse(text: &str, decimal_comma: bool) -> Result<Number, NotNumber> {
    let (negative, body) = sign(text);
    let point = if decimal_comma { b',' } else { b'.' };
    let magnitude = match body.split_once('/') {
        Some((above, below)) => fraction(above, below)?,
        None => match decimal(body, point) {
            Err(why @ NotNumber::Clock) => clock(body).ok_or(why)?,
            Err(why @ (NotNumber::Grouped | NotNumber::Comma | NotNumber::Point)) => {
                decimal(&ungrouped(body, char::from(point)).ok_or(why)?, b'.')?
            }
            plain => plain?,
        },
    };
    Ok(if negative { -magnitude } else { magnitude })
}

/// How a text that reads as a number was read otherwise than as it stands.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Habit {
    /// A clock time, in minutes.
    Clock,
    /// With marks between thousands.
    Thousands,
}

/// Whether a text that reads as a number is one only by habit.
pub(crate) fn habit(text: &str, decimal_comma: bool) -> Option<Habit> {
    let plain = |byte: u8| byte.is_ascii_digit() || byte == b'-';
    if text.bytes().all(plain) || text.contains('/') {
        return None;
    }
    let point = if decimal_comma { b',' } else { b'.' };
    match decimal(sign(text).1, point) {
        Err(NotNumber::Clock) => Some(Habit::Clock),
        Err(_) => Some(Habit::Thousands),
        Ok(_) => None,
    }
}

/// Hours and minutes, and perhaps seconds, in minutes.
fn clock(body: &str) -> Option<Number> {
    let parts: Vec<&str> = body.split(':').collect();
    let two = |part: &str| whole(part).filter(|&n| part.len() == 2 && n < 60);
    let (hours, rest) = parts.split_first()?;
    let minutes = whole(hours).filter(|_| hours.len() < 4)? * 60 + two(rest.first()?)?;
    match rest {
        [_] => Some(Number::from(minutes)),
        [_, seconds] => {
            Some(RBig::from_parts(IBig::from(minutes * 60 + two(seconds)?), UBig::from(60_u8)))
        }
        _ => None,
    }
}

/// A number without the marks between its thousands, with a decimal point. Where the mark is
/// that of decimals it must stand twice.
fn ungrouped(body: &str, point: char) -> Option<String> {
    let mark = body.chars().find(|c| !c.is_ascii_digit())?;
    let (whole, part) = match body.split_once(point) {
        Some(split) if mark != point => split,
        _ => (body, ""),
    };
    let mut groups = whole.split(mark);
    let first = groups.next().filter(|first| (1..=3).contains(&first.len()))?;
    let rest: Vec<&str> = groups.collect();
    let three = |group: &&str| group.len() == 3 && group.bytes().all(|b| b.is_ascii_digit());
    let marks = " '’\u{a0}\u{202f},.";
    let fit = marks.contains(mark)
        && rest.len() > usize::from(mark == point)
        && rest.iter().all(three)
        && part.bytes().all(|byte| byte.is_ascii_digit());
    fit.then(|| format!("{first}{}.{part}", rest.concat()))
}

fn sign(text: &str) -> (bool, &str) {
    for (mark, negative) in [("-", true), ("\u{2212}", true), ("+", false)] {
        if let Some(rest) = text.strip_prefix(mark) {
            return (negative, rest);
        }
    }
    (false, text)
}

fn fraction(above: &str, below: &str) -> Result<Number, NotNumber> {
    let above = whole(above).ok_or(NotNumber::Other)?;
    let below = whole(below).ok_or(NotNumber::Other)?;
    if below == 0 {
        return Err(NotNumber::Other);
    }
    Ok(RBig::from_parts(IBig::from(above), UBig::from(below)))
}

fn whole(text: &str) -> Option<u128> {
    let digits = !text.is_empty() && text.bytes().all(|byte| byte.is_ascii_digit());
    if digits && text.len() <= MAX_DIGITS { text.parse().ok() } else { None }
}

fn decimal(body: &str, point: u8) -> Result<Number, NotNumber> {
    let bytes = body.as_bytes();
    let (mut value, mut digits, mut places, mut at) = (0_u128, 0_usize, None, 0_usize);
    while at < bytes.len() {
        match bytes[at] {
            byte if byte.is_ascii_digit() => {
                digits += 1;
                places = places.map(|count: usize| count + 1);
                if digits <= MAX_DIGITS {
                    value = value * 10 + u128::from(byte - b'0');
                }
            }
            byte if byte == point && places.is_none() => places = Some(0),
            b'e' | b'E' if digits > 0 => break,
            _ => return Err(reason(body, point)),
        }
        at += 1;
    }
    if digits == 0 {
        return Err(NotNumber::Other);
    }
    let exponent = if at < bytes.len() { exponent(&body[at + 1..])? } else { 0 };
    if digits > MAX_DIGITS {
        return Err(NotNumber::TooLong);
    }
    let places = i32::try_from(places.unwrap_or(0)).map_err(|_| NotNumber::TooLong)?;
    Ok(scaled(value, exponent - places))
}

fn exponent(text: &str) -> Result<i32, NotNumber> {
    let (negative, digits) = sign(text);
    if digits.is_empty() || !digits.bytes().all(|byte| byte.is_ascii_digit()) {
        return Err(NotNumber::Other);
    }
    match digits.parse::<i32>() {
        Ok(value) if value <= 36 => Ok(if negative { -value } else { value }),
        _ => Err(NotNumber::TooLong),
    }
}

/// `value` times ten to the power `power`.
fn scaled(value: u128, power: i32) -> Number {
    let factor = UBig::from(10_u8).pow(power.unsigned_abs() as usize);
    if power < 0 {
        RBig::from_parts(IBig::from(value), factor)
    } else {
        RBig::from(IBig::from(value) * IBig::from(factor))
    }
}

/// Why `body`, which does not read as a decimal, might be thought a number.
fn reason(body: &str, point: u8) -> NotNumber {
    let begins = body.starts_with(|c: char| c.is_ascii_digit());
    let only = |marks: &str| body.chars().all(|c| c.is_ascii_digit() || marks.contains(c));
    if begins && only(":") {
        NotNumber::Clock
    } else if begins && only(" '’\u{a0}\u{202f},.") && !only(",.") {
        NotNumber::Grouped
    } else if begins && only(",.") && (body.contains(',') || body.contains('.')) && point == b'.' {
        NotNumber::Comma
    } else if begins && only(",.") && (body.contains('.') || body.contains(',')) && point == b',' {
        NotNumber::Point
    } else if begins && body.contains(char::is_alphabetic) {
        NotNumber::Suffix
    } else {
        NotNumber::Other
    }
}

/// The sum of numbers; none where their fractions have too little in common to be worth adding.
pub(crate) fn total<'n>(numbers: impl IntoIterator<Item = &'n Number>) -> Option<Number> {
    numbers.into_iter().try_fold(RBig::ZERO, plus)
}

/// A sum and a further number, as [`total`] adds.
pub(crate) fn plus(sum: Number, number: &Number) -> Option<Number> {
    const MOST_BITS: usize = 512;
    let sum = sum + number;
    (sum.denominator().bit_len() <= MOST_BITS).then_some(sum)
}

/// That sum as text.
pub(crate) fn total_text<'n>(numbers: impl IntoIterator<Item = &'n Number>) -> String {
    sum_text(total(numbers).as_ref())
}

/// A sum as text, where there is one.
pub(crate) fn sum_text(sum: Option<&Number>) -> String {
    sum.map_or_else(|| "(a long fraction)".to_owned(), number_text)
}

/// A number as text that reads back as the same: a decimal where it ends, else a fraction.
#[must_use]
pub fn number_text(number: &Number) -> String {
    let (mut places, mut power) = (0_usize, UBig::ONE);
    while places <= MAX_DIGITS {
        if (&power % number.denominator()).is_zero() {
            return decimal_text(number, &power, places);
        }
        power *= UBig::from(10_u8);
        places += 1;
    }
    number.to_string()
}

fn decimal_text(number: &Number, power: &UBig, places: usize) -> String {
    let scaled = number.numerator() * IBig::from(power / number.denominator());
    let text = scaled.to_string();
    let (minus, digits) = text.strip_prefix('-').map_or(("", text.as_str()), |rest| ("-", rest));
    if places == 0 {
        return format!("{minus}{digits}");
    }
    let padded = format!("{digits:0>width$}", width = places + 1);
    let (whole, part) = padded.split_at(padded.len() - places);
    format!("{minus}{whole}.{part}")
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn decimals_are_exact() {
        let tenth = RBig::from_parts(1.into(), 10_u8.into());
        assert_eq!(parse("0.1", false), Ok(tenth.clone()));
        assert_eq!(parse("0,1", true), Ok(tenth.clone()));
        assert_eq!(parse("+.10", false), Ok(tenth.clone()));
        assert_eq!(parse("1e-1", false), Ok(tenth));
        assert_eq!(parse("\u{2212}2.5E1", false), Ok(RBig::from(-25)));
        assert_eq!(parse("5.", false), Ok(RBig::from(5)));
        assert_eq!(parse("-0", false), Ok(RBig::ZERO));
        assert_eq!(parse("-2/4", false), Ok(-RBig::from_parts(1.into(), 2_u8.into())));
    }

    #[test]
    fn what_is_no_number_says_why() {
        assert_eq!(parse("1,5", false), Err(NotNumber::Comma));
        assert_eq!(parse("1.5", true), Err(NotNumber::Point));
        assert_eq!(parse("1:75", false), Err(NotNumber::Clock));
        assert_eq!(parse("12min", false), Err(NotNumber::Suffix));
        assert_eq!(parse("1'23.5", false), Err(NotNumber::Grouped));
        assert_eq!(parse("12\u{a0}34", false), Err(NotNumber::Grouped));
        for text in ["", ".", "-", "e5", "1e", "1/0", "1/", "--1", "Ash", "٣"] {
            assert_eq!(parse(text, false), Err(NotNumber::Other), "{text}");
        }
        assert_eq!(parse(&"9".repeat(37), false), Err(NotNumber::TooLong));
        assert_eq!(parse("1e99", false), Err(NotNumber::TooLong));
        assert_eq!(parse("1e99999999999", false), Err(NotNumber::TooLong));
    }

    /// Thousands were once refused with the advice to leave the marks out, and times with the
    /// advice to write minutes.
    #[test]
    fn thousands_and_clock_times() {
        let exact = Number::from_parts(2469.into(), 2_u8.into());
        for (text, comma) in [
            ("1 234,5", true),
            ("1.234,5", true),
            ("1,234.5", false),
            ("1'234.5", false),
            ("1\u{202f}234.5", false),
            ("1234.5", false),
        ] {
            assert_eq!(parse(text, comma), Ok(exact.clone()), "{text}");
        }
        assert_eq!(parse("1.234.567", false), Ok(Number::from(1_234_567)));
        assert_eq!(parse("-1,234", false), Ok(Number::from(-1234)));
        assert_eq!(parse("1,234", true), Ok(Number::from_parts(617.into(), 500_u16.into())));
        for text in ["1,23", "1234,567.8", "1,234,56", "1 234'567", ",234", "1,2345"] {
            assert!(parse(text, false).is_err(), "{text}");
        }
        assert_eq!(parse("07:45", false), Ok(Number::from(465)));
        assert_eq!(parse("1:30:30", true), Ok(Number::from_parts(181.into(), 2_u8.into())));
        for text in ["7:5", "24:60", "1:2:3", ":30", "1:30:", "1:30:30:30", "1000:00"] {
            assert!(parse(text, false).is_err(), "{text}");
        }
    }

    #[test]
    fn texts_are_short() {
        for text in ["0", "-7", "12.5", "-0.05", "1/3", "1000"] {
            assert_eq!(number_text(&parse(text, false).unwrap()), text);
        }
    }

    proptest! {
        #[test]
        fn print_then_read(above in any::<i64>(), below in 1_u64..1_000_000) {
            let number = RBig::from_parts(above.into(), below.into());
            prop_assert_eq!(parse(&number_text(&number), false), Ok(number));
        }

        #[test]
        fn nothing_panics(text in "\\PC{0,40}", comma in any::<bool>()) {
            let _ = parse(&text, comma);
        }
    }
}
