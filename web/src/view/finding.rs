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
                <div class="scroll drawn">{ drawn(figure) }</div>
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

/// A drawing; it is told in words or a table beside it. Element by element, for the page's policy lets no
/// markup in, and by attributes, for it refuses styles that stand in an element.
fn drawn(figure: &Figure) -> Html {
    let (width, height) = figure.size;
    html! {
        <svg role="img" aria-label={figure.label.clone()} viewBox={format!("0 0 {width} {height}")}
            width={width.to_string()} height={height.to_string()} fill="currentColor">
            for rule in &figure.rules { { line(rule, "", "0.3") } }
            for (between, dashes) in &figure.lines { { line(between, dashes, "1") } }
            for (x, y, full) in &figure.marks {
                <circle cx={x.to_string()} cy={y.to_string()} r="3.5" stroke="currentColor"
                    fill={if *full { "currentColor" } else { "Canvas" }} />
            }
            for (x, y, word) in &figure.words {
                <text x={x.to_string()} y={y.to_string()} font-style="italic">{ word.clone() }</text>
            }
            for (x, y, anchor, word) in &figure.labels {
                <text x={x.to_string()} y={y.to_string()} font-size="12" text-anchor={*anchor}>{ word.clone() }</text>
            }
            for (x, y, name) in &figure.names {
                <text x={x.to_string()} y={y.to_string()} font-weight="600" text-anchor="middle">{ name.clone() }</text>
            }
        </svg>
    }
}

fn line([x1, y1, x2, y2]: &[usize; 4], dashes: &'static str, opacity: &'static str) -> Html {
    html! {
        <line x1={x1.to_string()} y1={y1.to_string()} x2={x2.to_string()} y2={y2.to_string()}
            stroke="currentColor" stroke-dasharray={dashes} stroke-opacity={opacity} />
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
