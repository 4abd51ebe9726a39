//! Decimal text to an exact number.

use dashu_int::{IBig, UBig};
use model::Number;

/// The exact value of `digits`, `digits.digits` or either with an exponent; `None` when it has
/// more than 400 digits, written out without its exponent.
pub(crate) fn number(text: &str) -> Option<Number> {
    let (mantissa, exponent) = text.split_once(['e', 'E']).unwrap_or((text, "0"));
    let (whole, fraction) = mantissa.split_once('.').unwrap_or((mantissa, ""));
    if whole.len() + fraction.len() > 400 {
        return None;
    }
    let exponent: i32 = exponent.parse().ok().filter(|e: &i32| e.abs() <= 400)?;
    let digits = format!("{whole}{fraction}");
    let significant = digits.trim_start_matches('0').len();
    let digits: UBig = digits.parse().ok()?;
    let shift = exponent - i32::try_from(fraction.len()).ok()?;
    let places = usize::try_from(shift.unsigned_abs()).ok()?;
    let written = if shift < 0 { significant.max(places + 1) } else { significant + places };
    if written > 400 {
        return None;
    }
    let power = UBig::from(10_u32).pow(places);
    Some(if shift < 0 {
        Number::from_parts(IBig::from(digits), power)
    } else {
        Number::from(digits * power)
    })
}

#[cfg(test)]
mod tests {
    use super::number;
    use model::Number;

    #[test]
    fn decimals_are_exact() {
        let fraction = |a: i32, b: u32| Number::from_parts(a.into(), b.into());
        assert_eq!(number("0.1"), Some(fraction(1, 10)));
        assert_eq!(number(".25"), Some(fraction(1, 4)));
        assert_eq!(number("12e-1"), Some(fraction(6, 5)));
        assert_eq!(number("2E2"), Some(fraction(200, 1)));
        assert_eq!(number(&"9".repeat(401)), None);
        assert_eq!(number("1e999"), None);
    }

    /// What was read could not be read again as it was printed.
    #[test]
    fn what_is_read_can_be_written_out() {
        for text in ["1e399", "1e-399", "0e400", "12.5e398"] {
            let value = number(text);
            let written = value.as_ref().map(crate::print::number);
            assert_eq!(written.and_then(|written| number(&written)), value, "{text}");
        }
        assert_eq!((number("1e400"), number("1e-400")), (None, None));
    }
}
