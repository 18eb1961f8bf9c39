//! Times as clocks and calendars write them: ISO 8601 stamps and `h:mm:ss`.

use crate::numeric::decimals::read_decimal;

/// Seconds since 1970 of a stamp such as `2024-03-01 08:00`,
/// `2024-03-01T08:00:30`, `2024-03-01T08:00Z` or `2024-03-01`. A stamp without
/// an offset counts as UTC: only differences are of use.
#[must_use]
pub fn stamp_seconds(text: &str) -> Option<f64> {
    let (date, rest) = text.split_at_checked(10)?;
    let days = days_since_1970(date)?;
    let Some(clock) = rest.strip_prefix(['T', 't', ' ']) else {
        return rest.is_empty().then_some(days * DAY);
    };
    let (clock, offset) = match clock.find(['Z', 'z', '+', '-']) {
        Some(at) => (&clock[..at], offset_seconds(&clock[at..])?),
        None => (clock, 0.0),
    };
    let (hour, rest) = two_digits(clock, 23)?;
    let (minute, rest) = two_digits(rest.strip_prefix(':')?, 59)?;
    let (second, rest) = match rest.strip_prefix(':') {
        Some(rest) => two_digits(rest, 59)?,
        None => (0.0, rest),
    };
    let fraction = if rest.is_empty() {
        0.0
    } else {
        let digits = rest.strip_prefix(['.', ','])?;
        let usable = !digits.is_empty() && digits.bytes().all(|byte| byte.is_ascii_digit());
        if usable { read_decimal(&format!("0.{digits}"))? } else { return None }
    };
    Some(days * DAY + hour * 3600.0 + minute * 60.0 + second + fraction - offset)
}

const DAY: f64 = 86_400.0;

/// Days from 1970-01-01 to a date of the Gregorian calendar, `yyyy-mm-dd`.
fn days_since_1970(date: &str) -> Option<f64> {
    let (year, rest) = date.split_once('-')?;
    let (month, rest) = two_digits(rest, 12)?;
    let (day, rest) = two_digits(rest.strip_prefix('-')?, 31)?;
    let four_digits = year.len() == 4 && year.bytes().all(|byte| byte.is_ascii_digit());
    if !four_digits || !rest.is_empty() {
        return None;
    }
    let year: i32 = year.parse().ok()?;
    let leap = year % 4 == 0 && (year % 100 != 0 || year % 400 == 0);
    let lengths = [31, if leap { 29 } else { 28 }, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31];
    let (month, day) = (month as usize, day as i32);
    let length = *lengths.get(month.checked_sub(1)?)?;
    if !(1..=length).contains(&day) {
        return None;
    }
    let before: i32 = lengths.iter().take(month - 1).sum();
    let past = year - 1;
    let leap_days = |past: i32| past / 4 - past / 100 + past / 400;
    let years = 365 * (year - 1970) + leap_days(past) - leap_days(1969);
    Some(f64::from(years + before + day - 1))
}

/// Seconds east of UTC: `Z`, `+02:00`, `-0530` or `+02`.
fn offset_seconds(text: &str) -> Option<f64> {
    let sign = match text.as_bytes().first()? {
        b'+' => 1.0,
        b'-' => -1.0,
        _ => return (text.len() == 1).then_some(0.0),
    };
    let (hours, rest) = two_digits(&text[1..], 23)?;
    let rest = rest.strip_prefix(':').unwrap_or(rest);
    let (minutes, rest) = if rest.is_empty() { (0.0, rest) } else { two_digits(rest, 59)? };
    rest.is_empty().then_some(sign * (hours * 3600.0 + minutes * 60.0))
}

/// Two digits at the start of a text that are at most `most`, and the rest.
fn two_digits(text: &str, most: u32) -> Option<(f64, &str)> {
    let (digits, rest) = text.split_at_checked(2)?;
    let both = digits.bytes().all(|byte| byte.is_ascii_digit());
    let number: u32 = if both { digits.parse().ok()? } else { return None };
    (number <= most).then_some((f64::from(number), rest))
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
        let number = read_decimal(part)?;
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
            ("2024-03-01T03:30-0430", 0.0),
            ("2024-03-02 08:00:00", 86_400.0),
            ("2024-02-29 08:00", -86_400.0),
            ("2023-03-01 08:00", -366.0 * 86_400.0),
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
            "2023-02-29",
            "1900-02-29",
            "2024-00-10",
            "2024-03-00",
            "2024-03-01T",
            "2024-03-01 08",
            "2024-03-01 08:00:60",
            "2024-03-01 08:00:00.",
            "2024-03-01 08:00 +1",
            "2024-03-01 08:00Zulu",
            "2024-03-01 25:00",
            "2024-03-01 8 o'clock",
        ] {
            assert_eq!(stamp_seconds(text), None, "{text}");
        }
    }

    /// POSIX time, IEEE Std 1003.1, §4.19: 2004-09-16 is day 12 677; the others by its formula.
    #[test]
    fn days_are_counted_from_1970() {
        for (text, days) in [
            ("1970-01-01", 0.0),
            ("2000-02-29", 11_016.0),
            ("2004-09-16", 12_677.0),
            ("1969-12-31", -1.0),
            ("2100-03-01", 47_541.0),
        ] {
            assert_eq!(stamp_seconds(text), Some(days * DAY), "{text}");
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
