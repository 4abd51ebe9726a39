//! What a solve ends with: values, never errors; each is checked against the caller's rows before
//! it is released.

/// How a solve ended.
#[derive(Clone, Debug, PartialEq)]
pub enum Outcome {
    /// A basic solution, primal and dual feasible.
    Optimal(Solution),
    /// No point satisfies the rows and bounds.
    Infeasible(Ray),
    /// The objective falls without limit along a ray from a feasible point.
    Unbounded {
        /// A feasible point, one value a column.
        point: Vec<f64>,
        /// A direction that keeps feasible and lowers the objective, one value a column.
        ray: Vec<f64>,
    },
    /// The solve was stopped.
    Stopped {
        /// Why.
        reason: StopReason,
        /// The bound the duals give on the optimal value, where there is one (floating point, not
        /// proved).
        bound: Option<f64>,
        /// One a row, from the costs as given (not from perturbed ones).
        duals: Vec<f64>,
    },
}

/// An optimal basic solution.
#[derive(Clone, Debug, PartialEq)]
pub struct Solution {
    /// cᵀx.
    pub objective: f64,
    /// One value a column, within its bounds.
    pub x: Vec<f64>,
    /// One value a row: the row at `x`.
    pub activity: Vec<f64>,
    /// One a row: not negative where the row is held from below, not positive where from above. After
    /// the last resort they are those of 32 digits, rounded to floats once they had been checked:
    /// the bound that follows from them can be weaker by that rounding.
    pub duals: Vec<f64>,
    /// One a column: c_j − Σ_i duals_i a_ij; zero where the column is basic.
    pub reduced_costs: Vec<f64>,
}

/// A proof (Farkas) that no point satisfies rows and bounds.
///
/// With g = −Aᵀy for the multipliers y: Σ_i min(y_i L_i, y_i U_i) + Σ_j min(g_j l_j, g_j u_j) > 0,
/// while every feasible point would make the left side at most zero. All zero when some column or
/// row has crossed bounds, which is proof enough.
#[derive(Clone, Debug, PartialEq)]
pub struct Ray {
    /// y, one a row: small whole numbers where a factor up to 64 makes them so, else at most 1 in
    /// size.
    pub multipliers: Vec<f64>,
}

/// Why a solve was stopped.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum StopReason {
    /// The limit on iterations was reached.
    Iterations,
    /// The dual bound exceeds the cutoff.
    Cutoff,
    /// No outcome passed its check, after retries; says which check failed.
    Numerical(String),
}
