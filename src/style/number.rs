//! Numbers as a style writes them.

use super::NumberSpec;

impl NumberSpec {
    /// `value` with the style's decimal sign and a true minus sign, rounded half away from zero.
    ///
    /// With `places` exactly so many decimals are written; without, as many as the value has, at
    /// most `most`. A value that rounds to zero carries no sign.
    #[must_use]
    pub fn write(&self, value: f64, places: Option<u8>, most: u8) -> String {
        let digits = round_decimal(value, places.unwrap_or(most));
        let mut text = digits.trim_start_matches('-').to_owned();
        if places.is_none() && text.contains('.') {
            text.truncate(text.trim_end_matches('0').trim_end_matches('.').len());
        }
        let is_zero = text.bytes().all(|b| matches!(b, b'0' | b'.'));
        if !self.leading_zero && text.len() > 1 && text.starts_with("0.") {
            text.remove(0);
        }
        let sign = if digits.starts_with('-') && !is_zero { "−" } else { "" };
        format!("{sign}{}", text.replace('.', &self.decimal.to_string()))
    }

    /// A length in mm as the style writes it.
    #[must_use]
    pub fn length(&self, mm: f64, places: Option<u8>) -> String {
        self.write(mm, places, self.places)
    }
}

/// `value` with `places` decimals, rounded half away from zero as a person would round the
/// shortest decimal that names this f64: 2.675 gives 2.68 although its binary value lies below.
fn round_decimal(value: f64, places: u8) -> String {
    let shortest = format!("{:.9}", value);
    // Nine decimals of a millimetre are far below any size on a drawing and above f64 noise.
    let (negative, digits) = match shortest.strip_prefix('-') {
        Some(rest) => (true, rest),
        None => (false, shortest.as_str()),
    };
    let (whole, fraction) = digits.split_once('.').unwrap_or((digits, ""));
    let keep = usize::from(places).min(9);
    let mut kept: Vec<u8> = whole.bytes().chain(fraction.bytes().take(keep)).collect();
    if fraction.as_bytes().get(keep).is_some_and(|d| *d >= b'5') {
        let mut i = kept.len();
        loop {
            if i == 0 {
                kept.insert(0, b'1');
                break;
            }
            i -= 1;
            if kept[i] == b'9' {
                kept[i] = b'0';
            } else {
                kept[i] += 1;
                break;
            }
        }
    }
    let text: String = kept.into_iter().map(char::from).collect();
    let (whole, fraction) = text.split_at(text.len() - keep);
    let point = if keep > 0 { "." } else { "" };
    format!("{}{whole}{point}{fraction}", if negative { "-" } else { "" })
}

#[cfg(test)]
mod tests {
    use crate::style::builtin;

    #[test]
    fn numbers_follow_iso_practice() {
        let n = builtin("iso").expect("compiled in").number;
        assert_eq!(n.length(0.5, None), "0,5");
        assert_eq!(n.length(12.0, None), "12");
        assert_eq!(n.length(-0.02, Some(2)), "−0,02");
        assert_eq!(n.length(2.675, Some(2)), "2,68");
        assert_eq!(n.length(9.9996, None), "10");
        assert_eq!(n.length(-0.0004, None), "0");
        assert_eq!(n.length(30.0, Some(2)), "30,00");
        assert_eq!(n.length(0.1 + 0.2, None), "0,3");
    }
}
