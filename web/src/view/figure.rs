//! A number on the page: four significant digits, the full value on demand.

use report::number::{full, percent, short};
use yew::prelude::*;

/// A number; a dash where there is none.
pub(crate) fn figure(value: Option<f64>) -> Html {
    match value {
        Some(value) => {
            html! { <data value={value.to_string()} title={full(value)}>{ short(value) }</data> }
        }
        None => html! { <span class="none">{ "–" }</span> },
    }
}

/// A share as a percentage; a dash where there is none.
pub(crate) fn share(value: Option<f64>) -> Html {
    match value {
        Some(value) => {
            html! { <data value={value.to_string()} title={full(value)}>{ percent(value) }</data> }
        }
        None => html! { <span class="none">{ "–" }</span> },
    }
}

/// |incumbent − bound| / |incumbent|; none without an incumbent, or at 0.
pub(crate) fn gap(incumbent: Option<f64>, bound: Option<f64>) -> Option<f64> {
    let (incumbent, bound) = (incumbent?, bound?);
    let size = incumbent.abs();
    (size > 0.0).then(|| (incumbent - bound).abs() / size)
}

#[cfg(test)]
mod tests {
    use super::gap;

    #[test]
    fn the_gap_is_relative_to_the_incumbent() {
        assert_eq!(gap(Some(200.0), Some(150.0)), Some(0.25));
        assert_eq!(gap(Some(0.0), Some(1.0)), None);
        assert_eq!(gap(None, Some(1.0)), None);
    }
}
