//! QAPLIB files: `n`, and two square matrices.

use crate::complaint::plural;
use crate::instance::{Instance, Reader};

use super::stream::Stream;
use super::{counted, instance, matrix};

/// Reads the two matrices, the first as flows. Which is which does not matter for the optimum.
pub(super) async fn read(stream: &mut Stream<'_, '_>) -> Option<(Instance, Vec<String>)> {
    let n = stream.whole("the number of facilities", 1, crate::MAX_STOPS)?;
    let flows = stream.numbers(n * n, "the first matrix").await?;
    let distances = stream.numbers(n * n, "the second matrix").await?;
    stream.finish()?;
    let facts = vec![
        format!("{} for as many locations.", plural(n, "facility", "facilities")),
        "Files differ in which matrix comes first: the first was taken for the flows f between facilities N, the second for the distances d between locations L. The optimum is the same the other way round.".to_owned(),
    ];
    let data = vec![
        ("N", counted(n)),
        ("L", counted(n)),
        ("f", matrix(flows, n)),
        ("d", matrix(distances, n)),
    ];
    Some((instance(Reader::Quadratic, data), facts))
}
