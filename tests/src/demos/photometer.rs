//! Nitrate photometer: straight, but the scatter grows with the level; the detection limit matters.

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

const LEVELS: [&str; 6] = ["0.5", "1", "2", "4", "7", "10"];

/// y = 0.0031 + 0.0872 x, SD 0.0012 + 0.0016 x.
pub(super) fn spec(seed: u64) -> Spec {
    let mut noise = Stream::new(seed, 4);
    let mut rows = Vec::new();
    for x in (0..5).flat_map(|_| LEVELS) {
        let value = number(x);
        let sd = 0.0012 + 0.0016 * value;
        rows.push(row(x, 0.0031 + 0.0872 * value + sd * noise.normal(), 4, Direction::None));
    }
    let rows = shuffled(rows, &mut noise);
    let zeros = (0..10).map(|_| format!("{:.4}", 0.0031 + 0.0012 * noise.normal())).collect();
    Spec {
        file: "nitrate-photometer",
        number: "ST-2026-0145",
        item: vec![
            (ItemField::Description, "Nitrate photometer"),
            (ItemField::Identity, "NP-2"),
            (ItemField::Serial, "30-0771"),
        ],
        plan: vec![
            PlanField::Input(Quantity::new("nitrate", "mg/L")),
            PlanField::Output(Quantity::new("absorbance", "")),
            PlanField::Interval(Some((0.0, 10.0))),
            PlanField::ZeroState(ZeroState::Zero),
            PlanField::Laboratory(Text::from("Skerrow Tideworks, Water Room, Quay 3, Skerrow")),
            PlanField::Method(Text::from("WR-03 rev 6, zinc reduction")),
            PlanField::Hazards(vec![Hazard::Chemicals]),
        ],
        papers: papers(
            "stock N-14",
            "CRM-2218",
            "2027-03",
            StatedUncertainty::Expanded { expanded: 0.02, factor: 2.0 },
        ),
        conditions: [temperature("20.0 °C"), temperature("20.4 °C")],
        rows,
        zeros,
        heads: ("\"standard, mg/L\"", "reading"),
        story: "Six dilutions, five applications of each in random order, ten blanks.\n\
            The line is straight: no function will do better.\n\
            But the residual plot is a funnel: high levels scatter many times more than low ones.\n\
            Unweighted, the noisy top has the say over the quiet bottom, where the question is asked.\n\
            Weights such as 1/x give each level its due.\n\
            The blanks tell how small a nitrate level is more than zero.\n\
            Watch the detection limit: from the blanks it is small, from the scatter of the whole line it is not.",
        origin: INVENTED,
        ..Spec::default()
    }
}
