//! Exact numbers from decimal text, and decimal text from exact numbers.

use dashu_int::{IBig, UBig, ops::Abs};

use crate::Number;

/// The most digits that are read, and written without rounding.
const MOST_DIGITS: usize = 60;
/// Powers of ten beyond this are refused, or infinite where a side or bound may be.
const MOST_POWER: i32 = 100;

/// A number as it stands in a text.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) enum Value {
    Finite(Number),
    /// −∞, also anything at most −10¹⁰⁰.
    Below,
    /// +∞, also anything of 10¹⁰⁰ or more.
    Above,
}

/// Why a text is no number.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum NotNumber {
    /// More digits than are read, or nearer to zero than a power of ten allows.
    TooLong,
    /// Anything else.
    Other,
}

/// Reads `12`, `-1.5`, `.5`, `5.`, `2e3`, `2D3`, `inf`, `-Infinity`, exactly.
pub(super) fn parse(text: &str) -> Result<Value, NotNumber> {
    let (negative, body) = sign(text);
    if body.eq_ignore_ascii_case("inf") || body.eq_ignore_ascii_case("infinity") {
        return Ok(if negative { Value::Below } else { Value::Above });
    }
    let (mantissa, exponent) = match body.find(['e', 'E', 'd', 'D']) {
        Some(at) => (&body[..at], exponent(&body[at + 1..])?),
        None => (body, 0),
    };
    let (whole, fraction) = mantissa.split_once('.').unwrap_or((mantissa, ""));
    let digits: String = [whole, fraction].concat();
    if digits.is_empty() || !digits.bytes().all(|byte| byte.is_ascii_digit()) {
        return Err(NotNumber::Other);
    }
    let significant = digits.trim_start_matches('0');
    if significant.is_empty() {
        return Ok(Value::Finite(Number::ZERO));
    }
    let places = i32::try_from(fraction.len()).map_err(|_| NotNumber::TooLong)?;
    let power = exponent.saturating_sub(places);
    let size = i32::try_from(significant.len()).map_err(|_| NotNumber::TooLong)?;
    if power.saturating_add(size) > MOST_POWER {
        return Ok(if negative { Value::Below } else { Value::Above });
    }
    scaled(significant, negative, power).map(Value::Finite)
}

fn sign(text: &str) -> (bool, &str) {
    match text.strip_prefix('-') {
        Some(rest) => (true, rest),
        None => (false, text.strip_prefix('+').unwrap_or(text)),
    }
}

/// A power of ten; those too large for an `i32` saturate.
fn exponent(text: &str) -> Result<i32, NotNumber> {
    let (negative, digits) = sign(text);
    if digits.is_empty() || !digits.bytes().all(|byte| byte.is_ascii_digit()) {
        return Err(NotNumber::Other);
    }
    let size = digits.parse::<i32>().unwrap_or(i32::MAX);
    Ok(if negative { -size } else { size })
}

/// ± digits · 10^power.
fn scaled(digits: &str, negative: bool, power: i32) -> Result<Number, NotNumber> {
    let kept = digits.trim_end_matches('0');
    let zeros = i32::try_from(digits.len() - kept.len()).map_err(|_| NotNumber::TooLong)?;
    let power = power.saturating_add(zeros);
    if kept.len() > MOST_DIGITS || power < -2 * MOST_POWER {
        return Err(NotNumber::TooLong);
    }
    let magnitude: UBig = kept.parse().map_err(|_| NotNumber::Other)?;
    let magnitude = IBig::from(magnitude);
    let whole = if negative { -magnitude } else { magnitude };
    Ok(if power < 0 {
        Number::from_parts(whole, ten_to(power))
    } else {
        Number::from(whole * IBig::from(ten_to(power)))
    })
}

/// 10^|power|.
fn ten_to(power: i32) -> UBig {
    UBig::from(10_u8).pow(power.unsigned_abs() as usize)
}

/// A number as decimal text.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Decimal {
    pub(super) text: String,
    /// Whether the text is not the number itself but the nearest of 17 significant digits.
    pub(super) rounded: bool,
}

/// The decimal text of a number: exact where it ends within 60 digits, else rounded to 17
/// significant digits. `None` for 10¹⁰⁰ or more, or under 10⁻¹⁰⁰, in magnitude.
pub(super) fn decimal(number: &Number) -> Option<Decimal> {
    if number.is_zero() {
        return Some(Decimal { text: "0".to_owned(), rounded: false });
    }
    let limit = Number::from(ten_to(MOST_POWER));
    let size = if *number < Number::ZERO { -number.clone() } else { number.clone() };
    if size >= limit || size * limit < Number::ONE {
        return None;
    }
    let minus = if *number < Number::ZERO { "-" } else { "" };
    let (digits, power, rounded) = match exact(number) {
        Some((digits, power)) => (digits, power, false),
        None => {
            let (digits, power) = nearest(number);
            (digits, power, true)
        }
    };
    Some(Decimal { text: format!("{minus}{}", place_point(&digits, power)), rounded })
}

/// The digits of |number| and their power of ten, if it ends within the digits allowed.
fn exact(number: &Number) -> Option<(String, i32)> {
    let (mut rest, mut twos, mut fives) = (number.denominator().clone(), 0_i32, 0_i32);
    for (factor, times) in [(2_u8, &mut twos), (5_u8, &mut fives)] {
        let factor = UBig::from(factor);
        while (&rest % &factor).is_zero() && *times < 3 * MOST_POWER {
            rest /= &factor;
            *times += 1;
        }
    }
    let places = if twos > fives { twos } else { fives };
    if rest != UBig::ONE || places > 2 * MOST_POWER {
        return None;
    }
    let scale = ten_to(places) / number.denominator();
    let text = (number.numerator().abs() * IBig::from(scale)).to_string();
    trimmed(&text, -places)
}

/// Digits without the zeros at their end, if there are no more than allowed.
fn trimmed(digits: &str, power: i32) -> Option<(String, i32)> {
    let kept = digits.trim_end_matches('0');
    let zeros = i32::try_from(digits.len() - kept.len()).ok()?;
    (kept.len() <= MOST_DIGITS).then(|| (kept.to_owned(), power + zeros))
}

/// The 17 significant digits nearest to |number| and their power of ten.
fn nearest(number: &Number) -> (String, i32) {
    let above: UBig = number.numerator().abs().try_into().unwrap_or(UBig::ZERO);
    let below = number.denominator();
    let length = |n: &UBig| i32::try_from(n.to_string().len()).unwrap_or(i32::MAX);
    let mut shift = 17 - (length(&above) - length(below));
    loop {
        let (top, bottom) = if shift >= 0 {
            (&above * ten_to(shift), below.clone())
        } else {
            (above.clone(), below * ten_to(shift))
        };
        let twice = UBig::from(2_u8);
        let digits = (&top * &twice + &bottom) / (&bottom * &twice);
        let text = digits.to_string();
        if text.len() <= 17 || text.trim_end_matches('0').len() == 1 {
            let kept = text.trim_end_matches('0');
            let zeros = i32::try_from(text.len() - kept.len()).unwrap_or(0);
            return (kept.to_owned(), zeros - shift);
        }
        shift -= 1;
    }
}

/// Digits · 10^power as text: plain where it is short, else with an exponent.
fn place_point(digits: &str, power: i32) -> String {
    let length = i32::try_from(digits.len()).unwrap_or(i32::MAX);
    let zeros = |count: i32| "0".repeat(usize::try_from(count).unwrap_or(0));
    let point = length + power;
    if (0..=12).contains(&power) {
        format!("{digits}{}", zeros(power))
    } else if power < 0 && point > 0 {
        let (whole, part) = digits.split_at(usize::try_from(point).unwrap_or(0));
        format!("{whole}.{part}")
    } else if power < 0 && point > -6 {
        format!("0.{}{digits}", zeros(-point))
    } else {
        format!("{digits}e{power}")
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn finite(text: &str) -> Number {
        match parse(text) {
            Ok(Value::Finite(number)) => number,
            other => panic!("{text}: {other:?}"),
        }
    }

    #[test]
    fn decimals_are_exact() {
        let tenth = Number::from_parts(1.into(), 10_u8.into());
        for text in ["0.1", "+.1", ".10", "1e-1", "1D-1", "10.E-2", "0.01e+1"] {
            assert_eq!(finite(text), tenth, "{text}");
        }
        assert_eq!(finite("-5."), Number::from(-5));
        assert_eq!(finite("-0.000"), Number::ZERO);
        assert_eq!(finite("0e9999999999"), Number::ZERO);
        assert_eq!(finite("1e99"), Number::from(ten_to(99)));
    }

    #[test]
    fn what_is_no_number_says_so() {
        for text in ["", ".", "-", "e5", "1e", "1.2.3", "--1", "1,5", "0x10", "nan", "٣", "1e1.5"]
        {
            assert_eq!(parse(text), Err(NotNumber::Other), "{text}");
        }
        assert_eq!(parse(&"9".repeat(61)), Err(NotNumber::TooLong));
        assert_eq!(parse("1e-201"), Err(NotNumber::TooLong));
    }

    #[test]
    fn infinities_are_words_or_huge() {
        for text in ["inf", "+Infinity", "1e100", "1e999999999999", "1.7976931348623157e+308"] {
            assert_eq!(parse(text), Ok(Value::Above), "{text}");
        }
        assert_eq!(parse("-INF"), Ok(Value::Below));
    }

    #[test]
    fn texts_are_short() {
        for text in ["0", "-7", "12.5", "-0.05", "1000", "0.00001", "1e-50", "3e60"] {
            let decimal = decimal(&finite(text)).unwrap();
            assert_eq!((decimal.text.as_str(), decimal.rounded), (text, false));
        }
    }

    #[test]
    fn what_does_not_end_is_rounded_to_17_digits() {
        let third = Number::from_parts(1.into(), 3_u8.into());
        let written = decimal(&third).unwrap();
        assert_eq!(written, Decimal { text: "0.33333333333333333".to_owned(), rounded: true });
        let nearly = Number::ONE - third * Number::from_parts(1.into(), ten_to(30));
        assert_eq!(decimal(&nearly).unwrap().text, "1");
        assert_eq!(decimal(&Number::from(ten_to(100))), None);
    }

    proptest! {
        #[test]
        fn print_then_read(digits in any::<i128>(), power in -60_i32..60) {
            let scale = Number::from(ten_to(power));
            let whole = Number::from(digits);
            let number = if power < 0 { whole / scale } else { whole * scale };
            let written = decimal(&number).unwrap();
            prop_assert!(!written.rounded);
            prop_assert_eq!(parse(&written.text), Ok(Value::Finite(number)));
        }

        #[test]
        fn rounding_is_within_half_a_unit_of_the_last_digit(
            above in 1_u64..u64::MAX,
            below in 1_u64..u64::MAX,
        ) {
            let number = Number::from_parts(above.into(), below.into());
            let read = finite(&decimal(&number).unwrap().text);
            let off = if read > number { read - &number } else { &number - read };
            prop_assert!(off * Number::from(ten_to(16)) * Number::from(2) <= number);
        }

        #[test]
        fn nothing_panics(text in "\\PC{0,40}") {
            let _ = parse(&text);
        }
    }
}
