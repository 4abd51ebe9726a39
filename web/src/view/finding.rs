//! What a study found, set: sentences, a drawing where there is one, the table behind it, and what
//! could not be taken of what was given.

use record::study::Report;
use report::study::{Figure, Section, Table, sections};
use yew::prelude::*;

/// The sections of a report.
pub(crate) fn sections_of(report: &Report) -> Vec<Html> {
    sections(report).iter().map(section).collect()
}

/// One section.
pub(crate) fn section(section: &Section) -> Html {
    html! {
        <div class="finding">
            <h4>{ section.heading.clone() }</h4>
            if !section.faults.is_empty() {
                <ul class="complaints errors" data-testid="faults">
                    for fault in &section.faults {
                        <li>{ fault.clone() }</li>
                    }
                </ul>
            }
            for sentence in &section.verdict {
                <p class="prose">{ sentence.clone() }</p>
            }
            if let Some(figure) = &section.figure {
                <div class="scroll">{ drawn(figure) }</div>
            }
            if let Some(found) = &section.table {
                <div class="scroll" tabindex="0" role="group" aria-label={section.heading.clone()}>
                    { table(found) }
                </div>
            }
            for sentence in &section.notes {
                <p class="prose soft">{ sentence.clone() }</p>
            }
        </div>
    }
}

/// The order of the rivals; it is told in words above it. Attributes, not styles: the page's policy
/// refuses styles that stand in an element.
fn drawn(figure: &Figure) -> Html {
    let (width, height) = figure.size;
    html! {
        <svg role="img" aria-label={figure.label.clone()} viewBox={format!("0 0 {width} {height}")}
            width={width.to_string()} height={height.to_string()} fill="currentColor">
            for ([x1, y1, x2, y2], dashes) in &figure.lines {
                <line x1={x1.to_string()} y1={y1.to_string()} x2={x2.to_string()} y2={y2.to_string()}
                    stroke="currentColor" stroke-dasharray={*dashes} />
            }
            for (x, y, word) in &figure.words {
                <text x={x.to_string()} y={y.to_string()} font-style="italic">{ word.clone() }</text>
            }
            for (x, y, name) in &figure.names {
                <text x={x.to_string()} y={y.to_string()} font-weight="600" text-anchor="middle">{ name.clone() }</text>
            }
        </svg>
    }
}

fn table(table: &Table) -> Html {
    let class = |column: usize| table.words.contains(&column).then_some("word");
    html! {
        <table>
            <thead><tr>
                for (column, head) in table.head.iter().enumerate() {
                    if head.is_empty() {
                        <td />
                    } else {
                        <th scope="col" class={class(column)}>{ head.clone() }</th>
                    }
                }
            </tr></thead>
            <tbody>
                for row in &table.rows {
                    <tr>
                        for (column, cell) in row.iter().enumerate() {
                            if column == 0 {
                                <th scope="row">{ cell.clone() }</th>
                            } else {
                                <td class={class(column)}>{ cell.clone() }</td>
                            }
                        }
                    </tr>
                }
            </tbody>
        </table>
    }
}
