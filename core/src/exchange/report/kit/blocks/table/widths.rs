//! How wide each column is.

/// What a column asks for, in points, and its share of what is left over.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Wish {
    /// Width at which nothing wraps.
    pub natural: f32,
    /// Width of the longest word.
    pub word: f32,
    /// Share of what is left over.
    pub weight: f32,
}

/// Deals `room` points out to columns; the widths add up to `room`.
///
/// With room to spare each column gets what it needs and its share of the rest. Else the columns
/// with the longest texts wrap them, down to one common width, yet not below their longest word.
/// If not even the longest words fit, those are cut to one common width.
pub(super) fn widths(wishes: &[Wish], room: f32) -> Vec<f32> {
    let natural: f32 = wishes.iter().map(|wish| wish.natural).sum();
    if natural <= room {
        return spread(wishes, room - natural);
    }
    let (least, most): (Vec<f32>, Vec<f32>) = if fits_words(wishes, room) {
        wishes.iter().map(|wish| (wish.word, wish.natural)).unzip()
    } else {
        wishes.iter().map(|wish| (0.0, wish.word)).unzip()
    };
    let pairs = || least.iter().zip(&most);
    let capped = |cap: f32| pairs().map(move |(&least, &most)| most.min(cap).max(least));
    let cap = common_cap(room, |cap| capped(cap).sum());
    capped(cap).collect()
}

/// Whether each column can have the width of its longest word.
pub(super) fn fits_words(wishes: &[Wish], room: f32) -> bool {
    wishes.iter().map(|wish| wish.word).sum::<f32>() <= room
}

fn spread(wishes: &[Wish], rest: f32) -> Vec<f32> {
    let weight = |wish: &Wish| wish.weight.max(0.0);
    let total: f32 = wishes.iter().map(weight).sum();
    let share = |wish: &Wish| {
        if total > 0.0 { weight(wish) / total } else { 1.0 / wishes.len() as f32 }
    };
    wishes.iter().map(|wish| wish.natural + rest * share(wish)).collect()
}

/// The common width at which all columns together fill `room`, by halving: their sum `total`
/// grows with it. Thirty halvings of a page are finer than a printer's dot.
fn common_cap(room: f32, total: impl Fn(f32) -> f32) -> f32 {
    let (mut low, mut high) = (0.0, room);
    for _ in 0..30 {
        let middle = (low + high) / 2.0;
        if total(middle) <= room {
            low = middle;
        } else {
            high = middle;
        }
    }
    low
}

#[cfg(test)]
mod tests {
    use super::{Wish, widths};

    fn wish(natural: f32, word: f32, weight: f32) -> Wish {
        Wish { natural, word, weight }
    }

    fn assert_close(found: &[f32], expected: &[f32]) {
        assert_eq!(found.len(), expected.len());
        for (f, e) in found.iter().zip(expected) {
            assert!((f - e).abs() < 1e-3, "{found:?} is not {expected:?}");
        }
    }

    #[test]
    fn spare_width_goes_by_weight() {
        let wishes = [wish(40.0, 20.0, 1.0), wish(60.0, 20.0, 3.0)];
        assert_close(&widths(&wishes, 200.0), &[65.0, 135.0]);
    }

    #[test]
    fn without_weights_spare_width_goes_in_equal_parts() {
        let wishes = [wish(40.0, 20.0, 0.0), wish(60.0, 20.0, 0.0)];
        assert_close(&widths(&wishes, 200.0), &[90.0, 110.0]);
    }

    #[test]
    fn long_texts_give_way_before_short_ones_do() {
        let wishes = [wish(60.0, 20.0, 1.0), wish(400.0, 50.0, 1.0), wish(300.0, 90.0, 1.0)];
        assert_close(&widths(&wishes, 220.0), &[60.0, 70.0, 90.0]);
    }

    #[test]
    fn endless_words_are_cut_and_short_ones_are_not() {
        let wishes = [wish(30.0, 30.0, 1.0), wish(900.0, 900.0, 1.0), wish(500.0, 500.0, 1.0)];
        assert_close(&widths(&wishes, 200.0), &[30.0, 85.0, 85.0]);
    }
}
