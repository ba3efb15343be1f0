//! Reads a typed formula by binding powers (a Pratt parser) into postfix steps.

use super::formula::{FormulaError, Function, Step};
use super::formula_tokens::{Placed, Token, tokens};

/// Deepest nesting, and with it the most values that wait on the evaluation stack.
pub(super) const STACK_LIMIT: usize = 64;

/// Binding power of a leading minus: weaker than ^, so that −x² is −(x²); stronger than *.
const MINUS_BINDS: u8 = 5;

const OPERAND: &str = "a number, x, pi, a function or “(”";
const OPERATOR: &str = "one of + − * / ^ or the end";
const OPERATOR_OR_CLOSE: &str = "one of + − * / ^ or “)”";

/// The steps of a formula in postfix order.
pub(super) fn parse(source: &str) -> Result<Vec<Step>, FormulaError> {
    let mut parser = Parser { tokens: tokens(source)?, at: 0, depth: 0, steps: Vec::new() };
    parser.expression(0)?;
    match parser.here() {
        Placed { token: Token::End, .. } => Ok(parser.steps),
        other => Err(unexpected(other, OPERATOR)),
    }
}

struct Parser {
    tokens: Vec<Placed>,
    at: usize,
    depth: usize,
    steps: Vec<Step>,
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
            self.steps.push(step);
        }
        self.depth -= 1;
        Ok(())
    }

    fn operand(&mut self) -> Result<(), FormulaError> {
        let place = self.take();
        match &place.token {
            Token::Number(value) => self.steps.push(Step::Number(*value)),
            Token::Sign('(') => {
                self.expression(0)?;
                self.close()?;
            }
            Token::Sign('-') => {
                self.expression(MINUS_BINDS)?;
                self.steps.push(Step::Negate);
            }
            Token::Sign('+') => self.expression(MINUS_BINDS)?,
            Token::Name(name) => self.name(name, place.column)?,
            Token::Sign(_) | Token::End => return Err(unexpected(&place, OPERAND)),
        }
        Ok(())
    }

    fn name(&mut self, name: &str, column: usize) -> Result<(), FormulaError> {
        match name {
            "x" => self.steps.push(Step::X),
            "pi" | "π" => self.steps.push(Step::Number(std::f64::consts::PI)),
            _ => {
                let Some(function) = Function::named(name) else {
                    return Err(FormulaError::UnknownName { column, name: name.to_owned() });
                };
                let open = self.take();
                if open.token != Token::Sign('(') {
                    return Err(unexpected(&open, "“(” after the name of a function"));
                }
                self.expression(0)?;
                self.close()?;
                self.steps.push(Step::Call(function));
            }
        }
        Ok(())
    }

    fn close(&mut self) -> Result<(), FormulaError> {
        let place = self.take();
        if place.token == Token::Sign(')') { Ok(()) } else { Err(unexpected(&place, OPERATOR_OR_CLOSE)) }
    }
}
