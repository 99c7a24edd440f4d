//! Where the cutter is, axis by axis, and whether the program has said so. At the start it has not,
//! nor after a return to a fixed point of the machine: nothing may be swept from there.

use crate::geometry::Point;
use crate::program::{Plane, Point3};

/// The letters of the three axes.
pub(super) const LETTERS: [u8; 3] = [b'X', b'Y', b'Z'];

/// A position of which some axes may be unknown; these are 0.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub(super) struct Position {
    /// Coordinates along X, Y, Z, in the unit of the program given back.
    pub at: [f64; 3],
    /// Which of them the program has said.
    pub known: [bool; 3],
    /// Z is at its fixed point at the top, above everything.
    pub retracted: bool,
    /// X and Y are at a fixed point of the machine, which the program does not know.
    pub away: bool,
}

impl Position {
    /// The point.
    pub const fn point(&self) -> Point3 {
        let [x, y, z] = self.at;
        Point3 { x, y, z }
    }

    /// Its two coordinates in a plane.
    pub const fn in_plane(&self, plane: Plane) -> Point {
        let [x, y, z] = self.at;
        match plane {
            Plane::Xy => Point::new(x, y),
            Plane::Zx => Point::new(z, x),
            Plane::Yz => Point::new(y, z),
        }
    }

    /// Its coordinate along the normal of a plane.
    pub const fn along(&self, plane: Plane) -> f64 {
        let [x, y, z] = self.at;
        match plane {
            Plane::Xy => z,
            Plane::Zx => y,
            Plane::Yz => x,
        }
    }

    /// Are X and Y known?
    pub const fn knows_plan(&self) -> bool {
        let [x, y, _] = self.known;
        x && y
    }

    /// Are both its coordinates in a plane known?
    pub const fn knows(&self, plane: Plane) -> bool {
        let [x, y, z] = self.known;
        match plane {
            Plane::Xy => x && y,
            Plane::Zx => z && x,
            Plane::Yz => y && z,
        }
    }

    /// Is Z known?
    pub const fn knows_height(&self) -> bool {
        self.known[2]
    }

    /// Nothing is known from here on.
    pub const fn forget(&mut self) {
        *self = Self { at: [0.0; 3], known: [false; 3], retracted: false, away: false };
    }

    /// X and Y are known no more.
    pub const fn forget_plan(&mut self) {
        self.at = [0.0, 0.0, self.at[2]];
        self.known = [false, false, self.known[2]];
        self.away = true;
    }

    /// Z is at its fixed point, whose height is not known.
    pub const fn retract(&mut self) {
        self.at[2] = 0.0;
        self.known[2] = false;
        self.retracted = true;
    }
}
