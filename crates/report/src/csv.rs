//! Results as comma-separated values (RFC 4180), full digits, one line a rival and instance.

use record::results::RivalResult;

const HEAD: [&str; 16] = [
    "scenario",
    "instance",
    "rival",
    "title",
    "status",
    "rows",
    "columns",
    "integer_columns",
    "nonzeros",
    "root_bound",
    "root_checked_bound",
    "bound",
    "incumbent",
    "nodes",
    "iterations",
    "work",
];

/// The table with its head.
#[must_use]
pub fn csv(results: &[RivalResult]) -> String {
    let lines = results.iter().map(|result| line(&row(result)));
    std::iter::once(line(&HEAD.map(str::to_owned))).chain(lines).collect()
}

fn row(result: &RivalResult) -> [String; 16] {
    let number = |value: Option<f64>| value.map_or_else(String::new, |value| value.to_string());
    let (root, search) = (result.root.as_ref(), result.search.as_ref());
    let count = |of: &dyn Fn(&record::results::SearchReport) -> u64| {
        search.map_or_else(String::new, |search| of(search).to_string())
    };
    [
        result.scenario.clone(),
        result.instance.clone(),
        result.rival.clone(),
        result.title.clone(),
        result.status.word().to_owned(),
        result.rows.to_string(),
        result.columns.to_string(),
        result.integer_columns.to_string(),
        result.nonzeros.to_string(),
        number(root.and_then(|root| root.bound)),
        root.and_then(|root| root.checked_bound.clone()).unwrap_or_default(),
        number(search.and_then(|search| search.bound)),
        number(search.and_then(|search| search.incumbent)),
        count(&|search| u64::from(search.nodes)),
        count(&|search| search.iterations),
        count(&|search| search.work),
    ]
}

fn line(cells: &[String]) -> String {
    let quoted = |cell: &String| {
        if cell.contains(['"', ',', '\n', '\r']) {
            format!("\"{}\"", cell.replace('"', "\"\""))
        } else {
            cell.clone()
        }
    };
    cells.iter().map(quoted).collect::<Vec<_>>().join(",") + "\r\n"
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn commas_quotes_and_line_ends_are_quoted() {
        let result = RivalResult {
            scenario: "a, b".to_owned(),
            title: "say \"x\"\nthere".to_owned(),
            rival: "A".to_owned(),
            rows: 12_345,
            ..RivalResult::default()
        };
        let text = csv(&[result]);
        assert!(text.starts_with("scenario,instance,rival,"), "{text}");
        assert!(text.contains("\r\n\"a, b\",,A,\"say \"\"x\"\"\nthere\",error,12345,0,"), "{text}");
    }
}
