//! A growth study for a batch queue: the script that makes each of its cells on its own.

use crate::options::Queue;

/// The script for the cells of a scenario file, numbered from 0 up to but not including `cells`.
pub(crate) fn script(queue: Queue, file: &str, cells: u32) -> String {
    let file = quoted(file);
    match queue {
        Queue::Slurm => slurm(&file, cells.saturating_sub(1)),
        Queue::Parallel => parallel(&file),
    }
}

fn slurm(file: &str, last: u32) -> String {
    format!(
        "#!/bin/sh\n\
         #SBATCH --job-name=hullward\n\
         #SBATCH --array=0-{last}\n\
         #SBATCH --ntasks=1\n\
         #SBATCH --cpus-per-task=1\n\
         #SBATCH --mem=2G\n\
         #SBATCH --time=01:00:00\n\
         #SBATCH --output=cell-%a.log\n\
         # One cell of the growth study each. When all are done: hullward gather cell-*.json\n\
         scenario={file}\n\
         cell=\"$SLURM_ARRAY_TASK_ID\"\n\
         hullward run --cell \"$cell\" \"$scenario\" > \"cell-$cell.json\"\n"
    )
}

fn parallel(file: &str) -> String {
    format!(
        "#!/bin/sh\n\
         # The cells of the growth study by GNU parallel, as many at once as there are cores.\n\
         set -e\n\
         scenario={file}\n\
         export scenario\n\
         hullward cells \"$scenario\" |\n\
         \x20 parallel 'hullward run --cell {{}} \"$scenario\" > cell-{{}}.json'\n\
         hullward gather --json cell-*.json\n"
    )
}

/// A word that a shell takes as it is.
fn quoted(word: &str) -> String {
    format!("'{}'", word.replace('\'', "'\\''"))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_name_with_a_quote_stays_one_word() {
        assert_eq!(quoted("it's $HOME.toml"), "'it'\\''s $HOME.toml'");
        let script = script(Queue::Slurm, "a b.toml", 60);
        assert!(script.contains("#SBATCH --array=0-59\n"), "{script}");
        assert!(script.contains("\nscenario='a b.toml'\n"), "{script}");
    }
}
