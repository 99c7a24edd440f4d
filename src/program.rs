//! The program: the cutter's path as written, move by move, each knowing its block. Plain data.

use crate::geometry::{Arc, Point};

/// A length unit.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Unit {
    /// Millimetre.
    Millimetre,
    /// Inch, 25.4 mm.
    Inch,
}

impl Unit {
    /// Millimetres in one of it.
    #[must_use]
    pub const fn in_mm(self) -> f64 {
        match self {
            Self::Millimetre => 1.0,
            Self::Inch => crate::tolerance::MM_PER_INCH,
        }
    }

    /// Its sign in reports: `mm` or `in`.
    #[must_use]
    pub const fn sign(self) -> &'static str {
        match self {
            Self::Millimetre => "mm",
            Self::Inch => "in",
        }
    }

    /// Its name in a sentence: `millimetres` or `inches`.
    #[must_use]
    pub const fn name(self) -> &'static str {
        match self {
            Self::Millimetre => "millimetres",
            Self::Inch => "inches",
        }
    }
}

/// A point in space.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct Point3 {
    /// Along the X axis.
    pub x: f64,
    /// Along the Y axis.
    pub y: f64,
    /// Along the tool axis, up.
    pub z: f64,
}

impl Point3 {
    /// The point in the XY plane.
    #[must_use]
    pub const fn plan(&self) -> Point {
        Point::new(self.x, self.y)
    }
}

/// Plane of an arc, as G17, G18, G19 choose it. First and second axis make a right-handed frame with
/// the normal, so that G3 is counter-clockwise seen from its tip.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Plane {
    /// G17: X, Y; normal Z.
    Xy,
    /// G18: Z, X; normal Y.
    Zx,
    /// G19: Y, Z; normal X.
    Yz,
}

/// What the tip of the cutter does in one move.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Motion {
    /// Straight. Both ends may agree in X and Y (a plunge) or altogether.
    Straight {
        /// Where it starts.
        start: Point3,
        /// Where it ends.
        end: Point3,
    },
    /// Circular in a plane, or helical along its normal.
    Circular {
        /// Plane of `arc`.
        plane: Plane,
        /// The arc, in the plane's first and second axis.
        arc: Arc,
        /// Coordinate along the plane's normal at the start and at the end; equal for a plain arc.
        along: (f64, f64),
    },
}

impl Motion {
    /// Where it starts.
    #[must_use]
    pub fn start(&self) -> Point3 {
        match *self {
            Self::Straight { start, .. } => start,
            Self::Circular { plane, arc, along } => plane.point(arc.start(), along.0),
        }
    }

    /// Where it ends.
    #[must_use]
    pub fn end(&self) -> Point3 {
        match *self {
            Self::Straight { end, .. } => end,
            Self::Circular { plane, arc, along } => plane.point(arc.end(), along.1),
        }
    }
}

impl Plane {
    /// The point with coordinates `p` in the plane and `along` its normal.
    #[must_use]
    pub const fn point(self, p: Point, along: f64) -> Point3 {
        match self {
            Self::Xy => Point3 { x: p.x, y: p.y, z: along },
            Self::Zx => Point3 { x: p.y, y: along, z: p.x },
            Self::Yz => Point3 { x: along, y: p.x, z: p.y },
        }
    }
}

/// Does a move cut or travel?
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum MoveKind {
    /// At feed rate (G1, G2, G3): cuts where the tip is below the part's top.
    Feed,
    /// Rapid traverse (G0): must never meet the part.
    Rapid,
}

/// Position of a block in [`Program::blocks`].
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct BlockId(pub u32);

/// Position of a move in [`Program::moves`].
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct MoveIndex(pub u32);

/// One block: a line of the program as written.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Block<'a> {
    /// Line in the file, from 1.
    pub line: usize,
    /// Text of the line, without its end.
    pub text: &'a str,
}

/// Blocks in file order. Their texts lie in one buffer: a million blocks of their own would take several
/// times the memory of the file.
#[derive(Clone, Debug, PartialEq, Eq, Default)]
pub struct Blocks {
    text: String,
    /// Line of each block, and where its text ends in `text`.
    marks: Vec<(usize, usize)>,
}

impl Blocks {
    /// Adds a block after the last one: the line of the file, from 1, and its text.
    pub fn push(&mut self, line: usize, text: &str) {
        self.text.push_str(text);
        self.marks.push((line, self.text.len()));
    }

    /// The block at a position, as [`BlockId`] holds it.
    #[must_use]
    pub fn get(&self, at: usize) -> Option<Block<'_>> {
        let &(line, end) = self.marks.get(at)?;
        let start = at.checked_sub(1).and_then(|before| self.marks.get(before)).map_or(0, |m| m.1);
        Some(Block { line, text: self.text.get(start..end)? })
    }

    /// The last block.
    #[must_use]
    pub fn last(&self) -> Option<Block<'_>> {
        self.get(self.marks.len().checked_sub(1)?)
    }

    /// Number of blocks.
    #[must_use]
    pub fn len(&self) -> usize {
        self.marks.len()
    }

    /// True without blocks.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.marks.is_empty()
    }

    /// Gives back memory that was kept for blocks to come.
    pub fn shrink(&mut self) {
        self.text.shrink_to_fit();
        self.marks.shrink_to_fit();
    }
}

impl<'a> FromIterator<Block<'a>> for Blocks {
    fn from_iter<I: IntoIterator<Item = Block<'a>>>(blocks: I) -> Self {
        let mut all = Self::default();
        blocks.into_iter().for_each(|b| all.push(b.line, b.text));
        all
    }
}

/// One motion of the cutter.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Move {
    /// What the tip does.
    pub motion: Motion,
    /// Feed or rapid.
    pub kind: MoveKind,
    /// Number of the tool in the spindle (T word), 0 where the program names none.
    pub tool: u32,
    /// The block that commands it.
    pub block: BlockId,
}

/// A program as understood.
#[derive(Clone, Debug, PartialEq)]
pub struct Program {
    /// File as the user named it; `-` for standard input.
    pub file: String,
    /// Unit of every coordinate here. Readers convert where a program mixes units.
    pub unit: Unit,
    /// True when the program itself said its unit (G20, G21); false when it was assumed.
    pub unit_stated: bool,
    /// True when a Z word was seen: without one every feed move cuts.
    pub says_z: bool,
    /// Blocks that command moves, in file order.
    pub blocks: Blocks,
    /// Moves, in order of execution.
    pub moves: Vec<Move>,
    /// Greatest distance between a commanded curve and the arc kept for it.
    pub bound: f64,
}
