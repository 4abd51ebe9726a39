//! The values of a node's relaxation: fractional ones first, each with cost and reduced cost.

use record::message::{ColumnValue, NodeDetail, RivalReport};
use record::scenario::{Act, ActKind};
use report::number::{fixed, full, of};
use yew::prelude::*;

use crate::state::pointer::Shared;
use crate::view::figure::figure;

/// Rows shown before more are asked for.
const SHOWN: usize = 14;
/// Rows shown at most.
const MOST: usize = 400;

#[derive(Properties, PartialEq)]
pub(crate) struct ValuesProps {
    pub(crate) detail: Shared<NodeDetail>,
    pub(crate) rival: Option<Shared<RivalReport>>,
    pub(crate) unit: String,
    pub(crate) column: Option<u32>,
    pub(crate) choose: Callback<Option<u32>>,
    /// Does an act by hand; `None` where nothing may be done.
    pub(crate) act: Option<Callback<Act>>,
}

/// The table.
#[component]
pub(crate) fn Values(props: &ValuesProps) -> Html {
    let all = use_state_eq(|| false);
    let values = use_memo(props.detail.clone(), |detail| sorted(&detail.values));
    let fractional = values.iter().filter(|value| value.fractional).count();
    let may_branch = props.act.is_some() && values.iter().any(|value| !value.on.is_empty());
    let expected = values.iter().any(|value| value.gains.is_some());
    let limit = if *all { MOST } else { SHOWN };
    let more = {
        let (all, open) = (all.setter(), *all);
        Callback::from(move |_: MouseEvent| all.set(!open))
    };
    let cost = if props.unit.is_empty() { "cost" } else { props.unit.as_str() };
    html! {
        <div class="values">
            <table data-testid="values">
                <caption>{ caption(fractional, values.len()) }</caption>
                <thead><tr>
                    <th scope="col">{ "variable" }</th>
                    <th scope="col">{ "value" }</th>
                    <th scope="col">{ cost.to_owned() }</th>
                    <th scope="col">{ "reduced cost" }</th>
                    if expected { <th scope="col" title="How far the bound is expected to move below and above, by the branchings seen so far">{ "expected ↓ ↑" }</th> }
                    if may_branch { <th scope="col">{ "by hand" }</th> }
                </tr></thead>
                <tbody>
                    for value in values.iter().take(limit) { { row(props, value, (may_branch, expected)) } }
                </tbody>
            </table>
            if values.len() > SHOWN {
                <button type="button" onclick={more}>
                    { if *all { "Show fewer".to_owned() } else { format!("Show {}", values.len().min(MOST)) } }
                </button>
            }
        </div>
    }
}

fn caption(fractional: usize, all: usize) -> String {
    format!("{} not 0, {fractional} of them fractional", of(all as u64, "value"))
}

/// Fractional values first, then by falling value, then by column.
fn sorted(values: &[ColumnValue]) -> Vec<ColumnValue> {
    let mut sorted = values.to_vec();
    sorted.sort_by(|a, b| {
        let order = b.fractional.cmp(&a.fractional);
        order.then(b.value.total_cmp(&a.value)).then(a.column.cmp(&b.column))
    });
    sorted
}

/// "Branch", where the column may be branched on.
fn branch(props: &ValuesProps, value: &ColumnValue, name: &str) -> Html {
    let Some(act) = props.act.as_ref().filter(|_| !value.on.is_empty()) else {
        return Html::default();
    };
    let (node, on) = (Some(props.detail.node.0), value.on.clone());
    let onclick = act.reform(move |_: MouseEvent| Act {
        after: 0,
        what: ActKind::Branch,
        node,
        on: on.clone(),
    });
    html! {
        <button
            type="button" class="link" {onclick} aria-label={format!("Branch here on {name}")}
        >{ "Branch" }</button>
    }
}

/// The expected gains below and above, in short.
fn gains(value: &ColumnValue) -> String {
    value
        .gains
        .map_or_else(String::new, |(down, up)| format!("{} {}", fixed(down, 2), fixed(up, 2)))
}

fn row(props: &ValuesProps, value: &ColumnValue, (may_branch, expected): (bool, bool)) -> Html {
    let column = value.column;
    let chosen = props.column == Some(column);
    let name = props.rival.as_ref().and_then(|rival| rival.column_names.get(column as usize));
    let name = name.map_or_else(|| format!("column {}", column + 1), Clone::clone);
    let by_hand = branch(props, value, &name);
    let choose = props.choose.clone();
    let onclick = Callback::from(move |_: MouseEvent| choose.emit((!chosen).then_some(column)));
    html! {
        <tr key={column} class={classes!(value.fractional.then_some("fractional"), chosen.then_some("chosen"))}>
            <th scope="row">
                <button type="button" class="link" aria-pressed={if chosen { "true" } else { "false" }} {onclick}>{ name }</button>
            </th>
            <td><data value={value.value.to_string()} title={full(value.value)}>{ fixed(value.value, 3) }</data></td>
            <td>{ figure(Some(value.cost)) }</td>
            <td>{ figure(Some(value.reduced_cost)) }</td>
            if expected { <td>{ gains(value) }</td> }
            if may_branch { <td>{ by_hand }</td> }
        </tr>
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn fractional_values_come_first() {
        let value = |column, value, fractional| ColumnValue {
            column,
            value,
            reduced_cost: 0.0,
            cost: 1.0,
            fractional,
            gains: None,
            on: Vec::new(),
        };
        let order: Vec<u32> =
            sorted(&[value(0, 1.0, false), value(1, 0.2, true), value(2, 0.8, true)])
                .iter()
                .map(|value| value.column)
                .collect();
        assert_eq!(order, [2, 1, 0]);
    }
}
