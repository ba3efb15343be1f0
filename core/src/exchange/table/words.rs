//! The words that cells may hold for kind, stage and direction.

/// What a row is for.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Kind {
    /// A standard with its reading.
    Standard,
    /// A zero reading: nothing applied.
    Zero,
    /// A reading that belongs to the detection limit only.
    ForLimit,
}

/// At which point of the work a reading was taken.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Stage {
    /// Before anything was adjusted.
    AsFound,
    /// After adjustment.
    AsLeft,
    /// To check the result.
    Check,
}

/// How the standard was approached.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Direction {
    /// From below.
    Rising,
    /// From above.
    Falling,
    /// At the end where rising turns to falling, or the reverse.
    TurningPoint,
    /// Said to have none.
    Undirected,
}

/// A closed set of words.
pub(super) trait Word: Sized {
    /// The words for a message.
    const ACCEPTED: &'static str;
    /// The meaning of a word in lower case, `-` and `_` replaced by a space.
    fn of(word: &str) -> Option<Self>;

    /// The meaning of a cell.
    fn from_cell(text: &str) -> Option<Self> {
        Self::of(&text.trim().to_lowercase().replace(['-', '_'], " "))
    }
}

impl Word for Kind {
    const ACCEPTED: &'static str = "standard, zero, for-limit";
    fn of(word: &str) -> Option<Self> {
        match word {
            "standard" | "std" => Some(Self::Standard),
            "zero" | "blank" => Some(Self::Zero),
            "for limit" | "limit" => Some(Self::ForLimit),
            _ => None,
        }
    }
}

impl Word for Stage {
    const ACCEPTED: &'static str = "as found, as left, check";
    fn of(word: &str) -> Option<Self> {
        match word {
            "as found" | "asfound" | "found" => Some(Self::AsFound),
            "as left" | "asleft" | "left" => Some(Self::AsLeft),
            "check" => Some(Self::Check),
            _ => None,
        }
    }
}

impl Word for Direction {
    const ACCEPTED: &'static str = "rising (up, ▲), falling (down, ▽), turning point, none";
    fn of(word: &str) -> Option<Self> {
        match word {
            "rising" | "up" | "increasing" | "ascending" | "▲" | "△" | "↑" => Some(Self::Rising),
            "falling" | "down" | "decreasing" | "descending" | "▼" | "▽" | "↓" => Some(Self::Falling),
            "turning point" | "turning" | "turn" => Some(Self::TurningPoint),
            "none" | " " | "–" => Some(Self::Undirected),
            _ => None,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn words_are_known_in_their_usual_forms() {
        for text in ["rising", "Up", " ▲ ", "INCREASING"] {
            assert_eq!(Direction::from_cell(text), Some(Direction::Rising), "{text}");
        }
        for text in ["falling", "down", "▽", "▼"] {
            assert_eq!(Direction::from_cell(text), Some(Direction::Falling), "{text}");
        }
        assert_eq!(Direction::from_cell("turning_point"), Some(Direction::TurningPoint));
        for text in ["none", "-", "–"] {
            assert_eq!(Direction::from_cell(text), Some(Direction::Undirected), "{text}");
        }
        assert_eq!(Kind::from_cell("For-Limit"), Some(Kind::ForLimit));
        assert_eq!(Kind::from_cell("for_limit"), Some(Kind::ForLimit));
        assert_eq!(Stage::from_cell("As-Found"), Some(Stage::AsFound));
        assert_eq!(Stage::from_cell("as left"), Some(Stage::AsLeft));
        for text in ["sideways", "", "upp"] {
            assert_eq!(Direction::from_cell(text), None, "{text}");
            assert_eq!(Kind::from_cell(text), None, "{text}");
            assert_eq!(Stage::from_cell(text), None, "{text}");
        }
    }
}
