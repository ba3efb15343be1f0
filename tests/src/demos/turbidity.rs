//! Turbidity probe: it stops listening at the top.

use super::{
    build::Spec,
    data::{INVENTED, number, papers, row, shuffled, temperature},
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

const LEVELS: [&str; 9] = ["20", "50", "100", "200", "300", "400", "600", "800", "1000"];

/// y = 0.05 + 4.7 (1 − exp(−x/330)) V, SD 4 mV.
pub(super) fn spec(seed: u64) -> Spec {
    let mut noise = Stream::new(seed, 16);
    let mut rows = Vec::new();
    for x in (0..3).flat_map(|_| LEVELS) {
        let y = 0.05 + 4.7 * (1.0 - (-number(x) / 330.0).exp()) + 0.004 * noise.normal();
        rows.push(row(x, y, 3, Direction::None));
    }
    let rows = shuffled(rows, &mut noise);
    let zeros = (0..10).map(|_| format!("{:.3}", 0.05 + 0.003 * noise.normal())).collect();
    Spec {
        file: "turbidity-probe",
        number: "ST-2026-0147",
        item: vec![
            (ItemField::Description, "Turbidity probe"),
            (ItemField::Identity, "TB-09"),
            (ItemField::Serial, "2231-B"),
        ],
        plan: vec![
            PlanField::Input(Quantity::new("turbidity", "FNU")),
            PlanField::Output(Quantity::new("probe output", "V")),
            PlanField::Interval(Some((0.0, 1000.0))),
            PlanField::ZeroState(ZeroState::Zero),
            PlanField::Families(["line", "quadratic", "log"].map(Text::from).to_vec()),
            PlanField::Laboratory(Text::from("Skerrow Tideworks, Water Room, Quay 3, Skerrow")),
            PlanField::Method(Text::from("WR-08 rev 2, formazin dilutions")),
            PlanField::Hazards(vec![Hazard::Chemicals]),
        ],
        papers: papers(
            "stock F-4000",
            "CRM-0930",
            "2027-01",
            StatedUncertainty::Expanded { expanded: 2.0, factor: 2.0 },
        ),
        conditions: [temperature("20.2 °C"), temperature("20.5 °C")],
        rows,
        zeros,
        heads: ("\"standard, FNU\"", "\"reading, V\""),
        story: "Nine dilutions of a stock suspension, three times each in random order.\n\
            At the low end the probe answers well; towards the top it hardly moves.\n\
            It has stopped listening: the last step is a small part of the first one.\n\
            A line is wrong, a quadratic turns round inside the range: one reading would mean two values.\n\
            No function mends this; the usable interval ends where the probe still answers.\n\
            Cut the interval, and a bend that can be described is left.",
        origin: INVENTED,
        ..Spec::default()
    }
}
