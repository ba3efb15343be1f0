//! Splits a formula into numbers, names and signs, each with its column.

use super::formula_error::{FormulaError, LENGTH_LIMIT};

/// What stands at one place of a formula.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum Token {
    Number(f64),
    Name(String),
    /// One of + − * / ^ ( ), the minus always as '-'.
    Sign(char),
    End,
}

impl Token {
    /// How a message calls it.
    pub(super) fn in_words(&self) -> String {
        match self {
            Self::Number(value) => format!("the number {value}"),
            Self::Name(name) => format!("“{name}”"),
            Self::Sign(sign) => format!("“{sign}”"),
            Self::End => "the end".to_owned(),
        }
    }
}

/// A token and the column of its first character, from 1.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Placed {
    pub token: Token,
    pub column: usize,
}

/// All tokens, the last one [`Token::End`].
pub(super) fn tokens(source: &str) -> Result<Vec<Placed>, FormulaError> {
    let text: Vec<char> = source.chars().collect();
    if text.len() > LENGTH_LIMIT {
        return Err(FormulaError::TooLong { column: LENGTH_LIMIT + 1 });
    }
    let mut out = Vec::new();
    let mut at = 0;
    while let Some(c) = text.get(at).copied() {
        let start = at;
        let token = if c.is_whitespace() {
            at += 1;
            continue;
        } else if c.is_ascii_digit() || c == '.' {
            at = number_end(&text, at);
            number(&text[start..at], start + 1)?
        } else if c.is_alphabetic() {
            while text.get(at).is_some_and(|c| c.is_alphanumeric() || *c == '_') {
                at += 1;
            }
            Token::Name(text[start..at].iter().collect())
        } else {
            at += 1;
            Token::Sign(sign(c, start + 1)?)
        };
        out.push(Placed { token, column: start + 1 });
    }
    out.push(Placed { token: Token::End, column: text.len() + 1 });
    Ok(out)
}

/// The sign as the parser knows it.
fn sign(c: char, column: usize) -> Result<char, FormulaError> {
    match c {
        '+' | '-' | '*' | '/' | '^' | '(' | ')' => Ok(c),
        '−' => Ok('-'),
        '×' | '·' => Ok('*'),
        ',' => {
            Err(FormulaError::Unexpected { column, found: "“,”".to_owned(), expected: "a point as decimal mark" })
        }
        _ => Err(FormulaError::Unexpected {
            column,
            found: format!("“{c}”"),
            expected: "a number, x, a function, a parenthesis or one of + − * / ^",
        }),
    }
}

/// Where the number starting at `at` ends: digits, a point, digits, and an exponent if it has digits.
fn number_end(text: &[char], mut at: usize) -> usize {
    let digits = |from: usize| {
        let rest = text[from..].iter();
        from + rest.take_while(|c| c.is_ascii_digit()).count()
    };
    at = digits(at);
    if text.get(at) == Some(&'.') {
        at = digits(at + 1);
    }
    if !matches!(text.get(at), Some('e' | 'E')) {
        return at;
    }
    let signed = matches!(text.get(at + 1), Some('+' | '-' | '−'));
    let first = at + 1 + usize::from(signed);
    if text.get(first).is_some_and(char::is_ascii_digit) {
        at = digits(first);
    }
    at
}

fn number(characters: &[char], column: usize) -> Result<Token, FormulaError> {
    let text: String = characters.iter().map(|c| if *c == '−' { '-' } else { *c }).collect();
    let Ok(value) = text.parse::<f64>() else {
        return Err(FormulaError::Unexpected {
            column,
            found: format!("“{text}”"),
            expected: "a number such as 12, 0.5 or 1.6e-3",
        });
    };
    if value.is_finite() { Ok(Token::Number(value)) } else { Err(FormulaError::TooLarge { column }) }
}
