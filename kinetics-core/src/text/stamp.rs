//! Times as clocks and calendars write them: ISO 8601 stamps and `h:mm:ss`.

use jiff::Timestamp;
use jiff::civil::{Date, DateTime};
use jiff::tz::TimeZone;

/// Seconds since 1970 of a stamp such as `2024-03-01 08:00`,
/// `2024-03-01T08:00:30`, `2024-03-01T08:00Z` or `2024-03-01`. A stamp without
/// an offset counts as UTC: only differences are of use.
#[must_use]
pub fn stamp_seconds(text: &str) -> Option<f64> {
    let bytes = text.as_bytes();
    let shape = (10..=35).contains(&bytes.len())
        && bytes.get(4) == Some(&b'-')
        && bytes.get(7) == Some(&b'-');
    if !shape || !bytes.iter().take(4).all(u8::is_ascii_digit) {
        return None;
    }
    let stamp = if let Ok(stamp) = text.parse::<Timestamp>() {
        stamp
    } else {
        let local = match text.parse::<DateTime>() {
            Ok(local) => local,
            Err(_) => text.parse::<Date>().ok()?.at(0, 0, 0, 0),
        };
        local.to_zoned(TimeZone::UTC).ok()?.timestamp()
    };
    Some(stamp.as_second() as f64 + f64::from(stamp.subsec_nanosecond()) * 1e-9)
}

/// Seconds of a duration `h:mm` or `h:mm:ss`, and whether seconds were given.
#[must_use]
pub fn clock_seconds(text: &str) -> Option<(f64, bool)> {
    if text.len() > 12 || !text.contains(':') {
        return None;
    }
    let parts: Vec<&str> = text.split(':').collect();
    let digits = |part: &&str| !part.is_empty() && part.bytes().all(|byte| byte.is_ascii_digit());
    if !(2..=3).contains(&parts.len()) || !parts.iter().all(digits) {
        return None;
    }
    let mut seconds = 0.0;
    for (at, part) in parts.iter().enumerate() {
        let number: f64 = part.parse().ok()?;
        if at > 0 && (number >= 60.0 || part.len() != 2) {
            return None;
        }
        seconds = seconds * 60.0 + number;
    }
    Some(if parts.len() == 3 { (seconds, true) } else { (seconds * 60.0, false) })
}

/// Whether a cell is a stamp or a clock time.
#[must_use]
pub fn looks_like(cell: &str) -> bool {
    stamp_seconds(cell).is_some() || clock_seconds(cell).is_some()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn stamps_are_read_in_their_usual_shapes() {
        let start = stamp_seconds("2024-03-01 08:00");
        assert!(start.is_some());
        for (text, later) in [
            ("2024-03-01T08:00", 0.0),
            ("2024-03-01T08:00:30.5", 30.5),
            ("2024-03-01T08:00:00Z", 0.0),
            ("2024-03-01T10:00:00+02:00", 0.0),
            ("2024-03-01", -28_800.0),
            ("2024-03-02 08:00:00", 86_400.0),
        ] {
            let found = stamp_seconds(text).zip(start).map(|(stamp, start)| stamp - start);
            assert_eq!(found, Some(later), "{text}");
        }
        for text in [
            "",
            "2024",
            "01.03.2024 08:00",
            "2024-13-01",
            "2024-02-30",
            "2024-03-01 25:00",
            "2024-03-01 8 o'clock",
        ] {
            assert_eq!(stamp_seconds(text), None, "{text}");
        }
    }

    #[test]
    fn clock_times_are_durations() {
        assert_eq!(clock_seconds("1:30"), Some((5400.0, false)));
        assert_eq!(clock_seconds("100:00:01"), Some((360_001.0, true)));
        for text in ["1:3", "1:60", ":30", "1:", "1:2:3", "a:30", "1:30:00:00", "1"] {
            assert_eq!(clock_seconds(text), None, "{text}");
        }
    }
}
