//! A formula as a list of steps, and what they come to in any kind of number.

use crate::numerics::Real;

/// Deepest nesting, and with it the most values that wait on the evaluation stack.
pub(super) const STACK_LIMIT: usize = 64;

/// The functions as they stand in messages.
pub(super) const FUNCTION_NAMES: &str = "exp, ln, log10, sqrt, sin, cos, atan, abs";

/// A function of one argument.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Function {
    Exp,
    Ln,
    Log10,
    Sqrt,
    Sin,
    Cos,
    Atan,
    Abs,
}

impl Function {
    pub(super) fn named(name: &str) -> Option<Self> {
        Some(match name {
            "exp" => Self::Exp,
            "ln" => Self::Ln,
            "log10" => Self::Log10,
            "sqrt" => Self::Sqrt,
            "sin" => Self::Sin,
            "cos" => Self::Cos,
            "atan" => Self::Atan,
            "abs" => Self::Abs,
            _ => return None,
        })
    }

    fn apply<T: Real>(self, u: T) -> T {
        match self {
            Self::Exp => u.exp(),
            Self::Ln => u.ln(),
            Self::Log10 => u.log10(),
            Self::Sqrt => u.sqrt(),
            Self::Sin => u.sin(),
            Self::Cos => u.cos(),
            Self::Atan => u.atan(),
            Self::Abs => u.abs(),
        }
    }
}

/// One step of the formula in postfix order: a tree laid flat, so that neither evaluating nor dropping
/// it recurses.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Step {
    Number(f64),
    Pi,
    X,
    /// By its place among the names.
    Coefficient(usize),
    Add,
    Subtract,
    Multiply,
    Divide,
    Power,
    Negate,
    Call(Function),
}

/// The value of well-formed steps that never need more than [`STACK_LIMIT`] places.
pub(super) fn evaluate<T: Real>(steps: &[Step], b: &[T], x: T) -> T {
    let nothing = T::of(f64::NAN);
    let mut stack = [nothing; STACK_LIMIT];
    let mut top = 0;
    for step in steps {
        let leaf = match step {
            Step::Number(value) => T::of(*value),
            Step::Pi => T::pi(),
            Step::X => x,
            Step::Coefficient(index) => b.get(*index).copied().unwrap_or(nothing),
            Step::Negate => {
                stack[top - 1] = -stack[top - 1];
                continue;
            }
            Step::Call(function) => {
                stack[top - 1] = function.apply(stack[top - 1]);
                continue;
            }
            Step::Add | Step::Subtract | Step::Multiply | Step::Divide | Step::Power => {
                top -= 1;
                stack[top - 1] = combine(*step, stack[top - 1], stack[top]);
                continue;
            }
        };
        stack[top] = leaf;
        top += 1;
    }
    stack[0]
}

/// A step with two arguments.
fn combine<T: Real>(step: Step, left: T, right: T) -> T {
    match step {
        Step::Subtract => left - right,
        Step::Multiply => left * right,
        Step::Divide => left / right,
        Step::Power => left.pow(right),
        _ => left + right,
    }
}
