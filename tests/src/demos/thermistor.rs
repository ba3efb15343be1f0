//! Water thermistor: none of line, quadratic and logarithm is good enough, Steinhart–Hart is.

use super::{
    build::Spec,
    data::{INVENTED, number, papers, row, shuffled, temperature},
};
use assize_core::{
    model::Family,
    numerics::streams::Stream,
    project::{
        columns::ColumnSpec,
        command::{ItemField, PlanField},
        plan::{Hazard, Quantity, ZeroState},
    },
    quantity::Text,
    readings::Direction,
    standards::StatedUncertainty,
};

const LEVELS: [&str; 8] = ["0.5", "5", "10", "15", "20", "25", "30", "35"];

/// R = exp of the root of 1/T = A + B ln R + C (ln R)³, a 10 kΩ bead; SD 0.01 % of the reading.
pub(super) fn spec(seed: u64) -> Spec {
    let mut noise = Stream::new(seed, 2);
    let mut rows = Vec::new();
    for x in LEVELS.iter().chain(&LEVELS).chain(&["0.5"; 4]) {
        let r = kilohms(number(x));
        rows.push(row(x, r * (1.0 + 1e-4 * noise.normal()), 4, Direction::None));
    }
    let rows = shuffled(rows, &mut noise);
    Spec {
        file: "water-thermistor",
        number: "ST-2026-0143",
        item: vec![
            (ItemField::Description, "Water temperature probe"),
            (ItemField::Identity, "WT-21"),
            (ItemField::Serial, "T-0387"),
        ],
        plan: vec![
            PlanField::Input(Quantity::new("temperature", "°C")),
            PlanField::Output(Quantity::new("resistance", "kΩ")),
            PlanField::Interval(Some((0.0, 35.0))),
            PlanField::ZeroState(ZeroState::None),
            PlanField::Families(["line", "quadratic", "log", "steinhart-hart"].map(Text::from).to_vec()),
            PlanField::Laboratory(Text::from("Skerrow Tideworks, Instrument Workshop, Quay 3, Skerrow")),
            PlanField::Method(Text::from("SW-07 rev 2, stirred bath")),
            PlanField::Hazards(vec![Hazard::Baths, Hazard::Mains]),
        ],
        papers: papers("RT-4", "T-1190-26", "2027-02", StatedUncertainty::Expanded { expanded: 0.01, factor: 2.0 }),
        conditions: [temperature("19.8 °C"), temperature("20.1 °C")],
        rows,
        heads: ("\"standard, °C\"", "\"reading, kΩ\""),
        story: "A thermistor bead in a probe, read in a stirred bath at eight temperatures, twice each, in random order.\n\
            Its resistance falls from 31 kΩ to under 7 kΩ: far from straight.\n\
            The line is hopeless, the quadratic waves by half a degree, the logarithm bends the other way.\n\
            None of these three is good enough, and the program says so instead of picking the least bad.\n\
            The repeats agree to a few millikelvin: the misfit is the function's, not the bath's.\n\
            The right shape for such a bead relates 1/T to ln R (Steinhart and Hart, 1968): the plan names it, and it leaves only scatter.\n\
            °C has no state of nothing, so there is no detection limit here.\n\
            What can be asked is the smallest change near the cold end.",
        columns: [Family::Polynomial(1), Family::Polynomial(2), Family::Log, Family::SteinhartHart]
            .into_iter()
            .map(ColumnSpec::plain)
            .collect(),
        origin: INVENTED,
        ..Spec::default()
    }
}

/// Resistance at a Celsius temperature by bisection of the Steinhart–Hart equation (invented coefficients).
fn kilohms(celsius: f64) -> f64 {
    let inverse = 1.0 / (celsius + 273.15);
    let (mut low, mut high) = (5.0_f64, 14.0_f64);
    for _ in 0..100 {
        let middle = f64::midpoint(low, high);
        let found = 1.129e-3 + 2.341e-4 * middle + 8.78e-8 * middle.powi(3);
        if found < inverse { low = middle } else { high = middle }
    }
    low.exp() / 1000.0
}
