//! A formulation set as a paper sets it: rows that align at the relation, each cell a `math`
//! element. The row of the caret is marked; a click on a row puts the caret there. Elements are
//! made as nodes from a fixed list of names, and text stays text.

use record::message::CheckReport;
use record::typeset::{Element, Tag, TypesetRow};
use report::number::of;
use yew::prelude::*;
use yew::virtual_dom::{VNode, VTag};

use crate::state::pointer::Shared;
use crate::state::typeset::is_wrong;

#[derive(Properties, PartialEq)]
pub(crate) struct SetProps {
    pub(crate) label: String,
    pub(crate) report: Shared<CheckReport>,
    /// The row of the caret.
    pub(crate) active: Option<usize>,
    /// Hears the place of a row that is clicked.
    pub(crate) show: Callback<(u32, u32)>,
}

/// The formulation.
#[component]
pub(crate) fn Set(props: &SetProps) -> Html {
    let set = &props.report.typeset;
    let split = set.rows.iter().position(|row| !row.describes).unwrap_or(set.rows.len());
    let rows = |from: usize, to: usize| {
        let places = from..to;
        places.map(|place| row(props, place, &set.rows[place])).collect::<Html>()
    };
    html! {
        <div class="set" role="region" tabindex="0" aria-label={props.label.clone()} data-testid="typeset">
            <div class="described">{ rows(0, split) }</div>
            <div class="model">{ rows(split, set.rows.len()) }</div>
            if set.further > 0 {
                <p class="small soft">{ format!("and {}, which are not set", of(u64::from(set.further), "further line")) }</p>
            }
        </div>
    }
}

fn row(props: &SetProps, place: usize, row: &TypesetRow) -> Html {
    let wrong = is_wrong(row, &props.report).then_some("wrong");
    let active = (props.active == Some(place)).then_some("active");
    let (show, span) = (props.show.clone(), (row.start, row.end));
    let onclick = Callback::from(move |_: MouseEvent| show.emit(span));
    html! {
        <div key={place} class={classes!("line", wrong, active)} {onclick}>
            <span class="head">{ row.head.clone() }</span>
            if !row.unread.is_empty() {
                <code>{ row.unread.clone() }</code>
            } else if row.describes {
                // A long definition without words does not push the words of the others away.
                <span class={row.words.is_empty().then_some("whole")}>
                    { math(&row.left) }{ math(&row.right) }<span class="apart">{ math(&row.quantifier) }</span>
                </span>
                if !row.words.is_empty() { <span class="words">{ row.words.clone() }</span> }
            } else {
                if row.left.is_empty() {
                    <span class="whole">{ math(&row.right) }</span>
                } else {
                    <span class="left">{ math(&row.left) }</span>
                    <span>{ math(&row.right) }</span>
                }
                <span class="apart">{ math(&row.quantifier) }</span>
                <span class="words">
                    if !row.words.is_empty() { { format!("({})", row.words) } }
                </span>
            }
        </div>
    }
}

/// A cell; nothing where it is empty.
fn math(cell: &[Element]) -> Html {
    if cell.is_empty() {
        return Html::default();
    }
    let mut math = VTag::new("math");
    math.add_attribute("displaystyle", "true");
    math.add_children(cell.iter().map(node));
    math.into()
}

fn node(element: &Element) -> VNode {
    let (name, attributes) = named(element.tag);
    let mut tag = VTag::new(name);
    for (attribute, value) in attributes {
        tag.add_attribute(attribute, *value);
    }
    if !element.text.is_empty() {
        tag.add_child(VNode::from(element.text.clone()));
    }
    tag.add_children(element.children.iter().map(node));
    tag.into()
}

/// The name and the attributes of an element.
fn named(tag: Tag) -> (&'static str, &'static [(&'static str, &'static str)]) {
    match tag {
        Tag::Identifier => ("mi", &[]),
        Tag::Number => ("mn", &[]),
        Tag::Operator => ("mo", &[]),
        Tag::Tight => ("mo", &[("lspace", "0"), ("rspace", "0")]),
        Tag::Bracket => ("mo", &[("stretchy", "false")]),
        Tag::Text => ("mtext", &[]),
        Tag::Thin => ("mspace", &[("width", "0.167em")]),
        Tag::Sub => ("msub", &[]),
        Tag::Sup => ("msup", &[]),
        Tag::SubSup => ("msubsup", &[]),
        Tag::Under => ("munder", &[]),
        Tag::UnderOver => ("munderover", &[]),
        Tag::Accent => ("mover", &[("accent", "true")]),
        Tag::Fraction => ("mfrac", &[]),
        Tag::Row => ("mrow", &[]),
        Tag::Table => ("mtable", &[]),
        Tag::TableRow => ("mtr", &[]),
        Tag::Cell => ("mtd", &[]),
    }
}
