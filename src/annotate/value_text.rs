//! Values as a style writes them: signs, tolerances, fits, brackets, frames.
//!
//! Forms after ISO 129-1 and ISO 286-1: symmetric deviations in the line, unequal ones stacked with
//! the upper on top, limits stacked, class then deviations in brackets, reference values in
//! brackets, theoretically exact ones framed.

use super::Practice;
use super::label::Label;
use crate::scene::{Value, ValueUnit};
use crate::spec::{Form, Show, SizeSign, Standing, Tolerance};

/// A measured value and how it is to be written.
pub(super) struct Written<'a> {
    /// mm or degrees.
    pub value: f64,
    /// What the value counts.
    pub unit: ValueUnit,
    /// How many equal features it stands for.
    pub count: usize,
    /// Text before the number, such as `⌀` or `R`.
    pub sign: &'a str,
    /// Form asked for.
    pub form: &'a Form,
    /// Decimal places where the form asks for none.
    pub places: Option<u8>,
}

impl SizeSign {
    /// The character that stands before the value.
    pub(super) fn text(self) -> &'static str {
        match self {
            Self::Diameter => "⌀",
            Self::Square => "□",
        }
    }
}

impl Written<'_> {
    /// The value with its absolute limits, as the sheet's data carry it.
    pub(super) fn data(&self) -> Value {
        let v = self.value;
        let limits = match self.form.tolerance {
            Tolerance::None => (None, None),
            Tolerance::Symmetric(t) => (Some(v - t), Some(v + t)),
            Tolerance::Deviations { upper, lower } => (Some(v + lower), Some(v + upper)),
            Tolerance::Limits { upper, lower } => (Some(lower), Some(upper)),
            Tolerance::Min => (Some(v), None),
            Tolerance::Max => (None, Some(v)),
        };
        Value { nominal: v, limits, unit: self.unit }
    }

    /// The text typeset at the height of the sheet's dimensions.
    pub(super) fn label(&self, practice: &Practice<'_>) -> Label {
        let h = practice.group.text;
        let mut label = Label::default();
        let open = if self.form.standing == Standing::Reference { "(" } else { "" };
        let close = if self.form.standing == Standing::Reference { ")" } else { "" };
        let before = format!("{open}{}{}", self.times_text(practice), self.sign);
        match self.parts(practice) {
            Parts::Line(text) => label.push(&format!("{before}{text}{close}"), h),
            Parts::Stack { size, upper, lower } => {
                let look = &practice.style.tolerance;
                let small = practice.group.deviation;
                let pitch = small * look.stack_pitch;
                let head = format!("{before}{size}");
                if !head.is_empty() {
                    label.push(&head, h);
                    if size.is_empty() {
                        label.lift_run(0, pitch / 2.0);
                    } else {
                        label.skip(look.blank_h * h);
                    }
                }
                label.stack(&upper, &lower, small, pitch, practice.style.number.decimal);
                if !close.is_empty() {
                    label.push(close, h);
                }
            }
        }
        if self.form.standing == Standing::Basic {
            label.frame(practice.style.dimension.frame_margin_h * h);
        }
        label
    }

    /// The text in one line, for reports and for lines of a callout.
    pub(super) fn line(&self, practice: &Practice<'_>) -> String {
        let body = match self.parts(practice) {
            Parts::Line(text) => text,
            Parts::Stack { size, upper, lower } if size.is_empty() => format!("{upper}/{lower}"),
            Parts::Stack { size, upper, lower } => format!("{size} {upper}/{lower}"),
        };
        let text = format!("{}{}{body}", self.times_text(practice), self.sign);
        match self.form.standing {
            Standing::Plain => text,
            Standing::Reference => format!("({text})"),
            Standing::Basic => format!("[{text}]"),
        }
    }

    /// The count before the value, such as `4×`; empty for one.
    pub(super) fn times_text(&self, practice: &Practice<'_>) -> String {
        match self.count {
            0 | 1 => String::new(),
            n => format!("{n}{}", practice.style.number.times),
        }
    }

    fn parts(&self, practice: &Practice<'_>) -> Parts {
        let size = self.number(practice, self.value, self.form.places.or(self.places));
        let named = self.form.fit.as_deref().map(|class| format!("{size} {class}"));
        match (named, self.form.tolerance, self.form.show) {
            (Some(named), _, Show::Class) | (Some(named), Tolerance::None, _) => Parts::Line(named),
            (Some(named), _, Show::Limits) => {
                let (upper, lower) = self.limit_texts(practice);
                Parts::Line(format!("{named} ({upper}/{lower})"))
            }
            (Some(named), _, Show::AsGiven | Show::Deviations) => {
                let (upper, lower) = self.deviation_texts(practice);
                Parts::Line(format!("{named} ({upper}/{lower})"))
            }
            (None, tolerance, show) => self.plain_parts(practice, size, tolerance, show),
        }
    }

    fn plain_parts(
        &self,
        practice: &Practice<'_>,
        size: String,
        tolerance: Tolerance,
        show: Show,
    ) -> Parts {
        let words = &practice.style.words;
        match (tolerance, show) {
            (Tolerance::None, _) => Parts::Line(size),
            (Tolerance::Min, _) => Parts::Line(format!("{size} {}", words.get("min"))),
            (Tolerance::Max, _) => Parts::Line(format!("{size} {}", words.get("max"))),
            (Tolerance::Limits { .. }, Show::AsGiven | Show::Limits | Show::Class)
            | (_, Show::Limits) => {
                let (upper, lower) = self.limit_texts(practice);
                Parts::Stack { size: String::new(), upper, lower }
            }
            (Tolerance::Symmetric(t), _) => {
                let t = self.number(practice, t, None);
                Parts::Line(format!("{size} ±{t}"))
            }
            (Tolerance::Deviations { .. } | Tolerance::Limits { .. }, _) => {
                let (upper, lower) = self.deviation_texts(practice);
                Parts::Stack { size, upper, lower }
            }
        }
    }

    /// Upper and lower limit, with equal places.
    fn limit_texts(&self, practice: &Practice<'_>) -> (String, String) {
        let data = self.data();
        let lower = data.limits.0.unwrap_or(self.value);
        let upper = data.limits.1.unwrap_or(self.value);
        let places = self.places_for(practice, &[lower, upper]);
        (self.number(practice, upper, Some(places)), self.number(practice, lower, Some(places)))
    }

    /// Upper and lower deviation, signed, with equal places; zero is a bare 0.
    fn deviation_texts(&self, practice: &Practice<'_>) -> (String, String) {
        let data = self.data();
        let deviation = |limit: Option<f64>| limit.map_or(0.0, |l| l - self.value);
        let (upper, lower) = (deviation(data.limits.1), deviation(data.limits.0));
        let places = self.places_for(practice, &[upper, lower]);
        let text = |d: f64| {
            let number = self.number(practice, d, Some(places));
            if number.chars().all(|c| !c.is_ascii_digit() || c == '0') {
                "0".to_owned()
            } else if d > 0.0 {
                format!("+{number}")
            } else {
                number
            }
        };
        (text(upper), text(lower))
    }

    /// The fewest places, within the style's most, that show all the values in full.
    fn places_for(&self, practice: &Practice<'_>, values: &[f64]) -> u8 {
        let most = practice.style.tolerance.places;
        let exact = |places: u8| {
            let k = 10f64.powi(i32::from(places));
            values.iter().all(|v| ((v * k).round() / k - v).abs() < 1e-7)
        };
        (0..most).find(|p| exact(*p)).unwrap_or(most)
    }

    fn number(&self, practice: &Practice<'_>, value: f64, places: Option<u8>) -> String {
        let numbers = &practice.style.number;
        match self.unit {
            ValueUnit::Millimetre => numbers.length(value, places),
            ValueUnit::Degree => {
                format!("{}°", numbers.write(value, places, numbers.angle_places))
            }
        }
    }
}

/// The pieces of a written value.
enum Parts {
    /// All in one line.
    Line(String),
    /// A size, possibly empty, and two numbers above each other.
    Stack { size: String, upper: String, lower: String },
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::style::builtin;

    fn written(value: f64, sign: &str, form: Form) -> String {
        let style = builtin("iso").expect("compiled in");
        let practice = Practice { style: &style, group: style.group_of("A3") };
        let w = Written {
            value,
            unit: ValueUnit::Millimetre,
            count: 1,
            sign,
            form: &form,
            places: None,
        };
        w.line(&practice)
    }

    // ISO 129-1:2018 and ISO 286-1:2010 forms, as common practice writes them.
    #[test]
    fn tolerances_take_their_usual_forms() {
        let tolerance = |tolerance| Form { tolerance, ..Form::default() };
        assert_eq!(written(30.0, "", tolerance(Tolerance::Symmetric(0.1))), "30 ±0,1");
        let uneven = Tolerance::Deviations { upper: 0.15, lower: -0.1 };
        assert_eq!(written(30.0, "", tolerance(uneven)), "30 +0,15/−0,10");
        let one_sided = Tolerance::Deviations { upper: 0.0, lower: -0.02 };
        assert_eq!(written(30.0, "⌀", tolerance(one_sided)), "⌀30 0/−0,02");
        let limits = Tolerance::Limits { upper: 30.05, lower: 29.98 };
        assert_eq!(written(30.0, "", tolerance(limits)), "30,05/29,98");
    }

    #[test]
    fn a_fit_shows_its_class_and_the_values_given() {
        let form = Form {
            fit: Some("H7".into()),
            tolerance: Tolerance::Deviations { upper: 0.021, lower: 0.0 },
            ..Form::default()
        };
        assert_eq!(written(30.0, "⌀", form.clone()), "⌀30 H7 (+0,021/0)");
        assert_eq!(
            written(30.0, "⌀", Form { show: Show::Limits, ..form }),
            "⌀30 H7 (30,021/30,000)"
        );
    }

    #[test]
    fn the_size_stands_level_with_the_lower_deviation() {
        let style = builtin("iso").expect("compiled in");
        let practice = Practice { style: &style, group: style.group_of("A3") };
        let form = Form {
            tolerance: Tolerance::Deviations { upper: 0.15, lower: -0.1 },
            ..Form::default()
        };
        let w = Written {
            value: 30.0,
            unit: ValueUnit::Millimetre,
            count: 1,
            sign: "",
            form: &form,
            places: None,
        };
        let label = w.label(&practice);
        assert!(label.runs[0].0.y.abs() < 1e-9 && label.runs[2].0.y.abs() < 1e-9);
        assert!(label.runs[1].0.y < -practice.group.deviation);
    }
}
