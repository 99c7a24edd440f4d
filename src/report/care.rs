//! What the reader must know before trusting a verdict: what was looked at, and what a pass is not.
//! The same lines stand at the foot of every report that people read.

/// The sentences, each complete in itself.
pub const LINES: [&str; 3] = [
    "Judged was the geometry of a round tool against a contour, and nothing else: no deflection, no \
     runout, no machine motion, no clamps or fixtures that were not given.",
    "A pass is no release to run.",
    "Prove the program out as the machine's maker and the shop prescribe (dry run, single block, \
     reduced rapid), by people qualified to do so.",
];

/// The same in a few words, where room is short.
pub const SHORT: &str = "Geometry only: no deflection, runout, machine motion or fixtures. A pass is no release \
                         to run: prove the program out as machine maker and shop prescribe.";
