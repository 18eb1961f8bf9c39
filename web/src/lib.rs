//! Kelvinclock web.
