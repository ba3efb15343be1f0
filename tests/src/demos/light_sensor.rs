//! Underwater light sensor with a logarithmic amplifier: the logarithm is right, and has no zero.

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

const LEVELS: [&str; 11] = ["1", "2", "5", "10", "20", "50", "100", "200", "500", "1000", "2000"];

/// y = 0.512 + 0.44 ln x V, SD 4 mV; dark readings rest at 0.118 V.
pub(super) fn spec(seed: u64) -> Spec {
    let mut noise = Stream::new(seed, 3);
    let mut rows = Vec::new();
    for x in LEVELS.iter().chain(&LEVELS) {
        rows.push(row(x, 0.512 + 0.44 * number(x).ln() + 0.004 * noise.normal(), 3, Direction::None));
    }
    let rows = shuffled(rows, &mut noise);
    let zeros = (0..10).map(|_| format!("{:.3}", 0.118 + 0.003 * noise.normal())).collect();
    Spec {
        file: "light-sensor",
        number: "ST-2026-0144",
        item: vec![
            (ItemField::Description, "Underwater light sensor"),
            (ItemField::Identity, "LS-03"),
            (ItemField::Serial, "PAR-552"),
        ],
        plan: vec![
            PlanField::Input(Quantity::new("photon flux density", "µmol m⁻² s⁻¹")),
            PlanField::Output(Quantity::new("amplifier output", "V")),
            PlanField::Interval(Some((1.0, 2000.0))),
            PlanField::ZeroState(ZeroState::Zero),
            PlanField::Laboratory(Text::from("Skerrow Tideworks, Instrument Workshop, Quay 3, Skerrow")),
            PlanField::Method(Text::from("SW-19 rev 1, lamp bench")),
            PlanField::Hazards(vec![Hazard::Mains]),
        ],
        papers: papers("LB-1", "L-0442-26", "2027-01", StatedUncertainty::Limits(0.003)),
        conditions: [temperature("21.0 °C"), temperature("21.2 °C")],
        rows,
        zeros,
        heads: ("\"standard, µmol m⁻² s⁻¹\"", "\"reading, V\""),
        story: "The sensor looks at sunlight under water, from dusk to noon: three decades in one instrument.\n\
            Its amplifier takes the logarithm, so each tenfold of light adds one volt.\n\
            Line and quadratic are the wrong shape by hundreds of units; their residuals show it at a glance.\n\
            Against the logarithm only scatter is left.\n\
            In the dark the amplifier rests at 0.12 V, below what 1 unit of light gives.\n\
            But a logarithm has no value at zero: the dark band cannot be traced to a smallest light.\n\
            That is said in words; no number is made up for it.",
        origin: INVENTED,
        ..Spec::default()
    }
}
