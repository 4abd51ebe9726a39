//! Studies in slices.
//!
//! A study is written as one sequence of questions, an `async` function, and solves each by
//! [`Desk::solve`]. Between slices it is suspended there; [`Running::advance`] gives it so many ticks
//! (non-zeros touched) to go on with. There is no runtime and no thread: what comes out is the same
//! for every slice size.

use std::cell::{Cell, RefCell};
use std::fmt;
use std::future::{Future, poll_fn};
use std::pin::{Pin, pin};
use std::rc::Rc;
use std::task::{Context, Poll, Waker};

use model::{Model, Number};
use tree::{Progress, Search, Settings, Status};

/// What a study works with: how much it may do in the slice in hand, and what it says of itself.
#[derive(Debug, Default)]
pub struct Desk {
    left: Cell<u64>,
    spent: Cell<u64>,
    solved: Cell<u32>,
    doing: RefCell<String>,
}

/// What solving a model gave. Values are in the direction of its objective.
#[derive(Debug, Clone)]
pub struct Solved {
    /// How its relaxation ended.
    pub root: Status,
    /// The bound of its relaxation.
    pub bound: Option<f64>,
    /// The same as far as exact arithmetic proves it.
    pub checked_bound: Option<Number>,
    /// Whether that is the exact optimum of the relaxation.
    pub exact: bool,
    /// The values of the relaxation.
    pub point: Vec<f64>,
    /// How the search ended; `Running` where none was asked for.
    pub status: Status,
    /// The bound of the whole tree.
    pub tree_bound: Option<f64>,
    /// The best solution's value.
    pub incumbent: Option<f64>,
    /// Its values.
    pub solution: Vec<f64>,
    /// Whether search and solution were checked in exact arithmetic.
    pub checked: bool,
    /// Nodes solved.
    pub nodes: u32,
    /// Simplex iterations.
    pub iterations: u64,
    /// Non-zeros touched.
    pub work: u64,
    /// The rows of a Farkas ray with their multipliers, where the relaxation has no point.
    pub ray: Vec<(String, f64)>,
    /// The bound with general cuts, where some were asked for, and how many there are.
    pub cuts: Option<(f64, u32)>,
}

impl Solved {
    /// Whether there is no plan at all.
    #[must_use]
    pub fn is_infeasible(&self) -> bool {
        self.root == Status::Infeasible || self.status == Status::Infeasible
    }

    /// Whether it was solved to the end: a proved optimum, or none at all.
    #[must_use]
    pub fn is_settled(&self) -> bool {
        self.is_infeasible() || self.status == Status::Optimal
    }
}

impl Desk {
    /// Work done to its end without slices.
    pub(crate) fn at_once<T, W: Future<Output = T>>(work: impl FnOnce(Rc<Self>) -> W) -> T {
        let desk = Rc::new(Self::default());
        let mut work = pin!(work(Rc::clone(&desk)));
        loop {
            desk.left.set(u64::MAX);
            if let Poll::Ready(found) = work.as_mut().poll(&mut Context::from_waker(Waker::noop()))
            {
                return found;
            }
        }
    }

    /// Says what is being done, as a clause.
    pub fn say(&self, doing: impl Into<String>) {
        *self.doing.borrow_mut() = doing.into();
    }

    /// Solves a model: its relaxation, and its search where the settings ask for it.
    pub async fn solve(&self, model: &Rc<Model>, settings: Settings) -> Solved {
        self.solve_within(model, settings, u64::MAX).await
    }

    /// The same with so many non-zeros touched at most: then it is stopped at the next step, which is
    /// the same one for every slice size.
    pub async fn solve_within(&self, model: &Rc<Model>, settings: Settings, most: u64) -> Solved {
        let searched = settings.search;
        let mut search = Search::new(Rc::clone(model), settings);
        poll_fn(|_| self.go_on(&mut search, (searched, most))).await;
        self.count();
        solved(&search, searched)
    }

    /// The relaxation alone.
    pub async fn relax(&self, model: &Rc<Model>) -> Solved {
        self.solve(model, Settings { search: false, ..Settings::default() }).await
    }

    /// The relaxation, and an estimate of the condition of its last basis.
    pub async fn conditioned(&self, model: &Rc<Model>) -> (Solved, Option<f64>) {
        let settings = Settings { search: false, ..Settings::default() };
        let mut search = Search::new(Rc::clone(model), settings);
        poll_fn(|_| self.go_on(&mut search, (false, u64::MAX))).await;
        self.count();
        let condition = search.condition_estimate();
        self.spend(model.row_count() as u64).await;
        (solved(&search, false), condition)
    }

    /// The relaxation with general cuts, and the cuts that are in it at the end.
    pub(crate) async fn with_cuts(
        &self,
        model: &Rc<Model>,
        settings: Settings,
    ) -> (Solved, Vec<model::Row>) {
        let searched = settings.search;
        let mut search = Search::new(Rc::clone(model), settings);
        poll_fn(|_| self.go_on(&mut search, (searched, u64::MAX))).await;
        self.count();
        (solved(&search, searched), search.cut_rows())
    }

    /// The members of families over subsets that the relaxation of a model needs.
    pub(crate) async fn members(&self, model: &Rc<Model>) -> Vec<(String, model::Row)> {
        let settings = Settings { search: false, ..Settings::default() };
        let mut search = Search::new(Rc::clone(model), settings);
        poll_fn(|_| self.go_on(&mut search, (false, u64::MAX))).await;
        self.count();
        search.members()
    }

    /// One more model is solved.
    pub(crate) fn count(&self) {
        self.solved.set(self.solved.get() + 1);
    }

    /// Counts work that is done at once, and rests where the slice is over.
    pub async fn spend(&self, ticks: u64) {
        self.take(ticks);
        let mut asked = false;
        poll_fn(|_| {
            if self.left.get() > 0 || asked {
                return Poll::Ready(());
            }
            asked = true;
            Poll::Pending
        })
        .await;
    }

    fn go_on(&self, search: &mut Search, (searched, most): (bool, u64)) -> Poll<()> {
        loop {
            let left = self.left.get();
            if left == 0 {
                return Poll::Pending;
            }
            let before = search.work().ticks;
            if before >= most {
                return Poll::Ready(());
            }
            let progress = search.advance(left.min(most - before));
            self.take((search.work().ticks - before).max(1));
            match progress {
                Progress::Working => {}
                Progress::RootSolved if searched => search.run(None),
                Progress::RootSolved | Progress::Paused | Progress::Finished => {
                    return Poll::Ready(());
                }
            }
        }
    }

    fn take(&self, ticks: u64) {
        self.left.set(self.left.get().saturating_sub(ticks));
        self.spent.set(self.spent.get().saturating_add(ticks));
    }
}

fn solved(search: &Search, searched: bool) -> Solved {
    let (root, summary) = (search.root(), search.summary());
    let cuts = search.cuts();
    let added = |cuts: tree::CutsResult| cuts.added.iter().sum();
    Solved {
        root: root.map_or(summary.status, |root| root.status),
        bound: root.and_then(|root| root.bound),
        checked_bound: root.and_then(|root| root.checked_bound.clone()),
        exact: root.is_some_and(|root| root.exact),
        point: root.map_or_else(Vec::new, |root| root.x.clone()),
        status: if searched { summary.status } else { Status::Running },
        tree_bound: summary.bound.filter(|_| searched),
        incumbent: summary.incumbent.filter(|_| searched),
        solution: if searched { summary.solution } else { Vec::new() },
        checked: summary.checked,
        nodes: summary.nodes,
        iterations: summary.iterations,
        work: summary.work,
        ray: root.map_or_else(Vec::new, |root| root.ray.clone()),
        cuts: cuts.and_then(|cuts| Some((cuts.bound?, added(cuts)))),
    }
}

type Work<T> = Pin<Box<dyn Future<Output = T>>>;

/// A study on its way.
pub struct Running<T> {
    desk: Rc<Desk>,
    work: Option<Work<T>>,
    result: Option<T>,
}

impl<T> fmt::Debug for Running<T> {
    fn fmt(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        formatter.debug_struct("Running").field("desk", &self.desk).finish_non_exhaustive()
    }
}

impl<T> Running<T> {
    /// A study that has done nothing yet.
    pub fn new<F, W>(study: F) -> Self
    where
        F: FnOnce(Rc<Desk>) -> W,
        W: Future<Output = T> + 'static,
    {
        let desk = Rc::new(Desk::default());
        let work: Work<T> = Box::pin(study(Rc::clone(&desk)));
        Self { desk, work: Some(work), result: None }
    }

    /// Goes on for about `ticks`; whether it is at its end.
    pub fn advance(&mut self, ticks: u64) -> bool {
        self.desk.left.set(ticks.max(1));
        if let Some(work) = &mut self.work
            && let Poll::Ready(result) = work.as_mut().poll(&mut Context::from_waker(Waker::noop()))
        {
            self.result = Some(result);
            self.work = None;
        }
        self.work.is_none()
    }

    /// What came out, once.
    pub fn take(&mut self) -> Option<T> {
        self.result.take()
    }

    /// What is being done, as a clause.
    #[must_use]
    pub fn doing(&self) -> String {
        self.desk.doing.borrow().clone()
    }

    /// Models solved so far.
    #[must_use]
    pub fn solved(&self) -> u32 {
        self.desk.solved.get()
    }

    /// Non-zeros touched so far.
    #[must_use]
    pub fn ticks(&self) -> u64 {
        self.desk.spent.get()
    }
}
