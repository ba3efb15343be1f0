//! The structure a screen reader follows: a tree of roles, filled with drawings by the writer.

use std::num::{NonZeroU16, NonZeroU32};

use krilla::geom::Rect;
use krilla::tagging::{
    BBox, Identifier, ListNumbering, Node, TableHeaderScope, Tag, TagGroup, TagKind, TagTree, TextDecorationType,
};

/// A place in the structure. Places are numbered in reading order.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub(super) struct NodeId(usize);

/// What a place in the structure is.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum Role {
    Title,
    Heading { level: u8, text: String },
    Text,
    Group,
    Caption,
    Table,
    TableHead,
    TableBody,
    TableRow,
    HeadCell,
    Cell,
    Struck,
    WideCell { span: usize },
    List,
    Item,
    Label,
    Value,
    Figure { alt: String },
}

struct Place {
    role: Role,
    children: Vec<NodeId>,
    leaves: Vec<Identifier>,
    frame: Option<(usize, [f32; 4])>,
}

/// The structure of a document while it grows.
#[derive(Default)]
pub(super) struct Tags {
    places: Vec<Place>,
    roots: Vec<NodeId>,
}

impl Tags {
    /// Opens a place under `parent`, or at the top.
    pub(super) fn add(&mut self, parent: Option<NodeId>, role: Role) -> NodeId {
        let id = NodeId(self.places.len());
        self.places.push(Place { role, children: Vec::new(), leaves: Vec::new(), frame: None });
        match parent {
            Some(NodeId(parent)) => self.places[parent].children.push(id),
            None => self.roots.push(id),
        }
        id
    }

    /// Says that a marked piece of a page belongs to a place.
    pub(super) fn fill(&mut self, NodeId(id): NodeId, leaf: Identifier) {
        self.places[id].leaves.push(leaf);
    }

    /// Says where on which page a figure stands: left, top, right, bottom.
    pub(super) fn frame(&mut self, NodeId(id): NodeId, page: usize, rect: [f32; 4]) {
        self.places[id].frame = Some((page, rect));
    }

    /// The finished tree.
    pub(super) fn into_tree(self, language: &str) -> TagTree {
        let mut tree = TagTree::new().with_lang(Some(language.to_owned()));
        for &root in &self.roots {
            tree.push(self.group(root));
        }
        tree
    }

    fn group(&self, NodeId(id): NodeId) -> TagGroup {
        let place = &self.places[id];
        let leaves = place.leaves.iter().map(|&leaf| Node::Leaf(leaf));
        let below = place.children.iter().map(|&c| Node::Group(self.group(c)));
        TagGroup::with_children(kind(place), leaves.chain(below).collect())
    }
}

fn kind(place: &Place) -> TagKind {
    match &place.role {
        Role::Title => Tag::Title.into(),
        Role::Heading { level, text } => {
            let level = NonZeroU16::new(u16::from(*level)).unwrap_or(NonZeroU16::MIN);
            Tag::Hn(level, Some(text.clone())).into()
        }
        Role::Text => Tag::P.into(),
        Role::Group => Tag::Div.into(),
        Role::Caption => Tag::Caption.into(),
        Role::Table => Tag::Table.into(),
        Role::TableHead => Tag::THead.into(),
        Role::TableBody => Tag::TBody.into(),
        Role::TableRow => Tag::TR.into(),
        Role::HeadCell => Tag::TH(TableHeaderScope::Column).into(),
        Role::Cell => Tag::TD.into(),
        Role::Struck => Tag::Span.with_text_decoration_type(Some(TextDecorationType::LineThrough)).into(),
        Role::WideCell { span } => {
            let span = u32::try_from(*span).ok().and_then(NonZeroU32::new);
            Tag::TD.with_col_span(span).into()
        }
        Role::List => Tag::L(ListNumbering::None).into(),
        Role::Item => Tag::LI.into(),
        Role::Label => Tag::Lbl.into(),
        Role::Value => Tag::LBody.into(),
        Role::Figure { alt } => Tag::Figure(Some(alt.clone())).with_bbox(place.frame.and_then(bounding_box)).into(),
    }
}

fn bounding_box((page, [left, top, right, bottom]): (usize, [f32; 4])) -> Option<BBox> {
    Rect::from_ltrb(left, top, right, bottom).map(|rect| BBox::new(page, rect))
}
