//! From statements to tables: what belongs where, by the rules of TOML 1.0. Of two that clash the first is kept.

use super::parse::Segment;
use crate::finding::Span;
use crate::tree::{Entry, Table, Value};
use std::collections::HashMap;

/// The tables as far as they are known. They lie side by side, so that a lookup costs the same in any file.
pub(super) struct Merge {
    nodes: Vec<Node>,
}

/// Index of a table.
pub(super) type NodeId = usize;

/// The table of the keys above the first header.
pub(super) const ROOT: NodeId = 0;

#[derive(Default)]
struct Node {
    span: Span,
    made: Made,
    entries: Vec<Slot>,
    by_key: HashMap<String, usize>,
}

/// What made a table, which settles what may still be added to it.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
enum Made {
    /// Its own header, or it is the root.
    #[default]
    Header,
    /// A longer header: `[a.b]` makes `a`, which may get its own header later.
    LongerHeader,
    /// A dotted key: only dotted keys of the same section add to it, and headers of tables in it.
    DottedKey,
}

struct Slot {
    key: String,
    key_span: Span,
    statement: Span,
    held: Held,
}

enum Held {
    Value(Value),
    Table(NodeId),
    Tables(Vec<NodeId>),
}

/// A statement that clashes with an earlier one.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Clash {
    /// The key that was there first.
    pub first: Span,
    /// What it holds.
    pub holds: Holds,
    /// How many parts of the path it takes to reach the clash.
    pub parts: usize,
    /// Where the keys below a clashing header go all the same, when that is clear.
    pub table: Option<NodeId>,
}

/// What stands where a statement wants to write.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum Holds {
    /// A value, with its place.
    Value(Span),
    /// A table.
    Table,
    /// `[[ … ]]`; how many so far.
    Tables(usize),
}

impl Merge {
    pub fn new() -> Merge {
        Merge { nodes: vec![Node::default()] }
    }

    /// `[path]` or `[[path]]`: the table that the keys below belong to.
    pub fn header(
        &mut self,
        path: &[Segment],
        span: &Span,
        statement: &Span,
        repeated: bool,
    ) -> Result<NodeId, Clash> {
        let Some((last, above)) = path.split_last() else {
            return Ok(ROOT);
        };
        let mut node = ROOT;
        for (index, part) in above.iter().enumerate() {
            node = match self.slot(node, &part.name).map(|slot| &slot.held) {
                None => self.add_table(node, part, 0..0, statement, Made::LongerHeader),
                Some(Held::Table(inner)) => *inner,
                Some(Held::Tables(inner)) => inner.last().copied().unwrap_or(ROOT),
                Some(Held::Value(_)) => return Err(self.clash(node, &part.name, index + 1)),
            };
        }
        let parts = path.len();
        match self.slot(node, &last.name).map(|slot| &slot.held) {
            None if repeated => {
                let element = self.add_node(span.clone(), Made::Header);
                self.add(node, last, statement, Held::Tables(vec![element]));
                Ok(element)
            }
            None => Ok(self.add_table(node, last, span.clone(), statement, Made::Header)),
            Some(Held::Table(inner)) if !repeated && self.nodes[*inner].made == Made::LongerHeader => {
                let inner = *inner;
                self.nodes[inner].made = Made::Header;
                self.nodes[inner].span = span.clone();
                if let Some(slot) = self.slot_mut(node, &last.name) {
                    slot.key_span = last.span.clone();
                    slot.statement = statement.clone();
                }
                Ok(inner)
            }
            Some(Held::Tables(_)) => {
                let mut clash = self.clash(node, &last.name, parts);
                let element = self.add_node(span.clone(), Made::Header);
                if let Some(Held::Tables(elements)) =
                    self.slot_mut(node, &last.name).map(|slot| &mut slot.held)
                {
                    elements.push(element);
                }
                if repeated {
                    return Ok(element);
                }
                // One pair of brackets forgotten: it was meant as one more.
                clash.table = Some(element);
                Err(clash)
            }
            Some(Held::Table(inner)) if !repeated => {
                let table = Some(*inner);
                Err(Clash { table, ..self.clash(node, &last.name, parts) })
            }
            Some(Held::Table(inner)) => {
                // One pair of brackets forgotten at the first one.
                let inner = *inner;
                let clash = self.clash(node, &last.name, parts);
                let element = self.add_node(span.clone(), Made::Header);
                if let Some(slot) = self.slot_mut(node, &last.name) {
                    slot.held = Held::Tables(vec![inner, element]);
                }
                Err(Clash { table: Some(element), ..clash })
            }
            Some(Held::Value(_)) => Err(self.clash(node, &last.name, parts)),
        }
    }

    /// `path = value` in a table.
    pub fn pair(
        &mut self,
        table: NodeId,
        path: &[Segment],
        value: Value,
        statement: &Span,
    ) -> Result<(), Clash> {
        let Some((last, above)) = path.split_last() else {
            return Ok(());
        };
        let mut node = table;
        for (index, part) in above.iter().enumerate() {
            node = match self.slot(node, &part.name).map(|slot| &slot.held) {
                None => self.add_table(node, part, 0..0, statement, Made::DottedKey),
                Some(Held::Table(inner)) if self.nodes[*inner].made != Made::Header => {
                    let inner = *inner;
                    self.nodes[inner].made = Made::DottedKey;
                    inner
                }
                Some(_) => return Err(self.clash(node, &part.name, index + 1)),
            };
        }
        if self.slot(node, &last.name).is_some() {
            return Err(self.clash(node, &last.name, path.len()));
        }
        self.add(node, last, statement, Held::Value(value));
        Ok(())
    }

    /// Whether a key would clash with what a table holds.
    pub fn clashes(&self, table: NodeId, path: &[String]) -> bool {
        let mut node = table;
        for (index, name) in path.iter().enumerate() {
            match self.slot(node, name).map(|slot| &slot.held) {
                None => return false,
                Some(Held::Table(inner))
                    if index + 1 < path.len() && self.nodes[*inner].made == Made::DottedKey =>
                {
                    node = *inner;
                }
                Some(_) => return true,
            }
        }
        true
    }

    /// The finished tree.
    pub fn finish(mut self) -> Table {
        self.take(ROOT)
    }

    /// Headers and dotted keys have few parts, so this is no deep recursion.
    fn take(&mut self, node: NodeId) -> Table {
        let Node { span, entries, .. } = std::mem::take(&mut self.nodes[node]);
        let entries = entries.into_iter().map(|slot| {
            let value = match slot.held {
                Held::Value(value) => value,
                Held::Table(inner) => Value::Table(self.take(inner)),
                Held::Tables(inner) => {
                    Value::Tables(inner.into_iter().map(|inner| self.take(inner)).collect())
                }
            };
            Entry { key: slot.key, key_span: slot.key_span, value, statement: slot.statement }
        });
        Table { span, entries: entries.collect() }
    }

    fn slot(&self, node: NodeId, key: &str) -> Option<&Slot> {
        let node = &self.nodes[node];
        node.by_key.get(key).map(|index| &node.entries[*index])
    }

    fn slot_mut(&mut self, node: NodeId, key: &str) -> Option<&mut Slot> {
        let node = &mut self.nodes[node];
        node.by_key.get(key).map(|index| &mut node.entries[*index])
    }

    fn add(&mut self, node: NodeId, key: &Segment, statement: &Span, held: Held) {
        let node = &mut self.nodes[node];
        node.by_key.insert(key.name.clone(), node.entries.len());
        node.entries.push(Slot {
            key: key.name.clone(),
            key_span: key.span.clone(),
            statement: statement.clone(),
            held,
        });
    }

    fn add_node(&mut self, span: Span, made: Made) -> NodeId {
        self.nodes.push(Node { span, made, ..Node::default() });
        self.nodes.len() - 1
    }

    fn add_table(&mut self, node: NodeId, key: &Segment, span: Span, statement: &Span, made: Made) -> NodeId {
        let inner = self.add_node(span, made);
        self.add(node, key, statement, Held::Table(inner));
        inner
    }

    fn clash(&self, node: NodeId, key: &str, parts: usize) -> Clash {
        let slot = self.slot(node, key);
        let holds = match slot.map(|slot| &slot.held) {
            Some(Held::Value(value)) => Holds::Value(value.span()),
            Some(Held::Tables(elements)) => Holds::Tables(elements.len()),
            Some(Held::Table(_)) | None => Holds::Table,
        };
        let first = slot.map(|slot| slot.key_span.clone()).unwrap_or_default();
        Clash { first, holds, parts, table: None }
    }
}
