//! Solves integer programs stated with good_lp's variables, expressions and constraints.
//!
//! good_lp's own binding folds several endings into one error; here every ending has its name.

use std::collections::HashMap;
use std::time::Duration;

use good_lp::{Constraint, Expression, IntoAffineExpression, ProblemVariables, Variable};
use microlp::{
    ComparisonOp, Error, LinearExpr, OptimizationDirection, Problem, SolutionStatus, SolveOptions,
    SolveOutcome, TerminationReason,
};

/// An integer program to be minimised. All integer variables are bounded.
pub struct Program {
    /// Variables with their bounds.
    pub variables: ProblemVariables,
    /// What is minimised.
    pub objective: Expression,
    /// Constraints.
    pub constraints: Vec<Constraint>,
}

/// Values of the variables of a program.
#[derive(Clone, Debug)]
pub struct Values(HashMap<Variable, f64>);

impl Values {
    /// Whether a binary variable is 1.
    #[must_use]
    pub fn is_set(&self, variable: Variable) -> bool {
        self.0.get(&variable).is_some_and(|value| *value > 0.5)
    }
}

/// How a solve ended.
#[derive(Clone, Debug)]
pub enum Ending {
    /// Proved: nothing is better than these values.
    Optimal(Values),
    /// Proved: nothing satisfies the constraints.
    Infeasible,
    /// Stopped at its limit, with the best values so far, if any, and a bound, if any.
    Stopped {
        /// Best values found.
        values: Option<Values>,
        /// No value of the objective is below this.
        bound: Option<f64>,
    },
    /// The solver gave up; nothing is proved.
    Trouble(String),
}

/// How long the solver runs before it is asked again whether to stop.
const SLICE: Duration = Duration::from_millis(200);

/// Solves a program, unless told to stop.
#[must_use]
pub fn solve(program: &Program, stop: &dyn Fn() -> bool) -> Ending {
    let mut problem = Problem::new(OptimizationDirection::Minimize);
    let costs: HashMap<Variable, f64> = program.objective.clone().linear_coefficients().collect();
    let mut columns = HashMap::new();
    for (variable, definition) in program.variables.iter_variables_with_def() {
        let cost = costs.get(&variable).copied().unwrap_or(0.0);
        let (least, most) = (definition.get_min(), definition.get_max());
        let column = if definition.is_integer() {
            let whole = |bound: f64| (bound.abs() < f64::from(i32::MAX)).then_some(bound as i32);
            let (Some(least), Some(most)) = (whole(least.ceil()), whole(most.floor())) else {
                return Ending::Trouble("an integer variable has no 32-bit bound".to_owned());
            };
            problem.add_integer_var(cost, (least, most))
        } else {
            problem.add_var(cost, (least, most))
        };
        columns.insert(variable, column);
    }
    for constraint in &program.constraints {
        let mut row = LinearExpr::empty();
        for (variable, factor) in constraint.expression().clone().linear_coefficients() {
            row.add(columns[&variable], factor);
        }
        let sense = if constraint.is_equality() { ComparisonOp::Eq } else { ComparisonOp::Le };
        problem.add_constraint(row, sense, -constraint.expression().constant());
    }
    let mut options = SolveOptions::default();
    options.time_limit = Some(SLICE);
    // Amounts are exact to a millionth; the usual slack would pass over small differences in
    // large totals.
    options.tolerances.prune_epsilon = 1e-12;
    let constant = program.objective.constant();
    let mut run = problem.solve_with(options);
    while let Ok(outcome) = run {
        if outcome.termination_reason() != TerminationReason::TimeLimit || stop() {
            run = Ok(outcome);
            break;
        }
        run = outcome.resume();
    }
    match run {
        Ok(outcome) => {
            let bound = outcome.stats().best_bound.map(|bound| bound + constant);
            match outcome {
                SolveOutcome::Solution(solution) => {
                    let values = columns
                        .iter()
                        .map(|(&variable, &column)| (variable, solution.var_value(column)))
                        .collect();
                    match solution.status() {
                        SolutionStatus::Optimal => Ending::Optimal(Values(values)),
                        SolutionStatus::Feasible => {
                            Ending::Stopped { values: Some(Values(values)), bound }
                        }
                    }
                }
                SolveOutcome::Interrupted(_) => Ending::Stopped { values: None, bound },
            }
        }
        Err(Error::Infeasible) => Ending::Infeasible,
        Err(other) => Ending::Trouble(other.to_string()),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use good_lp::variable;

    const ON: &dyn Fn() -> bool = &|| false;

    /// 0-1 knapsack, capacity 165, ten items: the best load is worth 309 with items 1 to 4 and 6.
    /// Source: J. Burkardt, data set KNAPSACK_01, problem P01 (Florida State University).
    #[test]
    fn a_published_knapsack() {
        let weights = [23.0, 31.0, 29.0, 44.0, 53.0, 38.0, 63.0, 85.0, 89.0, 82.0];
        let profits = [92.0, 57.0, 49.0, 68.0, 60.0, 43.0, 67.0, 84.0, 87.0, 72.0];
        let mut variables = ProblemVariables::new();
        let taken: Vec<Variable> =
            weights.iter().map(|_| variables.add(variable().binary())).collect();
        let sum = |by: &[f64]| -> Expression { taken.iter().zip(by).map(|(&t, &b)| b * t).sum() };
        let program = Program {
            variables,
            objective: sum(&profits) * -1.0,
            constraints: vec![sum(&weights).leq(165.0)],
        };
        let Ending::Optimal(values) = solve(&program, ON) else { panic!("optimal") };
        let chosen: Vec<bool> = taken.iter().map(|&t| values.is_set(t)).collect();
        assert_eq!(chosen, [true, true, true, true, false, true, false, false, false, false]);
    }

    #[test]
    fn endings_have_names() {
        let mut variables = ProblemVariables::new();
        let a = variables.add(variable().binary());
        let impossible = Program {
            variables,
            objective: a.into(),
            constraints: vec![Expression::from(a).geq(2.0)],
        };
        assert!(matches!(solve(&impossible, ON), Ending::Infeasible));
        let mut variables = ProblemVariables::new();
        let huge = variables.add(variable().integer().min(0).max(1e12));
        let wide = Program { variables, objective: huge.into(), constraints: Vec::new() };
        assert!(matches!(solve(&wide, ON), Ending::Trouble(_)));
        let mut variables = ProblemVariables::new();
        let many: Vec<Variable> = (0..60).map(|_| variables.add(variable().binary())).collect();
        let hard = Program {
            variables,
            objective: many.iter().enumerate().map(|(i, &v)| (1.0 + i as f64 * 0.01) * v).sum(),
            constraints: vec![
                many.iter()
                    .enumerate()
                    .map(|(i, &v)| (3.0 + (i * 37 % 11) as f64) * v)
                    .sum::<Expression>()
                    .eq(123.5),
            ],
        };
        let ending = solve(&hard, &|| true);
        assert!(matches!(ending, Ending::Stopped { .. } | Ending::Infeasible), "{ending:?}");
    }
}
