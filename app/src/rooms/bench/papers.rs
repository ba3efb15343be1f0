//! What stands on the papers of standards: texts of the fields, and the commands they become; knows no window.

use assize_core::{
    project::{
        Project,
        command::{Command, StandardsCommand},
    },
    quantity::{Text, number::parse_number},
    standards::{StandardId, StandardPapers, StatedUncertainty},
    trail::sentences::words,
};

/// Whose papers are shown.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Whose {
    /// Those of all standards.
    #[default]
    All,
    /// Those of one.
    One(StandardId),
}

/// A field on the papers.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum PaperField {
    /// Name or identity mark.
    Identity,
    /// Certificate number.
    Certificate,
    /// Who issued it.
    Issuer,
    /// Its date.
    Dated,
    /// When the next calibration is due.
    Due,
    /// Standards that share a cause of error.
    Group,
    /// The stated uncertainty.
    Uncertainty,
}

impl PaperField {
    /// All fields in their order.
    pub const ALL: [Self; 7] =
        [Self::Identity, Self::Certificate, Self::Issuer, Self::Dated, Self::Due, Self::Group, Self::Uncertainty];

    /// Its label.
    #[must_use]
    pub fn label(self) -> &'static str {
        match self {
            Self::Identity => "Identity",
            Self::Certificate => "Certificate",
            Self::Issuer => "Issued by",
            Self::Dated => "Dated",
            Self::Due => "Due",
            Self::Group => "Group",
            Self::Uncertainty => "Uncertainty",
        }
    }

    /// An example.
    #[must_use]
    pub fn hint(self) -> &'static str {
        match self {
            Self::Identity => "e.g. PR-2",
            Self::Certificate => "its number",
            Self::Issuer => "who gave it out",
            Self::Dated => "e.g. 2026-04-12",
            Self::Due => "e.g. 2027-04",
            Self::Group => "same group, shared error",
            Self::Uncertainty => "U 0.002 k 2",
        }
    }
}

/// The text of a field; empty when the standards asked for differ in it.
#[must_use]
pub fn text(field: PaperField, whose: Whose, project: &Project) -> String {
    let mut texts = chosen(whose, project).map(|p| one_text(field, p));
    let Some(first) = texts.next() else { return String::new() };
    if texts.all(|other| other == first) { first } else { String::new() }
}

/// Whether the standards asked for differ in a field.
#[must_use]
pub fn differ(field: PaperField, whose: Whose, project: &Project) -> bool {
    let mut texts = chosen(whose, project).map(|p| one_text(field, p));
    texts.next().is_some_and(|first| texts.any(|other| other != first))
}

fn chosen(whose: Whose, project: &Project) -> impl Iterator<Item = &StandardPapers> {
    let wanted = move |id: StandardId| match whose {
        Whose::All => true,
        Whose::One(one) => one == id,
    };
    project.standards.iter().filter(move |s| wanted(s.id)).map(|s| &s.papers)
}

fn one_text(field: PaperField, papers: &StandardPapers) -> String {
    let of = |text: &Option<Text>| text.as_deref().unwrap_or_default().to_owned();
    match field {
        PaperField::Identity => of(&papers.identity),
        PaperField::Certificate => of(&papers.certificate),
        PaperField::Issuer => of(&papers.issuer),
        PaperField::Dated => of(&papers.dated),
        PaperField::Due => of(&papers.due),
        PaperField::Group => of(&papers.group),
        PaperField::Uncertainty => papers.uncertainty.map_or(String::new(), uncertainty_text),
    }
}

/// An uncertainty as it is typed: `U 0.002 k 2`, `limits 0.01`, `u 0.001`.
fn uncertainty_text(stated: StatedUncertainty) -> String {
    match stated {
        StatedUncertainty::Standard(u) => format!("u {}", words::number(u)),
        StatedUncertainty::Expanded { expanded, factor } => {
            format!("U {} k {}", words::number(expanded), words::number(factor))
        }
        StatedUncertainty::Limits(a) => format!("limits {}", words::number(a)),
    }
}

/// An uncertainty from its text; the kind must be said, because U, u and limits mean different things.
///
/// # Errors
/// What is missing.
pub fn uncertainty(typed: &str) -> Result<Option<StatedUncertainty>, String> {
    let spread = typed.replace(['=', '±'], " ");
    let mut parts: Vec<&str> = spread.split_whitespace().collect();
    parts.retain(|part| !matches!(*part, "(" | ")"));
    let number = |text: &str| {
        let text = text.trim_matches(['(', ')']);
        parse_number(text, None).map_err(|why| why.to_string())
    };
    let stated = match parts.as_slice() {
        [] => return Ok(None),
        ["U", size, "k" | "(k", factor] => {
            StatedUncertainty::Expanded { expanded: number(size)?, factor: number(factor)? }
        }
        ["u", size] => StatedUncertainty::Standard(number(size)?),
        ["limits" | "limit", size] => StatedUncertainty::Limits(number(size)?),
        ["U", ..] => return Err("U needs its coverage factor: U 0.002 k 2".to_owned()),
        _ => return Err("say which it is: U 0.002 k 2, u 0.001, or limits 0.003".to_owned()),
    };
    if stated.is_usable() {
        return Ok(Some(stated));
    }
    Err("neither size nor factor may be negative, and k is larger than 0".to_owned())
}

/// The commands a typed text becomes: none when nothing changes, one for all standards where they then agree,
/// else one for each, so that what differs elsewhere on their papers stays.
///
/// # Errors
/// What is wrong with the text.
pub fn commands(field: PaperField, typed: &str, whose: Whose, project: &Project) -> Result<Vec<Command>, String> {
    let typed = typed.trim();
    if typed == text(field, whose, project) {
        return Ok(Vec::new());
    }
    let wanted = |id: StandardId| whose == Whose::All || whose == Whose::One(id);
    let mut changed = Vec::new();
    for standard in project.standards.iter().filter(|s| wanted(s.id)) {
        let papers = with(field, typed, &standard.papers)?;
        if papers != standard.papers {
            changed.push((standard.id, papers));
        }
    }
    let agree = changed.len() == project.standards.len() && changed.windows(2).all(|pair| pair[0].1 == pair[1].1);
    Ok(match changed.first() {
        Some((_, papers)) if agree && whose == Whose::All => {
            vec![Command::Standards(StandardsCommand::PapersForAll(papers.clone()))]
        }
        _ => changed
            .into_iter()
            .map(|(id, papers)| Command::Standards(StandardsCommand::Papers { id, papers }))
            .collect(),
    })
}

fn with(field: PaperField, typed: &str, papers: &StandardPapers) -> Result<StandardPapers, String> {
    let mut papers = papers.clone();
    let text = (!typed.is_empty()).then(|| Text::from(typed));
    match field {
        PaperField::Identity => papers.identity = text,
        PaperField::Certificate => papers.certificate = text,
        PaperField::Issuer => papers.issuer = text,
        PaperField::Dated => papers.dated = text,
        PaperField::Due => papers.due = text,
        PaperField::Group => papers.group = text,
        PaperField::Uncertainty => papers.uncertainty = uncertainty(typed)?,
    }
    Ok(papers)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rooms::bench::entry::tests::{act, after, begun};

    fn enter(project: &Project, field: PaperField, typed: &str, whose: Whose) -> (Project, usize) {
        let all = commands(field, typed, whose, project).unwrap();
        let count = all.len();
        (all.into_iter().fold(project.clone(), |p, c| after(&p, act(c))), count)
    }

    #[test]
    fn one_certificate_for_all_levels_is_one_entry() {
        let project = begun(&[("1", "0.4"), ("2", "0.8")], &[]);
        let (project, entries) = enter(&project, PaperField::Certificate, "5561-26", Whose::All);
        assert_eq!(entries, 1);
        assert_eq!(text(PaperField::Certificate, Whose::All, &project), "5561-26");
        let (_, again) = enter(&project, PaperField::Certificate, "5561-26", Whose::All);
        assert_eq!(again, 0, "nothing changes");
    }

    #[test]
    fn what_differs_elsewhere_on_the_papers_stays() {
        let project = begun(&[("1", "0.4"), ("2", "0.8")], &[]);
        let one = Whose::One(StandardId(2));
        let (project, _) = enter(&project, PaperField::Identity, "W-2", one);
        assert!(differ(PaperField::Identity, Whose::All, &project));
        assert_eq!(text(PaperField::Identity, Whose::All, &project), "");
        let (project, entries) = enter(&project, PaperField::Due, "2027-04", Whose::All);
        assert_eq!(entries, 2);
        assert_eq!(text(PaperField::Identity, one, &project), "W-2");
        assert_eq!(text(PaperField::Due, Whose::All, &project), "2027-04");
    }

    #[test]
    fn every_kind_of_uncertainty_is_written_and_read() {
        for typed in ["U 0.002 k 2", "u 0.001", "limits 0.003"] {
            let stated = uncertainty(typed).unwrap().unwrap();
            assert_eq!(uncertainty_text(stated), typed);
        }
        let certificate = uncertainty("U = 0,002 (k = 2)").unwrap();
        assert_eq!(certificate, Some(StatedUncertainty::Expanded { expanded: 0.002, factor: 2.0 }));
        assert_eq!(uncertainty("  "), Ok(None));
    }

    #[test]
    fn a_bare_number_is_no_uncertainty() {
        for typed in ["0.002", "U 0.002", "U 0.002 k 0", "u -1", "limits x"] {
            assert!(uncertainty(typed).is_err(), "{typed}");
        }
        assert!(uncertainty("U 0.002").unwrap_err().contains("coverage factor"));
    }
}
