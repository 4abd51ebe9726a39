//! Help texts.

/// What help is asked for.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Topic {
    All,
    Run,
    Read,
    Write,
    List,
    Digest,
    Cells,
    Gather,
    Drift,
    Prove,
}

impl Topic {
    /// The topic of a subcommand.
    pub(crate) fn of(subcommand: &str) -> Option<Self> {
        Some(match subcommand {
            "run" => Self::Run,
            "read" => Self::Read,
            "write" => Self::Write,
            "list" => Self::List,
            "digest" => Self::Digest,
            "cells" => Self::Cells,
            "gather" => Self::Gather,
            "drift" => Self::Drift,
            "prove" => Self::Prove,
            _ => return None,
        })
    }
}

/// The help text.
pub(crate) fn text(topic: Topic) -> &'static str {
    match topic {
        Topic::All => ALL,
        Topic::Run => RUN,
        Topic::Read => READ,
        Topic::Write => WRITE,
        Topic::List => LIST,
        Topic::Digest => DIGEST,
        Topic::Cells => CELLS,
        Topic::Gather => GATHER,
        Topic::Drift => DRIFT,
        Topic::Prove => PROVE,
    }
}

const ALL: &str = "\
hullward: rival integer formulations side by side on your own data.

  hullward run FILE…      run the rivals of scenarios: bounds, trees, solutions
  hullward read FILE      what is understood of an instance, with every complaint
  hullward write FILE     a rival as MPS, LaTeX or notation, or the scenario
  hullward list [ID]      the shipped formulations, or the text of one; a word finds some
  hullward digest FILE    one line a rival that two machines can compare
  hullward cells FILE     the numbered cells of a growth study, for a batch queue
  hullward gather RESULT… what its cells gave, summed up as one study
  hullward drift PACK     a regression pack run again, or a new instance against it
  hullward prove LOG      a saved log of a search proved again, leaf by leaf
  hullward help [CALL]    more on one of them
  hullward help CODE      what the code of a complaint means, with an example
  hullward --version      the version of the engine

FILE is a file, - for standard input, or a link of the page (https://…#s1.…).

Exit status: 0 done; 1 a limit stopped it (results are printed); 2 the input is
wrong (the reasons, each with file:line:column, on standard error); 3 an internal
check failed.
";

const RUN: &str = "\
hullward run FILE… [--json] [--seconds S] [--rival LETTER] [--log FILE] [--cell N]
              [--preset NAME]

Runs every rival of the scenarios, one after another, then their studies, and
prints tables.

  --json          one JSON object a rival or study and line instead; times stand in an
                  object of their own, so that results compare without them
  --seconds S     stop each rival after S seconds (0: never) instead of what the
                  scenario says; the clock never changes what is found
  --rival LETTER  run only this rival
  --log FILE      save the log of its search, with what hullward prove needs; the
                  scenario must have one rival, or --rival must name it
  --preset NAME   settings instead of the scenario's: bare (nothing that hides what
                  is compared: no presolve, propagation or cuts; plans come from
                  roundings and textbook round trips, which move no bound) or
                  production (as a production solver would: general cuts, node
                  work, reliability branching); limits stay
  --cell N        only cell N of its growth study, as JSON for hullward gather

A rival that cannot be run does not keep the others from running.
The bound is always in the direction of the objective. A gap is
|incumbent - bound| / |incumbent|. What is called checked was checked in exact
arithmetic: a root bound as the optimum of the relaxation (proof: exact), or as
a bound that differs from the one found by so much (proof: within).
";

const READ: &str = "\
hullward read FILE

Says what is understood of an instance (a table, points, a TSPLIB file, blocks) or
of the instances of a scenario, and names each line that is not, with its mend. A model
in MPS is described: rows, columns, what must be whole, and every line that other
programs may read otherwise; as a rival (mps = '''…''') it needs no instance.
";

const WRITE: &str = "\
hullward write FILE --as FORM [--rival LETTER] [--instance N] [--scale FACTOR] [-o OUT]

Hands over a rival of a scenario, to OUT or to standard output; what who takes it
should know goes to standard error.

  --as mps        the rival on the instance. The file is read again and compared with
                  the rival (columns, rows, non-zeros, bound of the relaxation)
                  before it is given. Rows of families on demand are not in it
  --as tightened  the same with the smallest coefficients and bounds that are proved;
                  no plan is lost
  --as latex      the model section as a paper prints it (amsmath), which hullward
                  reads back as the same formulation
  --as text       the same in journal notation
  --as scenario   the scenario file in its usual spelling
  --as link       #s1.…, to be put behind the address of the page
  --as report     the scenario is run, its studies too, and the decision record
                  written as one HTML file that prints
  --as markdown   the same record as Markdown
  --as csv        the scenario is run and its results written as a table
  --as json       the record as one JSON object with its results and studies
  --as svg        the drawings of the record as one SVG
  --as pack       the scenario is run and written with its results as one JSON
                  object, for hullward drift
  --as stripped   the scenario to share: labels, titles and notes are replaced, and
                  every rival is compared with what it was before
  --scale FACTOR  with stripped: costs of the objective are multiplied by it
  --rival LETTER  which rival; a scenario or link without it holds them all
  --instance N    which of several instances (1 unless given)
";

const LIST: &str = "\
hullward list [ID or WORDS]

Lists the shipped formulations with their citations; with an ID, such as
atsp/labels, prints what is known of that one and its text, ready to be changed.
Other words, in quotes if there are several, list those that hold them all.
";

const DIGEST: &str = "\
hullward digest FILE [--slice TICKS] [--runs N]

Runs each rival of a scenario on its first instance and prints its letter, the
number of events of its search and the digest of their bytes. The line is the same
on every machine and for every size of slice; no clock stops it, only the
scenario's limits of nodes and iterations.

  --slice TICKS   non-zeros touched a slice (2000000 unless given)
  --runs N        run each so often, once more to begin with, and put the shortest
                  time in milliseconds behind its digest
";

const CELLS: &str = "\
hullward cells FILE [--job QUEUE]

Lists the cells of a scenario's growth study, a number a line. Each cell is a run of
its own, so that any batch queue can make them, in any order:

  hullward cells study.toml | parallel 'hullward run --cell {} study.toml > cell-{}.json'
  hullward gather cell-*.json

  --job slurm     the script of an array job of Slurm, with its header, for sbatch
  --job parallel  a script that makes all cells by GNU parallel and gathers them
";

const GATHER: &str = "\
hullward gather RESULT… [--json]

Takes what hullward run --cell gave and sums it up: the same study, byte for byte, as
hullward run makes of the whole scenario. Cells that are missing are named.
";

const DRIFT: &str = "\
hullward drift PACK [FILE]

Runs a regression pack (hullward write --as pack) again and says what differs from the
recorded rows, columns, non-zeros, root bounds, optima and powers of ten of coefficients.
With FILE, a new instance for the same rivals, says which of these lie outside of what
was recorded over all of its instances.

Exit status: 0 as recorded, or the new instance could be run; 3 a result differs.
";

const PROVE: &str = "\
hullward prove LOG [--json]

Proves a search again from the log that hullward run --log saved, on a machine that
did not run it. The log holds the scenario, so nothing else is needed. Of the search
nothing is believed: the branchings must leave out no whole value, the plan must meet
every row and cost what the log says, and each leaf is proved by multipliers or a ray
worked out anew, in exact arithmetic. General cuts are not used: a leaf that they
closed is branched on instead.

Exit status: 0 proved; 1 a leaf is open (the search was stopped, or a proof would take
too long); 2 the log is wrong, with the nodes at which it is.
";
