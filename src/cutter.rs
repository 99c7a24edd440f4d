//! The cutter: a body of revolution that turns about its axis.

/// Why dimensions make no cutter.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum CutterError {
    /// The diameter is not a positive finite number.
    Diameter(f64),
}

impl std::fmt::Display for CutterError {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self {
            Self::Diameter(d) => {
                write!(f, "a cutter's diameter must be greater than zero, not {d}")
            }
        }
    }
}

impl std::error::Error for CutterError {}

/// A flat end mill: a cylinder of one diameter.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Cutter {
    diameter: f64,
}

impl Cutter {
    /// A flat cutter of `diameter`, a length.
    ///
    /// # Errors
    /// [`CutterError::Diameter`] when it is zero, negative or not finite.
    pub fn flat(diameter: f64) -> Result<Self, CutterError> {
        if diameter.is_finite() && diameter > 0.0 {
            Ok(Self { diameter })
        } else {
            Err(CutterError::Diameter(diameter))
        }
    }

    /// Diameter, a length.
    #[must_use]
    pub const fn diameter(&self) -> f64 {
        self.diameter
    }

    /// Radius at `height` above the tip (zero or more), a length.
    #[must_use]
    pub const fn radius_at(&self, _height: f64) -> f64 {
        0.5 * self.diameter
    }
}
