//! Reads a typed formula by binding powers (a Pratt parser) into postfix steps.

use super::formula_error::{COEFFICIENT_LIMIT, FormulaError};
use super::formula_steps::{Function, STACK_LIMIT, Step};
use super::formula_tokens::{Placed, Token, tokens};

/// What a name that is neither x, pi nor a function means.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Names {
    /// Nothing: it is refused.
    Known,
    /// A coefficient.
    Free,
}

/// A formula that was read.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Parsed {
    /// In postfix order.
    pub steps: Vec<Step>,
    /// The coefficients, in the order of their first appearance.
    pub names: Vec<String>,
}

/// Binding power of a leading minus: weaker than ^, so that −x² is −(x²); stronger than *.
const MINUS_BINDS: u8 = 5;

const OPERAND: &str = "a number, x, pi, a function or “(”";
const FREE_OPERAND: &str = "a number, x, pi, a coefficient, a function or “(”";
const OPERATOR: &str = "one of + − * / ^ or the end";
const OPERATOR_OR_CLOSE: &str = "one of + − * / ^ or “)”";

/// The steps of a formula in postfix order, and its coefficients.
pub(super) fn parse(source: &str, kind: Names) -> Result<Parsed, FormulaError> {
    let out = Parsed { steps: Vec::new(), names: Vec::new() };
    let mut parser = Parser { tokens: tokens(source)?, at: 0, depth: 0, kind, out };
    parser.expression(0)?;
    let end = parser.here();
    if end.token != Token::End {
        return Err(unexpected(end, OPERATOR));
    }
    if kind == Names::Free && parser.out.names.is_empty() {
        return Err(FormulaError::NothingToFit { column: end.column });
    }
    Ok(parser.out)
}

struct Parser {
    tokens: Vec<Placed>,
    at: usize,
    depth: usize,
    kind: Names,
    out: Parsed,
}

fn unexpected(place: &Placed, expected: &'static str) -> FormulaError {
    FormulaError::Unexpected { column: place.column, found: place.token.in_words(), expected }
}

/// Left and right binding power and the step of an operator between two operands.
fn infix(token: &Token) -> Option<(u8, u8, Step)> {
    let Token::Sign(sign) = token else {
        return None;
    };
    match sign {
        '+' => Some((1, 2, Step::Add)),
        '-' => Some((1, 2, Step::Subtract)),
        '*' => Some((3, 4, Step::Multiply)),
        '/' => Some((3, 4, Step::Divide)),
        // Right binds weaker than left: 2^3^2 is 2^(3^2).
        '^' => Some((8, 7, Step::Power)),
        _ => None,
    }
}

impl Parser {
    /// The token in hand; the last one is always the end and is never passed.
    fn here(&self) -> &Placed {
        &self.tokens[self.at.min(self.tokens.len() - 1)]
    }

    fn take(&mut self) -> Placed {
        let place = self.here().clone();
        self.at += 1;
        place
    }

    /// An operand and all operators that bind at least as strongly as `least`.
    fn expression(&mut self, least: u8) -> Result<(), FormulaError> {
        self.depth += 1;
        // Each level leaves at most one value waiting, and the innermost needs two.
        if self.depth + 1 >= STACK_LIMIT {
            return Err(FormulaError::TooDeep { column: self.here().column });
        }
        self.operand()?;
        while let Some((left, right, step)) = infix(&self.here().token) {
            if left < least {
                break;
            }
            self.at += 1;
            self.expression(right)?;
            self.out.steps.push(step);
        }
        self.depth -= 1;
        Ok(())
    }

    fn operand(&mut self) -> Result<(), FormulaError> {
        let place = self.take();
        match &place.token {
            Token::Number(value) => self.out.steps.push(Step::Number(*value)),
            Token::Sign('(') => {
                self.expression(0)?;
                self.close()?;
            }
            Token::Sign('-') => {
                self.expression(MINUS_BINDS)?;
                self.out.steps.push(Step::Negate);
            }
            Token::Sign('+') => self.expression(MINUS_BINDS)?,
            Token::Name(name) => self.name(name, place.column)?,
            Token::Sign(_) | Token::End => {
                let expected = if self.kind == Names::Free { FREE_OPERAND } else { OPERAND };
                return Err(unexpected(&place, expected));
            }
        }
        Ok(())
    }

    fn name(&mut self, name: &str, column: usize) -> Result<(), FormulaError> {
        let step = match name {
            "x" => Step::X,
            "pi" | "π" => Step::Pi,
            _ => match Function::named(name) {
                Some(function) => {
                    self.argument()?;
                    Step::Call(function)
                }
                None if self.kind == Names::Known => {
                    return Err(FormulaError::UnknownName { column, name: name.to_owned() });
                }
                None => Step::Coefficient(self.coefficient(name, column)?),
            },
        };
        self.out.steps.push(step);
        Ok(())
    }

    /// The argument of a function in its parentheses.
    fn argument(&mut self) -> Result<(), FormulaError> {
        let open = self.take();
        if open.token != Token::Sign('(') {
            return Err(unexpected(&open, "“(” after the name of a function"));
        }
        self.expression(0)?;
        self.close()
    }

    /// The number of a coefficient, a new one if it was not seen before.
    fn coefficient(&mut self, name: &str, column: usize) -> Result<usize, FormulaError> {
        if let Some(index) = self.out.names.iter().position(|known| known == name) {
            return Ok(index);
        }
        let lower = name.to_lowercase();
        if lower != name && (matches!(lower.as_str(), "x" | "pi" | "π") || Function::named(&lower).is_some()) {
            return Err(FormulaError::Capitals { column, name: name.to_owned(), known: lower });
        }
        if self.here().token == Token::Sign('(') {
            return Err(FormulaError::NoFunction { column, name: name.to_owned() });
        }
        if self.out.names.len() == COEFFICIENT_LIMIT {
            return Err(FormulaError::TooMany { column, name: name.to_owned() });
        }
        self.out.names.push(name.to_owned());
        Ok(self.out.names.len() - 1)
    }

    fn close(&mut self) -> Result<(), FormulaError> {
        let place = self.take();
        if place.token == Token::Sign(')') { Ok(()) } else { Err(unexpected(&place, OPERATOR_OR_CLOSE)) }
    }
}
