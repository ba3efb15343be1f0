//! The bytes of an appended update: objects, table of objects and trailer (ISO 32000-1:2008, 7.5.4 to 7.5.6).

use super::sign::RESERVED;
use lopdf::{Dictionary, Object, ObjectId, Writer};
use std::{collections::BTreeMap, ops::Range};

/// Room for the last three numbers of a `ByteRange`, ten digits each and the gaps between.
const RANGE_ROOM: usize = 32;

/// A file with a signature's place still empty.
pub(super) struct Draft {
    /// The whole file; the digits of the signature are zeros.
    pub(super) bytes: Vec<u8>,
    /// Where the signature stands, its two angle brackets included.
    pub(super) gap: Range<usize>,
}

/// A file that is being continued.
pub(super) struct Appender {
    out: Vec<u8>,
    offsets: BTreeMap<ObjectId, usize>,
}

impl Appender {
    /// Begins an update behind `pdf`, on a new line.
    pub(super) fn after(pdf: &[u8]) -> Self {
        let mut out = pdf.to_vec();
        if out.last() != Some(&b'\n') {
            out.push(b'\n');
        }
        Self { out, offsets: BTreeMap::new() }
    }

    /// Writes one object.
    pub(super) fn object(&mut self, id: ObjectId, object: &Object) {
        self.open(id);
        Writer::write_object(&mut self.out, object).expect("writing to memory does not fail");
        self.text("\nendobj\n");
    }

    /// Writes the table and the trailer.
    pub(super) fn finish(mut self, trailer: &Dictionary) -> Vec<u8> {
        self.table_and_trailer(trailer);
        self.out
    }

    /// Writes an unfilled signature dictionary, the table and the trailer; `entries` are the dictionary's other
    /// entries.
    pub(super) fn finish_unsigned(mut self, signature: ObjectId, entries: &[u8], trailer: &Dictionary) -> Draft {
        self.open(signature);
        self.text("<<");
        self.out.extend_from_slice(entries);
        self.text("/ByteRange[0 ");
        let range_at = self.out.len();
        self.text(&" ".repeat(RANGE_ROOM));
        self.text("]/Contents");
        let gap_at = self.out.len();
        self.text("<");
        self.out.resize(self.out.len() + 2 * RESERVED, b'0');
        self.text(">");
        let gap = gap_at..self.out.len();
        self.text(">>\nendobj\n");
        self.table_and_trailer(trailer);
        let range = format!("{} {} {}", gap.start, gap.end, self.out.len() - gap.end);
        self.out[range_at..range_at + range.len()].copy_from_slice(range.as_bytes());
        Draft { bytes: self.out, gap }
    }

    fn table_and_trailer(&mut self, trailer: &Dictionary) {
        let table_at = self.out.len();
        self.text("xref\n");
        let entries: Vec<_> = std::mem::take(&mut self.offsets).into_iter().collect();
        for run in entries.chunk_by(|((a, _), _), ((b, _), _)| a + 1 == *b) {
            self.text(&format!("{} {}\n", run[0].0.0, run.len()));
            for ((_, generation), offset) in run {
                // Exactly 20 bytes, the blank before the line feed among them.
                self.text(&format!("{offset:010} {generation:05} n \n"));
            }
        }
        self.text("trailer\n");
        let trailer = Object::Dictionary(trailer.clone());
        Writer::write_object(&mut self.out, &trailer).expect("writing to memory does not fail");
        self.text(&format!("\nstartxref\n{table_at}\n%%EOF\n"));
    }

    fn open(&mut self, id: ObjectId) {
        self.offsets.insert(id, self.out.len());
        self.text(&format!("{} {} obj\n", id.0, id.1));
    }

    fn text(&mut self, text: &str) {
        self.out.extend_from_slice(text.as_bytes());
    }
}
