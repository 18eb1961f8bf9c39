//! The marks from which pictures are made, each in one file: they take places in
//! pixels and add to a layer, and know nothing of rates or times.

pub mod curve;
pub mod flags;
pub mod hatch;
pub mod key;
pub mod labels;
pub mod points;
pub mod residuals;
