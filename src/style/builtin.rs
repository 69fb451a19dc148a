//! The styles that are compiled in.

use super::Style;

const ISO: &str = include_str!("../../styles/iso.toml");

/// Names of the compiled-in styles.
#[must_use]
pub fn builtin_names() -> &'static [&'static str] {
    &["iso"]
}

/// The text of a compiled-in style, as its file has it.
#[must_use]
pub fn builtin_text(name: &str) -> Option<&'static str> {
    match name {
        "iso" => Some(ISO),
        _ => None,
    }
}

/// A compiled-in style, read.
#[must_use]
pub fn builtin(name: &str) -> Option<Style> {
    let text = builtin_text(name)?;
    Some(toml::from_str(text).expect("compiled-in styles are tested to be readable"))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_compiled_in_style_can_be_read() {
        for name in builtin_names() {
            let text = builtin_text(name).expect("a listed style has a text");
            if let Err(e) = toml::from_str::<Style>(text) {
                panic!("{name}: {e}");
            }
        }
    }
}
