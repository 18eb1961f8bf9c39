//! What a stretch of a line stands on; the style of the line tells it.

use super::scene::Dash;

/// How far a value lies from the measurements it rests on, best first.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Grounds {
    /// Within the measured temperatures: a solid line.
    Inside,
    /// A little outside: a dashed line.
    Near,
    /// Well outside: a dotted line.
    Far,
    /// Where the measurements say nothing: hatched.
    Beyond,
}

impl Grounds {
    /// All of them, best first.
    pub const ALL: [Self; 4] = [Self::Inside, Self::Near, Self::Far, Self::Beyond];

    /// Beside a sample of the line.
    pub const fn word(self) -> &'static str {
        match self {
            Self::Inside => "inside",
            Self::Near => "near",
            Self::Far => "far",
            Self::Beyond => "beyond",
        }
    }

    /// In a sentence or a table.
    pub const fn phrase(self) -> &'static str {
        match self {
            Self::Inside => "inside the data",
            Self::Near => "near the data",
            Self::Far => "far from the data",
            Self::Beyond => "beyond the data",
        }
    }

    /// The pattern of the line; `None` where it is hatched.
    pub const fn dash(self) -> Option<Dash> {
        match self {
            Self::Inside => Some(Dash::Solid),
            Self::Near => Some(Dash::Dashed),
            Self::Far => Some(Dash::Dotted),
            Self::Beyond => None,
        }
    }
}
