//! Mooring tension link: slightly bent, rising and falling runs, a measured zero.

use super::{
    build::Spec,
    data::{INVENTED, number, papers, row, temperature},
};
use assize_core::{
    numerics::streams::Stream,
    project::{
        command::{ItemField, PlanField},
        plan::{Hazard, Quantity, ZeroState},
    },
    quantity::Text,
    readings::Direction,
    standards::StatedUncertainty,
};

const LEVELS: [&str; 11] = ["0.25", "0.5", "1", "1.5", "2", "2.5", "3", "3.5", "4", "4.5", "5"];

/// y = 0.0026 + 0.4005 x − 0.0028 x² mV/V, SD 0.8 µV/V, falling readings up to 3 µV/V higher at mid-range.
pub(super) fn spec(seed: u64) -> Spec {
    let mut noise = Stream::new(seed, 1);
    let curve = |x: f64| 0.0026 + 0.4005 * x - 0.0028 * x * x;
    let lag = |x: f64| 0.0015 * 4.0 * (x / 5.0) * (1.0 - x / 5.0);
    let mut rows = Vec::new();
    for x in LEVELS {
        rows.push(row(x, curve(number(x)) - lag(number(x)) + 0.0008 * noise.normal(), 4, Direction::Rising));
    }
    for x in LEVELS.iter().rev() {
        rows.push(row(x, curve(number(x)) + lag(number(x)) + 0.0008 * noise.normal(), 4, Direction::Falling));
    }
    let zeros = (0..8).map(|_| format!("{:.4}", 0.0026 + 0.0008 * noise.normal())).collect();
    Spec {
        file: "tension-link",
        number: "ST-2026-0142",
        item: vec![
            (ItemField::Description, "Mooring tension link"),
            (ItemField::Identity, "TL-07"),
            (ItemField::Serial, "11482"),
            (ItemField::Condition, "as received, cable re-terminated"),
            (ItemField::Received, "2026-10-28"),
        ],
        plan: vec![
            PlanField::Input(Quantity::new("tension", "kN")),
            PlanField::Output(Quantity::new("bridge output", "mV/V")),
            PlanField::Interval(Some((0.25, 5.0))),
            PlanField::ZeroState(ZeroState::Zero),
            PlanField::Laboratory(Text::from("Skerrow Tideworks, Instrument Workshop, Quay 3, Skerrow")),
            PlanField::Customer(Text::from("Outer Harbour buoy section")),
            PlanField::Method(Text::from("SW-12 rev 4, rising and falling")),
            PlanField::Place(Text::from("Instrument Workshop, loading frame 2")),
            PlanField::Hazards(vec![Hazard::Loads]),
        ],
        papers: papers("PR-2", "5561-26", "2027-04", StatedUncertainty::Expanded { expanded: 0.0008, factor: 2.0 }),
        conditions: [temperature("20.3 °C"), temperature("20.6 °C")],
        rows,
        zeros,
        heads: ("\"standard, kN\"", "\"reading, mV/V\""),
        story: "The buoy section hangs this link in a mooring and wants to know small pulls as well as storms.\n\
            Eleven loads were applied on the loading frame, first rising, then falling, eight zeros before them.\n\
            A straight line looks perfect on the curve plot: R² is 0.9999.\n\
            The residuals say otherwise: they bow, the ends read low and the middle high.\n\
            One more term takes the bow away; what is left is scatter.\n\
            Look again at the marks: rising readings lie below falling ones.\n\
            That difference is hysteresis; it does not average out when the link is used one way.\n\
            Near zero the line misses the measured zero; the quadratic meets it.\n\
            The detection limit answers: how small a pull is more than nothing.",
        origin: INVENTED,
        ..Spec::default()
    }
}
