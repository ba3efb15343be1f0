//! Text between two markers of a document.

/// `document` with what stands between `<!-- name:begin -->` and `<!-- name:end -->` replaced; `None` when the
/// markers are not there in that order.
#[must_use]
pub fn replaced(document: &str, name: &str, text: &str) -> Option<String> {
    let (begin, end) = (format!("<!-- {name}:begin -->"), format!("<!-- {name}:end -->"));
    let (before, rest) = document.split_once(&begin)?;
    let (_, after) = rest.split_once(&end)?;
    Some(format!("{before}{begin}\n\n{}\n\n{end}{after}", text.trim_end()))
}
