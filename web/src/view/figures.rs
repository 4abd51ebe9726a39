//! The figures of a lane: the root's bound and gap, and the bound and nodes of the whole tree, now
//! or at the moment that is looked at.

use report::number::count;
use report::proof;
use yew::prelude::*;

use crate::browser::run::TreeCell;
use crate::state::lane::{Lane, Memory};
use crate::state::lens::Lens;
use crate::state::pointer::Shared;
use crate::view::figure::{figure, gap, share};

#[derive(Properties, PartialEq)]
pub(crate) struct FiguresProps {
    pub(crate) lane: Shared<Lane>,
    pub(crate) tree: Option<TreeCell>,
    pub(crate) best: Option<f64>,
}

/// The figures.
#[component]
pub(crate) fn Figures(props: &FiguresProps) -> Html {
    let lens = use_context::<UseReducerHandle<Lens>>();
    let lane = &props.lane;
    let Some(root) = &lane.root else { return Html::default() };
    let mark = proof::mark(root.proof, root.checked_within);
    let meaning = proof::meaning(root.proof, root.checked_bound.as_deref());
    let coefficients = lane.rival.as_ref().map_or(1, |rival| rival.nonzeros);
    let then = props.tree.as_ref().and_then(|tree| {
        let tree = tree.borrow();
        let solved = lens.as_ref()?.solved(&tree, coefficients)?;
        Some((solved, tree.values_at(solved).0))
    });
    let (nodes, bound) = then.unwrap_or((lane.nodes(), lane.bound()));
    html! {
        <dl class="figures">
            <div>
                <dt>{ "root bound" }</dt>
                <dd><span data-testid="root-bound">{ figure(root.bound) }</span>
                <small class="soft" data-testid="checked" title={meaning}>{ mark }</small></dd>
            </div>
            <div>
                <dt>{ "root gap" }</dt>
                <dd data-testid="root-gap">{ share(gap(props.best, root.bound)) }</dd>
            </div>
            <div>
                <dt>{ if then.is_some() { "bound then" } else { "bound now" } }</dt>
                <dd data-testid="bound">{ figure(bound) }</dd>
            </div>
            <div>
                <dt>{ "nodes" }</dt>
                <dd data-testid="nodes">{ count(u64::from(nodes)) }</dd>
            </div>
            if let Some(memory) = lane.memory.and_then(Memory::figure) {
                <div>
                    <dt>{ "memory" }</dt>
                    <dd data-testid="memory">{ memory }</dd>
                </div>
            }
        </dl>
    }
}
