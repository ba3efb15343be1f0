//! Level transmitter: a live zero, a declared function, errors against it.

use super::{
    build::Spec,
    data::{INVENTED, number, papers, row, temperature},
};
use assize_core::{
    numerics::streams::Stream,
    project::{
        columns::Declared,
        command::{ItemField, PlanField},
        plan::{Hazard, Limits, Quantity, ZeroState},
    },
    quantity::Text,
    readings::Direction,
    standards::StatedUncertainty,
};

const LEVELS: [&str; 6] = ["0", "2", "4", "6", "8", "10"];

/// y = 4.012 + 1.5985 x mA, SD 2 µA; nominal 4 + 1.6 x.
pub(super) fn spec(seed: u64) -> Spec {
    let mut noise = Stream::new(seed, 5);
    let curve = |x: f64| 4.012 + 1.5985 * x;
    let mut rows = Vec::new();
    for (run, direction) in
        [Direction::Rising, Direction::Falling, Direction::Rising, Direction::Falling].iter().enumerate()
    {
        let mut levels = LEVELS;
        if run % 2 == 1 {
            levels.reverse();
        }
        for x in levels {
            rows.push(row(x, curve(number(x)) + 0.002 * noise.normal(), 3, *direction));
        }
    }
    let zeros = (0..7).map(|_| format!("{:.3}", curve(0.0) + 0.002 * noise.normal())).collect();
    Spec {
        file: "level-transmitter",
        number: "ST-2026-0146",
        item: vec![
            (ItemField::Description, "Level transmitter"),
            (ItemField::Identity, "LT-15"),
            (ItemField::Serial, "88-4410"),
        ],
        plan: vec![
            PlanField::Input(Quantity::new("level", "m")),
            PlanField::Output(Quantity::new("loop current", "mA")),
            PlanField::Interval(Some((0.0, 10.0))),
            PlanField::ZeroState(ZeroState::LiveZero),
            PlanField::Limits(Some(Limits::Absolute(0.02))),
            PlanField::DecisionRule(Text::from("simple acceptance, agreed 2026-10-20")),
            PlanField::Laboratory(Text::from("Skerrow Tideworks, Instrument Workshop, Quay 3, Skerrow")),
            PlanField::Method(Text::from("SW-03 rev 9, water column")),
            PlanField::Hazards(vec![Hazard::Pressure]),
        ],
        papers: papers("WC-1", "P-0913-26", "2027-06", StatedUncertainty::Expanded { expanded: 0.0006, factor: 2.0 }),
        conditions: [temperature("18.9 °C"), temperature("19.4 °C")],
        declared: Some(Declared { formula: Text::from("4 + 1.6*x"), origin: Text::from("nominal, 4 mA to 20 mA") }),
        rows,
        zeros,
        heads: ("\"standard, m\"", "\"reading, mA\""),
        story: "The transmitter promises 4 mA at no water and 20 mA at ten metres.\n\
            That promise is the declared function; nothing is fitted to it, its residuals are the errors.\n\
            The instrument reads high at the empty end and loses a little towards the top.\n\
            A straight line fitted to the readings leaves only scatter: the instrument is straight, its numbers are not nominal.\n\
            Nothing applied gives 4 mA, a live zero: the near-zero row stays folded until asked for.\n\
            Limits of ±0.02 m were agreed before the first reading.",
        origin: INVENTED,
        ..Spec::default()
    }
}
