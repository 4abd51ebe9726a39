//! The part of a length that is in view: zoom and pan, for the shared axis and for the height of a
//! tree alike.

/// From where to where.
pub(crate) type Span = (f64, f64);

/// The shortest part in view, as a share of the whole.
const SHORTEST: f64 = 1e-6;

/// A part as much shorter as `factor` says (longer below 1), with the value `about` where it was;
/// `None` is the whole.
pub(crate) fn zoomed(part: Option<Span>, whole: Span, about: f64, factor: f64) -> Option<Span> {
    let (low, high) = part.unwrap_or(whole);
    let shortest = (whole.1 - whole.0) * SHORTEST;
    let length = (high - low) / factor;
    let length = if length > shortest { length } else { shortest };
    let share = (about - low) / (high - low);
    let low = about - share * length;
    kept((low, low + length), whole)
}

/// A part moved along; it stays within the whole.
pub(crate) fn moved(part: Option<Span>, whole: Span, by: f64) -> Option<Span> {
    let (low, high) = part?;
    kept((low + by, high + by), whole)
}

/// A part of the same length that holds a value, in its middle where it has to move.
pub(crate) fn holding(part: Option<Span>, whole: Span, value: f64) -> Option<Span> {
    let (low, high) = part?;
    if low <= value && value <= high {
        return part;
    }
    let half = (high - low) / 2.0;
    kept((value - half, value + half), whole)
}

/// A part that stays within the whole.
fn kept((low, high): Span, whole: Span) -> Option<Span> {
    let length = high - low;
    if length >= (whole.1 - whole.0) * (1.0 - SHORTEST) {
        return None;
    }
    let low = if low < whole.0 { whole.0 } else { low };
    let low = if low + length > whole.1 { whole.1 - length } else { low };
    Some((low, low + length))
}

#[cfg(test)]
mod tests {
    use super::*;

    const WHOLE: Span = (0.0, 100.0);

    #[test]
    fn zooming_keeps_what_is_pointed_at_in_its_place() {
        assert_eq!(zoomed(None, WHOLE, 20.0, 2.0), Some((10.0, 60.0)));
        assert_eq!(zoomed(Some((10.0, 60.0)), WHOLE, 20.0, 2.0), Some((15.0, 40.0)));
        assert_eq!(zoomed(Some((10.0, 60.0)), WHOLE, 20.0, 0.5), None, "the whole again");
        assert_eq!(zoomed(None, WHOLE, 20.0, 0.5), None);
        let deep = zoomed(None, WHOLE, 50.0, 1e12).unwrap();
        assert!(deep.1 - deep.0 > 9e-5, "not without end");
    }

    #[test]
    fn moving_ends_at_the_ends() {
        assert_eq!(moved(Some((10.0, 60.0)), WHOLE, 5.0), Some((15.0, 65.0)));
        assert_eq!(moved(Some((10.0, 60.0)), WHOLE, 500.0), Some((50.0, 100.0)));
        assert_eq!(moved(Some((10.0, 60.0)), WHOLE, -500.0), Some((0.0, 50.0)));
        assert_eq!(moved(None, WHOLE, 5.0), None, "the whole does not move");
    }

    #[test]
    fn what_is_out_of_view_is_brought_into_it() {
        assert_eq!(holding(Some((10.0, 60.0)), WHOLE, 30.0), Some((10.0, 60.0)));
        assert_eq!(holding(Some((10.0, 20.0)), WHOLE, 50.0), Some((45.0, 55.0)));
        assert_eq!(holding(None, WHOLE, 50.0), None);
    }
}
