//! From characters to glyphs with their widths.

use std::collections::BTreeMap;
use std::ops::Range;

use rustybuzz::ttf_parser::Tag;
use rustybuzz::{BufferClusterLevel, Direction, Feature, UnicodeBuffer};

use super::super::error::ReportError;
use super::super::style::Style;
use super::faces::{FaceId, Faces};
use super::wrap::Span;
use super::{Glyph, Line, Run};

/// The smallest piece of text that has glyphs of its own.
#[derive(Debug, Clone)]
pub(super) struct Cluster {
    /// Bytes of the text.
    pub text: Range<usize>,
    /// First character of the text.
    pub first: char,
    /// Width as a part of the size of the letters.
    pub width: f32,
    face: FaceId,
    leftward: bool,
    glyphs: Vec<Glyph>,
}

/// A text without line ends, in glyphs.
pub(super) struct Shaped {
    text: String,
    /// The clusters, in reading order.
    pub clusters: Vec<Cluster>,
}

impl Faces {
    /// Shapes a text that holds no line end.
    pub(super) fn shape(&self, text: &str, style: Style) -> Result<Shaped, ReportError> {
        let mut clusters = Vec::new();
        let mut at = 0;
        for (face, stretch) in self.stretches(text, style)? {
            self.shape_stretch(face, stretch, at, style.tabular, &mut clusters)?;
            at += stretch.len();
        }
        Ok(Shaped { text: text.to_owned(), clusters })
    }

    /// The blank that ends a line, so that words of neighbouring lines and cells stay apart when
    /// the text is taken out of the file.
    pub(super) fn blank(&self, style: Style) -> Result<Cluster, ReportError> {
        let mut shaped = self.shape(" ", style)?;
        shaped.clusters.pop().ok_or(ReportError::NoGlyph { text: " ".to_owned(), character: ' ' })
    }

    fn shape_stretch(
        &self,
        face: FaceId,
        stretch: &str,
        at: usize,
        tabular: bool,
        clusters: &mut Vec<Cluster>,
    ) -> Result<(), ReportError> {
        let buzz = &self.get(face).buzz;
        let mut buffer = UnicodeBuffer::new();
        buffer.push_str(stretch);
        buffer.set_cluster_level(BufferClusterLevel::MonotoneCharacters);
        buffer.guess_segment_properties();
        let leftward = buffer.direction() == Direction::RightToLeft;
        let shaped = rustybuzz::shape(buzz, &features(stretch, tabular), buffer);
        let em = buzz.units_per_em() as f32;
        let mut found: BTreeMap<usize, Vec<Glyph>> = BTreeMap::new();
        for (info, position) in shaped.glyph_infos().iter().zip(shaped.glyph_positions()) {
            found.entry(info.cluster as usize).or_default().push(Glyph {
                id: info.glyph_id,
                advance: position.x_advance as f32 / em,
                right: position.x_offset as f32 / em,
                up: position.y_offset as f32 / em,
                text: 0..0,
            });
        }
        let ends: Vec<usize> = found.keys().copied().skip(1).chain([stretch.len()]).collect();
        for ((start, glyphs), end) in found.into_iter().zip(ends) {
            let first = stretch[start..].chars().next().unwrap_or(' ');
            if glyphs.iter().any(|glyph| glyph.id == 0) {
                return Err(ReportError::NoGlyph { text: stretch.to_owned(), character: first });
            }
            clusters.push(Cluster {
                text: at + start..at + end,
                first,
                width: glyphs.iter().map(|glyph| glyph.advance).sum(),
                face,
                leftward,
                glyphs,
            });
        }
        Ok(())
    }
}

/// No ligatures and no replacement by context: what is typed is what is printed. Digits are made
/// equally wide one by one, since the same switch would also widen points and commas.
fn features(text: &str, tabular: bool) -> Vec<Feature> {
    let mut features: Vec<Feature> =
        [b"calt", b"liga", b"clig"].into_iter().map(|name| Feature::new(Tag::from_bytes(name), 0, ..)).collect();
    if tabular {
        let digits = text.bytes().enumerate().filter(|(_, b)| b.is_ascii_digit());
        features.extend(digits.map(|(at, _)| Feature {
            tag: Tag::from_bytes(b"tnum"),
            value: 1,
            start: at as u32,
            end: at as u32 + 1,
        }));
    }
    features
}

impl Shaped {
    /// The line that `span` cuts out, followed by `blank` unless a word was broken.
    pub(super) fn line(&self, span: &Span, blank: &Cluster, size: f32) -> Line {
        let mut line = Line { runs: Vec::new(), width: 0.0, size };
        let clusters = &self.clusters[span.from..span.to];
        for group in clusters.chunk_by(|a, b| a.face == b.face && a.leftward == b.leftward) {
            let mut run = Run {
                face: group[0].face,
                x: line.width,
                glyphs: Vec::new(),
                text: self.text[group[0].text.start..group[group.len() - 1].text.end].to_owned(),
            };
            let base = group[0].text.start;
            let mut take = |cluster: &Cluster| {
                let text = cluster.text.start - base..cluster.text.end - base;
                append(&mut run, cluster, text);
                line.width += cluster.width * size;
            };
            if group[0].leftward {
                group.iter().rev().for_each(&mut take);
            } else {
                group.iter().for_each(&mut take);
            }
            line.runs.push(run);
        }
        if !span.broken {
            end_with(&mut line, blank);
        }
        line
    }
}

fn append(run: &mut Run, cluster: &Cluster, text: Range<usize>) {
    run.glyphs.extend(cluster.glyphs.iter().map(|glyph| Glyph { text: text.clone(), ..glyph.clone() }));
}

/// Sets the closing blank, in the last run if that has the same font.
fn end_with(line: &mut Line, blank: &Cluster) {
    if line.runs.last().is_none_or(|run| run.face != blank.face) {
        line.runs.push(Run { face: blank.face, x: line.width, glyphs: Vec::new(), text: String::new() });
    }
    if let Some(run) = line.runs.last_mut() {
        let start = run.text.len();
        run.text.push(' ');
        append(run, blank, start..start + 1);
    }
}
