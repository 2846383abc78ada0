//! The structure of the document, which a screen reader reads instead of the paper (PDF 1.7, ISO 32000-1, 14.7 and 14.8).

use std::num::NonZeroU16;

use krilla::tagging::{
    Identifier, ListNumbering, Node as TagNode, TableHeaderScope, Tag, TagGroup, TagKind, TagTree,
};

/// What a part of the document is.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum Kind {
    /// A heading of a level, with its text.
    Heading(u16, String),
    Paragraph,
    List {
        numbered: bool,
    },
    Item,
    /// Number or bullet of an item.
    ItemLabel,
    ItemBody,
    Table,
    TableHead,
    TableBody,
    TableRow,
    ColumnName,
    RowName,
    Cell,
    /// A picture with its alt text.
    Figure(String),
    Contents,
    ContentsEntry,
    Link,
}

/// A piece of content on the paper that belongs to one part; pieces of a part that goes on overleaf share it.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) struct Leaf(usize);

#[derive(Debug)]
enum Kid {
    Part(usize),
    Leaf(Leaf),
}

#[derive(Debug)]
struct Part {
    kind: Kind,
    kids: Vec<Kid>,
}

/// The parts as they are opened and closed while the text is set.
#[derive(Debug, Default)]
pub(super) struct Structure {
    parts: Vec<Part>,
    top: Vec<usize>,
    open: Vec<usize>,
    leaves: usize,
}

impl Structure {
    /// Does `inside` within a new part.
    pub(super) fn part<T>(&mut self, kind: Kind, inside: impl FnOnce(&mut Self) -> T) -> T {
        self.open(kind);
        let done = inside(self);
        self.close();
        done
    }

    pub(super) fn open(&mut self, kind: Kind) {
        let part = self.parts.len();
        self.parts.push(Part {
            kind,
            kids: Vec::new(),
        });
        match self.open.last() {
            Some(&parent) => self.parts[parent].kids.push(Kid::Part(part)),
            None => self.top.push(part),
        }
        self.open.push(part);
    }

    pub(super) fn close(&mut self) {
        self.open.pop();
    }

    /// A new piece of content of the part that is open.
    pub(super) fn leaf(&mut self) -> Leaf {
        let leaf = Leaf(self.leaves);
        self.leaves += 1;
        if let Some(&part) = self.open.last() {
            self.parts[part].kids.push(Kid::Leaf(leaf));
        }
        leaf
    }

    /// An empty list of what was drawn for each leaf.
    pub(super) fn drawn(&self) -> Drawn {
        Drawn(vec![Vec::new(); self.leaves])
    }

    /// The tree of the document, once its content is drawn.
    pub(super) fn tree(&self, drawn: &Drawn) -> TagTree {
        let mut tree = TagTree::new().with_lang(Some("en".into()));
        for &part in &self.top {
            if let Some(group) = self.group(part, drawn) {
                tree.push(group);
            }
        }
        tree
    }

    /// Parts of which nothing was drawn are left out.
    fn group(&self, part: usize, drawn: &Drawn) -> Option<TagGroup> {
        let part = &self.parts[part];
        let mut kids: Vec<TagNode> = Vec::new();
        for kid in &part.kids {
            match kid {
                Kid::Part(part) => kids.extend(self.group(*part, drawn).map(TagNode::from)),
                Kid::Leaf(leaf) => kids.extend(drawn.0[leaf.0].iter().cloned().map(TagNode::from)),
            }
        }
        (!kids.is_empty() || part.kind == Kind::Cell)
            .then(|| TagGroup::with_children(tag(&part.kind), kids))
    }
}

/// What was drawn for each leaf.
#[derive(Debug)]
pub(super) struct Drawn(Vec<Vec<Identifier>>);

impl Drawn {
    pub(super) fn add(&mut self, leaf: Leaf, identifier: Identifier) {
        self.0[leaf.0].push(identifier);
    }
}

fn tag(kind: &Kind) -> TagKind {
    match kind {
        Kind::Heading(level, text) => Tag::Hn(
            NonZeroU16::new(*level).unwrap_or(NonZeroU16::MIN),
            Some(text.clone()),
        )
        .into(),
        Kind::Paragraph => Tag::P.into(),
        Kind::List { numbered } => Tag::L(if *numbered {
            ListNumbering::Decimal
        } else {
            ListNumbering::Disc
        })
        .into(),
        Kind::Item => Tag::LI.into(),
        Kind::ItemLabel => Tag::Lbl.into(),
        Kind::ItemBody => Tag::LBody.into(),
        Kind::Table => Tag::Table.into(),
        Kind::TableHead => Tag::THead.into(),
        Kind::TableBody => Tag::TBody.into(),
        Kind::TableRow => Tag::TR.into(),
        Kind::ColumnName => Tag::TH(TableHeaderScope::Column).into(),
        Kind::RowName => Tag::TH(TableHeaderScope::Row).into(),
        Kind::Cell => Tag::TD.into(),
        Kind::Figure(alt) => Tag::Figure(Some(alt.clone())).into(),
        Kind::Contents => Tag::TOC.into(),
        Kind::ContentsEntry => Tag::TOCI.into(),
        Kind::Link => Tag::Link.into(),
    }
}
