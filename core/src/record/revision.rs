//! Whether what was appended to a file is a signature and nothing else.

use super::{gap::SignedRange, sign::SignatureRequest, update::append_signature};

/// Whether `pdf` up to the end of `range` is `before` with the signature of `request` appended, byte for byte but the
/// signature's digits.
///
/// The update is built again and compared, so nothing can hide in it: no changed page, no second field, no comment.
/// The price is that a second signature by another program counts as a change.
pub(super) fn is_only_a_signature(
    before: &[u8],
    pdf: &[u8],
    range: &SignedRange,
    request: Option<&SignatureRequest>,
) -> bool {
    let Some(draft) = request.and_then(|request| append_signature(before, request).ok()) else {
        return false;
    };
    let after = &pdf[..range.covered_to];
    let (start, end) = (draft.gap.start, draft.gap.end);
    draft.gap == range.gap
        && draft.bytes.len() == after.len()
        && draft.bytes[..start] == after[..start]
        && draft.bytes[end..] == after[end..]
}
