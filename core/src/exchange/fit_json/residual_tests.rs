//! Tests of the residuals with their p; each is `null` where it does not exist.

use crate::{
    fit::Fit,
    inference::{
        breusch_pagan::breusch_pagan,
        cochran::cochran,
        durbin_watson::{DurbinWatsonReference, Method, durbin_watson},
        normality::normality,
        runs::runs,
    },
    project::evaluate::{Evaluation, FitEvaluation},
};
use serde_json::{Map, Value, json};

/// How each p is found, for the settings of the document.
pub(super) const METHODS: [(&str, &str); 6] = [
    (
        "durbin_watson",
        "exact distribution for the design, in run order (a Beta curve above 500 observations); p two-sided, p_alike for neighbours that copy each other; null without a recorded run order",
    ),
    ("shapiro_wilk", "Royston 1995 on whitened residuals"),
    ("runs", "exact, given the numbers above and below; few runs, one-sided; level means where there are repeats"),
    ("breusch_pagan", "Koenker's n R² of squared residuals on the fitted value, chi-square with 1"),
    ("cochran", "largest variance of repeats, F with Bonferroni"),
    ("chi_square", "chi-square, upper tail, absolute weights only"),
];

/// The tests of one fit.
pub(super) fn tests(evaluation: &Evaluation, e: &FitEvaluation) -> Map<String, Value> {
    let fit = &e.fit;
    let entries = [
        ("durbin_watson", serial(fit, run_order(evaluation, e))),
        ("shapiro_wilk", json!(normality(fit).map(|n| json!({"w": n.w, "p": n.p, "uninformative": n.uninformative})))),
        ("runs", json!(runs(fit).map(|r| json!({"runs": r.runs, "above": r.above, "below": r.below, "p": r.p})))),
        (
            "breusch_pagan",
            json!(breusch_pagan(fit).map(|b| json!({"statistic": b.lm, "p": b.p, "f": b.f.f, "f_p": b.f.p}))),
        ),
        ("cochran", json!(cochran(fit).map(|c| json!({"x": c.x, "sd": c.sd, "p": c.p})))),
    ];
    entries.into_iter().map(|(key, value)| (key.to_owned(), value)).collect()
}

/// Run order of the observations, where every one has its place.
fn run_order(evaluation: &Evaluation, e: &FitEvaluation) -> Option<Vec<f64>> {
    e.used.iter().map(|&i| evaluation.observations[i].order).collect()
}

fn serial(fit: &Fit, order: Option<Vec<f64>>) -> Value {
    let found = order.and_then(|order| durbin_watson(fit, &DurbinWatsonReference::new(fit, &order)?));
    json!(found.map(|d| {
        let method = match d.method {
            Method::Exact => "exact",
            Method::Beta => "beta",
        };
        json!({"d": d.d, "p": d.p, "p_alike": d.p_alike, "method": method})
    }))
}
