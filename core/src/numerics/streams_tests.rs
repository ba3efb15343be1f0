//! Streams: the same everywhere, different from each other, with the moments they should have.

use super::streams::Stream;

#[test]
fn the_same_seed_and_number_give_the_same_bits() {
    let draw = |seed, number| {
        let mut s = Stream::new(seed, number);
        [s.bits(), s.bits(), s.bits()]
    };
    assert_eq!(draw(7, 0), draw(7, 0));
    assert_ne!(draw(7, 0), draw(7, 1));
    assert_ne!(draw(7, 0), draw(8, 0));
}

/// Known answer: ChaCha8 with key and nonce zero, first block (test vectors of
/// draft-strombergson-chacha-test-vectors-01, TC1, from memory): 3e 00 ef 2f 89 5f 40 d6.
#[test]
fn the_generator_is_chacha_with_eight_rounds() {
    let expected = u64::from_le_bytes([0x3e, 0x00, 0xef, 0x2f, 0x89, 0x5f, 0x40, 0xd6]);
    assert_eq!(Stream::new(0, 0).bits(), expected);
}

#[test]
fn moments_of_uniforms_and_normals() {
    const N: u32 = 200_000;
    let n = f64::from(N);
    let mut s = Stream::new(20, 0);
    let (mut low, mut high, mut mean) = (1.0_f64, 0.0_f64, 0.0);
    for _ in 0..N {
        let u = s.uniform();
        (low, high, mean) = (low.min(u), high.max(u), mean + u / n);
    }
    assert!(low > 0.0 && high < 1.0);
    // Four standard deviations of the mean of N uniforms.
    assert!((mean - 0.5).abs() < 4.0 / (12.0 * n).sqrt());
    let mut moments = [0.0; 4];
    for _ in 0..N {
        let z = s.normal();
        for (k, m) in (1..).zip(&mut moments) {
            *m += z.powi(k) / n;
        }
    }
    // Variances of the sample moments of the normal: 1, 2, 15, 96 over N.
    for (m, (expected, variance)) in moments.iter().zip([(0.0, 1.0), (1.0, 2.0), (0.0, 15.0), (3.0, 96.0)]) {
        assert!((m - expected).abs() < 4.0 * f64::sqrt(variance / n), "{moments:?}");
    }
}

#[test]
fn whole_numbers_are_even_and_in_range() {
    let mut s = Stream::new(21, 0);
    assert_eq!(s.below(0), 0);
    assert_eq!(s.below(1), 0);
    let mut counts = [0_u32; 7];
    for _ in 0..70_000 {
        counts[usize::try_from(s.below(7)).unwrap()] += 1;
    }
    let chi2: f64 = counts.iter().map(|c| (f64::from(*c) - 1e4).powi(2) / 1e4).sum();
    // Upper 0.1 % point of χ² with 6 degrees of freedom.
    assert!(chi2 < 22.46, "{chi2}");
}
