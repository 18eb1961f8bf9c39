//! A study: everything about one reaction, as a file and as findings.

mod assumptions;
mod basis;
mod courses;
mod document;
mod evaluate;
mod findings;
mod learning;
mod record;

pub use courses::{Course, CourseFindings};
pub use document::{
    Assumed, ColumnChoice, DisplayChoice, Excluded, HeatData, LawChoice, LevelChoice, LevelWord,
    Measured, OrderChoice, OrderWord, StatedQuantity, Study, StudyError, Thermometer, VERSION,
};
pub use evaluate::{Evaluation, Prepared, evaluate, evaluate_prepared, hints, prepare};
pub use findings::{
    Estimate, Findings, LawFindings, MixtureComponent, OtherScatter, Read, Record, Rival,
    RunFindings,
};
