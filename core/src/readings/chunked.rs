//! A list that shares its unchanged parts with earlier snapshots.
//!
//! One edit copies one chunk and the list of chunks, not all readings, so that every accepted entry can
//! keep a whole snapshot of the project.

use std::{ops::Index, sync::Arc};

const CHUNK: usize = 64;

/// A persistent list: cloning is cheap, editing copies one chunk of 64.
#[derive(Debug, Clone)]
pub struct Chunked<T> {
    chunks: Arc<Vec<Arc<Vec<T>>>>,
}

impl<T> Default for Chunked<T> {
    fn default() -> Self {
        Self { chunks: Arc::default() }
    }
}

impl<T: PartialEq> PartialEq for Chunked<T> {
    fn eq(&self, other: &Self) -> bool {
        Arc::ptr_eq(&self.chunks, &other.chunks) || self.iter().eq(other.iter())
    }
}

impl<T> Chunked<T> {
    /// How many items.
    #[must_use]
    pub fn len(&self) -> usize {
        self.chunks.last().map_or(0, |last| (self.chunks.len() - 1) * CHUNK + last.len())
    }

    /// Whether there are none.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.chunks.is_empty()
    }

    /// The item at a position.
    #[must_use]
    pub fn get(&self, index: usize) -> Option<&T> {
        self.chunks.get(index / CHUNK)?.get(index % CHUNK)
    }

    /// All items in order.
    pub fn iter(&self) -> impl Iterator<Item = &T> {
        self.chunks.iter().flat_map(|chunk| chunk.iter())
    }
}

impl<T: Clone> Chunked<T> {
    /// Appends one item.
    pub fn push(&mut self, item: T) {
        let chunks = Arc::make_mut(&mut self.chunks);
        match chunks.last_mut() {
            Some(last) if last.len() < CHUNK => Arc::make_mut(last).push(item),
            _ => chunks.push(Arc::new(vec![item])),
        }
    }

    /// The item at a position, to be changed.
    pub fn get_mut(&mut self, index: usize) -> Option<&mut T> {
        Arc::make_mut(Arc::make_mut(&mut self.chunks).get_mut(index / CHUNK)?).get_mut(index % CHUNK)
    }
}

impl<T> Index<usize> for Chunked<T> {
    type Output = T;
    fn index(&self, index: usize) -> &T {
        &self.chunks[index / CHUNK][index % CHUNK]
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_edit_leaves_the_earlier_snapshot_alone() {
        let mut list = Chunked::default();
        for i in 0..200 {
            list.push(i);
        }
        let before = list.clone();
        *list.get_mut(130).unwrap() = -1;
        assert_eq!((before.len(), before[130], list[130]), (200, 130, -1));
        assert_ne!(before, list);
        assert!(Arc::ptr_eq(&before.chunks[0], &list.chunks[0]), "untouched chunks are shared");
        assert_eq!(list.get(200), None);
    }
}
