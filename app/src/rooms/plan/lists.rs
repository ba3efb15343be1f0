//! Texts of more than one value: numbers, an interval, per cent, conditions.

use assize_core::{project::about::Condition, quantity::number::parse_number};

/// Numbers with spaces, semicolons, or a comma and a space between them; `1,5` is one number.
///
/// # Errors
/// The first text that is no number.
pub fn numbers(typed: &str) -> Result<Vec<f64>, String> {
    pieces(typed).map(|piece| parse_number(piece, None).map_err(|e| e.to_string())).collect()
}

fn pieces(typed: &str) -> impl Iterator<Item = &str> {
    typed.split([' ', ';', '\t', '\n']).map(|piece| piece.trim_end_matches(',')).filter(|piece| !piece.is_empty())
}

/// Two numbers, the lower one first; nothing typed clears the interval.
///
/// # Errors
/// What is missing or wrong.
pub fn interval(typed: &str) -> Result<Option<(f64, f64)>, String> {
    let spread = typed.replace('…', " ").replace("..", " ").replace(" to ", " ");
    match numbers(&spread)?.as_slice() {
        [] => Ok(None),
        [low, high] if low < high => Ok(Some((*low, *high))),
        [_, _] => Err("the lower end stands first: 0.25 … 5".to_owned()),
        _ => Err("two numbers are needed: 0.25 … 5".to_owned()),
    }
}

/// A whole number from 1.
///
/// # Errors
/// What else was found.
pub fn count(typed: &str) -> Result<u32, String> {
    match typed.parse::<u32>() {
        Ok(n) if n > 0 => Ok(n),
        _ => Err(format!("{typed:?} is no count; 1 or more is accepted")),
    }
}

/// A share between 0 and 1 from per cent, with or without the sign.
///
/// # Errors
/// What is wrong with it.
pub fn percent(typed: &str) -> Result<f64, String> {
    let number = parse_number(typed.trim_end_matches('%'), None).map_err(|e| e.to_string())?;
    if number > 0.0 && number < 100.0 {
        // Through text, so that 99.9 % is the double nearest to 0.999.
        let shifted = format!("{number}e-2");
        return shifted.parse().map_err(|_| format!("{typed:?} is no share"));
    }
    Err("more than 0 % and less than 100 % is accepted".to_owned())
}

/// Conditions from a text: name, then a value that begins with a figure; semicolons between them.
///
/// # Errors
/// The piece without a value.
pub fn conditions(typed: &str) -> Result<Vec<Condition>, String> {
    typed.split(';').map(str::trim).filter(|piece| !piece.is_empty()).map(condition).collect()
}

fn condition(piece: &str) -> Result<Condition, String> {
    let wrong = || format!("{piece:?} has no value; write for example: temperature 20.3 °C");
    let (name, value) = match piece.split_once(':') {
        Some(parts) => parts,
        None => piece.split_at(value_start(piece).ok_or_else(wrong)?),
    };
    let (name, value) = (name.trim(), value.trim());
    if name.is_empty() || value.is_empty() {
        return Err(wrong());
    }
    Ok(Condition { name: name.into(), value: value.into() })
}

/// Where a figure, with or without a sign, follows a space.
fn value_start(piece: &str) -> Option<usize> {
    piece.match_indices(' ').map(|(at, _)| at).find(|at| {
        let rest = piece[*at..].trim_start().trim_start_matches(['+', '-', '−']);
        rest.starts_with(|c: char| c.is_ascii_digit())
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use assize_core::trail::sentences::words;

    #[test]
    fn numbers_with_either_mark() {
        assert_eq!(numbers("0,25 0.5; 1, 2,\n5"), Ok(vec![0.25, 0.5, 1.0, 2.0, 5.0]));
        assert_eq!(numbers(""), Ok(Vec::new()));
        assert!(numbers("1.000,5").is_err(), "a thousands mark is refused");
    }

    #[test]
    fn intervals_in_several_writings() {
        for typed in ["-5 … 5", "−5…5", "-5 .. 5", "-5 to 5", "-5 5"] {
            assert_eq!(interval(typed), Ok(Some((-5.0, 5.0))), "{typed}");
        }
        assert_eq!(interval("  "), Ok(None));
        assert!(interval("5 … 1").unwrap_err().contains("lower end"));
    }

    #[test]
    fn per_cent_and_back() {
        assert_eq!(percent("99,9 %"), Ok(0.999));
        assert_eq!(percent("5"), Ok(0.05));
        assert_eq!(words::percent(0.05), "5 %");
        assert_eq!(words::percent(0.999), "99.9 %");
        assert!(percent("100").is_err() && percent("0").is_err() && percent("five").is_err());
    }

    #[test]
    fn conditions_and_back() {
        let typed = "air temperature 20.3 °C; pressure: 1013 hPa; wind −3 m/s";
        let list = conditions(typed).unwrap();
        assert_eq!(&*list[0].name, "air temperature");
        assert_eq!(&*list[1].value, "1013 hPa");
        assert_eq!(&*list[2].value, "−3 m/s");
        assert_eq!(words::conditions(&list), "air temperature 20.3 °C; pressure 1013 hPa; wind −3 m/s");
        assert_eq!(conditions(""), Ok(Vec::new()));
        assert!(conditions("20 °C").is_err(), "a value without a name");
    }
}
