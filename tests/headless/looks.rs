//! Ten looks at one application are one observation: their mean.

use super::Bench;
use assize_core::numerics::streams::Stream;
use std::fmt::Write as _;

#[test]
fn ten_looks_at_each_of_five_applications_are_their_five_means() {
    let mut stream = Stream::new(11, 0);
    let mut looks = "standard,reading,application,look\n".to_owned();
    let mut means = "standard,reading,application\n".to_owned();
    for application in 1..=5_u32 {
        let x = 2.0 * f64::from(application);
        let settled = 1.0 + 3.0 * x + 0.1 * stream.normal();
        let ten: Vec<f64> = (0..10).map(|_| settled + 0.02 * stream.normal()).collect();
        for (look, y) in (1..).zip(&ten) {
            let _ = writeln!(looks, "{x},{y},{application},{look}");
        }
        let _ = writeln!(means, "{x},{},{application}", ten.iter().sum::<f64>() / 10.0);
    }
    let bench = Bench::new();
    let (looks, means) = (bench.file("looks.csv", looks), bench.file("means.csv", means));
    let [of_looks, of_means] = [looks, means].map(|file| bench.json(&["fit", &file, "--json"]));
    let of = |document: &serde_json::Value| -> Vec<serde_json::Value> {
        let fits = document["fits"].as_array().expect("fits");
        assert!(!fits.is_empty());
        let figures = ["family", "coefficients", "residual_sd", "degrees_of_freedom", "r_squared"];
        fits.iter().flat_map(|fit| figures.map(|key| fit[key].clone())).collect()
    };
    assert_eq!(of(&of_looks), of(&of_means));
    let line = of(&of_means);
    assert!(line[0] == "line" && line[1].is_array() && line[2].is_number() && line[3] == 3, "{line:?}");
}
