//! Ways of keeping and carrying a study that a browser may refuse: each says so and none fails
//! loudly.

pub mod clipboard;
pub mod files;
pub mod fragment;
pub mod frame;
pub mod storage;
