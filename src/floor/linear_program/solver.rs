//! The only place that knows the solver of linear programs.

use microlp::{ComparisonOp, LinearExpr, OptimizationDirection, Problem};

/// A constraint Σ coefficients · x ≥ or = right.
pub(super) struct Row {
    pub(super) coefficients: Vec<f64>,
    pub(super) equal: bool,
    pub(super) right: f64,
}

/// An optimal x of minimal Σ cost · x under the rows, each x between its limits; `None` when the
/// solver finds none. Nothing may rest on the result without an exact check.
pub(super) fn minimise(costs: &[f64], limits: &[(f64, f64)], rows: &[Row]) -> Option<Vec<f64>> {
    let mut problem = Problem::new(OptimizationDirection::Minimize);
    let variables: Vec<_> = costs.iter().zip(limits).map(|(&c, &l)| problem.add_var(c, l)).collect();
    for row in rows {
        let mut sum = LinearExpr::empty();
        for (&v, &c) in variables.iter().zip(&row.coefficients) {
            if c != 0.0 {
                sum.add(v, c);
            }
        }
        let compare = if row.equal { ComparisonOp::Eq } else { ComparisonOp::Ge };
        problem.add_constraint(sum, compare, row.right);
    }
    let solution = problem.solve().ok()?.into_solution().ok()?;
    Some(variables.iter().map(|&v| solution.var_value(v)).collect())
}
