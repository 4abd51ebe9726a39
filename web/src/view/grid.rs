//! The value grid: the distance table as shaded cells, darker for longer. Beyond 60 stops a cell
//! holds the mean of a block. The pointer or the arrow keys show the value of a cell.

use record::message::InstanceReport;
use report::number::short;
use wasm_bindgen::JsCast;
use web_sys::{CanvasRenderingContext2d, HtmlCanvasElement};
use yew::prelude::*;

use crate::browser::size::use_width;
use crate::state::pointer::Shared;

/// Cells along a side, at most.
const MOST: usize = 60;

#[derive(Properties, PartialEq)]
pub(crate) struct GridProps {
    pub(crate) report: Shared<InstanceReport>,
}

/// Means of blocks of the table.
#[derive(Debug, PartialEq)]
struct Cells {
    /// Stops along a side of a block.
    block: usize,
    side: usize,
    means: Vec<Option<f64>>,
    greatest: f64,
}

impl Cells {
    fn of(report: &InstanceReport) -> Self {
        let stops = report.stops.len();
        let block = stops.div_ceil(MOST).max(1);
        let side = stops.div_ceil(block);
        let mut means = Vec::with_capacity(side * side);
        for row in 0..side {
            for column in 0..side {
                means.push(mean(report, block, row, column));
            }
        }
        let greatest = means.iter().flatten().fold(0.0, |a: f64, &b| if b > a { b } else { a });
        Self { block, side, means, greatest }
    }

    /// What a cell says: from, to, value.
    fn words(&self, report: &InstanceReport, row: usize, column: usize) -> String {
        let name = |cell: usize| {
            let (first, last) = (cell * self.block, (cell + 1) * self.block - 1);
            let label = |stop: usize| report.stops.get(stop).map_or("", |stop| stop.label.as_str());
            let last = last.min(report.stops.len().saturating_sub(1));
            if first == last {
                label(first).to_owned()
            } else {
                format!("{} to {}", label(first), label(last))
            }
        };
        let value = self.means.get(row * self.side + column).copied().flatten();
        let value =
            value.map_or_else(|| "no drive".to_owned(), |value| short(value) + &unit(report));
        let mean = if self.block > 1 { "mean " } else { "" };
        format!("{} → {}: {mean}{value}", name(row), name(column))
    }
}

fn unit(report: &InstanceReport) -> String {
    if report.unit.is_empty() { String::new() } else { format!(" {}", report.unit) }
}

fn mean(report: &InstanceReport, block: usize, row: usize, column: usize) -> Option<f64> {
    let stops = report.stops.len();
    let (mut sum, mut count) = (0.0, 0_u32);
    for from in row * block..((row + 1) * block).min(stops) {
        for to in column * block..((column + 1) * block).min(stops) {
            if let Some(value) = report.matrix.get(from * stops + to).copied().flatten() {
                sum += value;
                count += 1;
            }
        }
    }
    (count > 0).then(|| sum / f64::from(count))
}

/// The grid.
#[component]
pub(crate) fn Grid(props: &GridProps) -> Html {
    let (frame, canvas) = (use_node_ref(), use_node_ref());
    let width = use_width(&frame);
    let cursor = use_state_eq(|| None::<(usize, usize)>);
    let cells = use_memo(props.report.clone(), |report| Cells::of(report));
    let size = if width < 380.0 { width } else { 380.0 };
    let chosen = *cursor;
    {
        let (canvas, cells) = (canvas.clone(), cells.clone());
        use_effect_with((props.report.clone(), size as u32, chosen), move |_| {
            if let Some(canvas) = canvas.cast::<HtmlCanvasElement>() {
                draw(&canvas, &cells, size, chosen);
            }
        });
    }
    let side = cells.side;
    let point = {
        let cursor = cursor.setter();
        Callback::from(move |event: MouseEvent| {
            let cell = |at: i32| (f64::from(at) / size * side as f64) as usize;
            let (row, column) = (cell(event.offset_y()), cell(event.offset_x()));
            cursor.set(Some((row.min(side - 1), column.min(side - 1))));
        })
    };
    let onkeydown = {
        let cursor = cursor.setter();
        Callback::from(move |event: KeyboardEvent| {
            if let Some(next) = moved(chosen, &event.key(), side) {
                event.prevent_default();
                cursor.set(Some(next));
            }
        })
    };
    let words = chosen.map_or_else(
        || "Point at a cell, or use the arrow keys.".to_owned(),
        |(row, column)| cells.words(&props.report, row, column),
    );
    html! {
        <div class="grid" ref={frame}>
            if width > 0.0 && side > 0 {
                <canvas
                    ref={canvas} tabindex="0" role="application" data-testid="grid"
                    aria-label="Values by pair of stops; rows from, columns to; arrow keys move"
                    onmousemove={point.clone()} onclick={point} {onkeydown}
                />
            }
            <p class="soft" aria-live="polite" data-testid="grid-value">{ words }</p>
        </div>
    }
}

/// The cell an arrow key leads to.
fn moved(from: Option<(usize, usize)>, key: &str, side: usize) -> Option<(usize, usize)> {
    let last = side.checked_sub(1)?;
    let Some((row, column)) = from else {
        return key.starts_with("Arrow").then_some((0, 0));
    };
    match key {
        "ArrowUp" => Some((row.saturating_sub(1), column)),
        "ArrowDown" => Some(((row + 1).min(last), column)),
        "ArrowLeft" => Some((row, column.saturating_sub(1))),
        "ArrowRight" => Some((row, (column + 1).min(last))),
        _ => None,
    }
}

fn draw(canvas: &HtmlCanvasElement, cells: &Cells, size: f64, chosen: Option<(usize, usize)>) {
    let ratio = gloo_utils::window().device_pixel_ratio();
    canvas.set_width((size * ratio) as u32);
    canvas.set_height((size * ratio) as u32);
    let context = canvas.get_context("2d").ok().flatten();
    let Some(context) = context.and_then(|c| c.dyn_into::<CanvasRenderingContext2d>().ok()) else {
        return;
    };
    let ink = crate::view::paint::colour(canvas, "--ink");
    context.set_fill_style_str(&ink);
    let step = size * ratio / cells.side as f64;
    let edge = |cell: usize| (cell as f64 * step).round();
    for (index, mean) in cells.means.iter().enumerate() {
        let Some(mean) = mean else { continue };
        let (row, column) = (index / cells.side, index % cells.side);
        let share = if cells.greatest > 0.0 { mean / cells.greatest } else { 0.0 };
        context.set_global_alpha(0.05 + 0.8 * share);
        let (x, y) = (edge(column), edge(row));
        context.fill_rect(x, y, edge(column + 1) - x - 1.0, edge(row + 1) - y - 1.0);
    }
    if let Some((row, column)) = chosen {
        context.set_global_alpha(1.0);
        context.set_stroke_style_str(&crate::view::paint::colour(canvas, "--focus"));
        context.set_line_width(2.0 * ratio);
        context.stroke_rect(edge(column), edge(row), step, step);
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use record::message::Stop;

    fn report(stops: usize) -> InstanceReport {
        let stop =
            |index: usize| Stop { label: format!("s{index}"), x: 0.0, y: 0.0, mark: String::new() };
        let matrix = (0..stops * stops)
            .map(|cell| (cell / stops != cell % stops).then_some((cell % stops) as f64))
            .collect();
        InstanceReport {
            stops: (0..stops).map(stop).collect(),
            matrix,
            ..InstanceReport::default()
        }
    }

    #[test]
    fn a_small_table_is_shown_cell_by_cell() {
        let report = report(3);
        let cells = Cells::of(&report);
        assert_eq!((cells.side, cells.block, cells.greatest), (3, 1, 2.0));
        assert_eq!(cells.words(&report, 0, 2), "s0 → s2: 2");
        assert_eq!(cells.words(&report, 1, 1), "s1 → s1: no drive");
    }

    #[test]
    fn a_large_table_is_shown_by_means() {
        let report = report(130);
        let cells = Cells::of(&report);
        assert_eq!((cells.side, cells.block), (44, 3));
        assert_eq!(cells.words(&report, 0, 1), "s0 to s2 → s3 to s5: mean 4");
    }

    #[test]
    fn arrow_keys_stay_on_the_grid() {
        assert_eq!(moved(None, "ArrowUp", 3), Some((0, 0)));
        assert_eq!(moved(Some((0, 0)), "ArrowLeft", 3), Some((0, 0)));
        assert_eq!(moved(Some((2, 2)), "ArrowDown", 3), Some((2, 2)));
        assert_eq!(moved(Some((1, 1)), "Enter", 3), None);
    }
}
