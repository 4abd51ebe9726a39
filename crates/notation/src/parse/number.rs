//! Decimal text to an exact number.

use dashu_int::{IBig, UBig};
use model::Number;

/// The exact value of `digits`, `digits.digits` or either with an exponent; `None` when it has
/// more than 400 digits or an exponent beyond ±400.
pub(crate) fn number(text: &str) -> Option<Number> {
    let (mantissa, exponent) = text.split_once(['e', 'E']).unwrap_or((text, "0"));
    let (whole, fraction) = mantissa.split_once('.').unwrap_or((mantissa, ""));
    if whole.len() + fraction.len() > 400 {
        return None;
    }
    let exponent: i32 = exponent.parse().ok().filter(|e: &i32| e.abs() <= 400)?;
    let digits: UBig = format!("{whole}{fraction}").parse().ok()?;
    let shift = exponent - i32::try_from(fraction.len()).ok()?;
    let power = UBig::from(10_u32).pow(usize::try_from(shift.unsigned_abs()).ok()?);
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
}
