//! Where statements begin and end, taken from the tree.

use crate::source::Span;
use crate::syntax::Parsed;
use crate::syntax::ast::{Block, ChamberStatement, Item, RecipeStatement, StackStatement, Statement};
use std::collections::HashMap;

/// A statement that could be read.
#[derive(Clone, Copy, Debug)]
pub(super) struct Mark {
    /// Its end.
    pub(super) end: u32,
    /// The braces of its statements, where it has such.
    pub(super) block: Option<Span>,
}

/// Every statement of a text by its first byte.
#[derive(Default)]
pub(super) struct Marks {
    by_start: HashMap<u32, Mark>,
}

impl Marks {
    pub(super) fn new(parsed: &Parsed) -> Self {
        let mut marks = Marks::default();
        for item in &parsed.module.items {
            match &item.kind {
                Item::Use(_) | Item::Let(_) => marks.add(item, None),
                Item::Material(named) => marks.plain(item, &named.body),
                Item::Spectrum(named) => marks.plain(item, &named.body),
                Item::Specification(named) => marks.plain(item, &named.body),
                Item::Chamber(named) => {
                    marks.add(item, Some(named.body.span));
                    for statement in &named.body.statements {
                        match &statement.kind {
                            ChamberStatement::Deposit { body, .. } => marks.plain(statement, body),
                            _ => marks.add(statement, None),
                        }
                    }
                }
                Item::Recipe(named) => {
                    marks.add(item, Some(named.body.span));
                    for statement in &named.body.statements {
                        match &statement.kind {
                            RecipeStatement::Stack(body) => {
                                marks.add(statement, Some(body.span));
                                marks.stack(body);
                            }
                            _ => marks.add(statement, None),
                        }
                    }
                }
            }
        }
        marks
    }

    /// The statement that begins at a byte.
    pub(super) fn at(&self, start: u32) -> Option<Mark> {
        self.by_start.get(&start).copied()
    }

    fn add<K>(&mut self, statement: &Statement<K>, block: Option<Span>) {
        self.by_start.insert(statement.span.start, Mark { end: statement.span.end, block });
    }

    fn plain<K, L>(&mut self, statement: &Statement<K>, body: &Block<L>) {
        self.add(statement, Some(body.span));
        for inner in &body.statements {
            self.add(inner, None);
        }
    }

    fn stack(&mut self, body: &Block<StackStatement>) {
        for statement in &body.statements {
            match &statement.kind {
                StackStatement::Repeat { body, .. } => {
                    self.add(statement, Some(body.span));
                    self.stack(body);
                }
                _ => self.add(statement, None),
            }
        }
    }
}
