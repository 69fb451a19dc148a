//! Expressions: arithmetic that may stand wherever a spec has a number.
//!
//! Takes the text of one expression; gives a tree that remembers places in that text, and from it
//! a [`Quantity`] once the names in it have values. A plain number is in the drawing's unit; a
//! unit behind a number (`2.5 in`) converts it *to* that unit, so values are comparable whatever
//! they were written in. A quantity remembers whether a unit made it a length or an angle: adding
//! the two, or an angle where a length is asked for, is a mistake and reported as one.
//!
//! Grammar, loosest first; `^` binds to the right and tighter than the sign before it, so `-2^2`
//! is −4 and `2^-1` is 0.5:
//!
//! ```text
//! sum     = product (("+" | "-") product)*
//! product = sign (("*" | "/") sign)*
//! sign    = ("-" | "+") sign | power
//! power   = atom ("^" sign)?
//! atom    = number unit? | name | function "(" sum ("," sum)* ")" | "(" sum ")"
//! ```
//!
//! Results are finite or an error. Trigonometry is in degrees. Depth and length are limited, so no
//! text can exhaust the stack.

use std::ops::Range;

use crate::geom::{Vector, View};
use crate::source::nearest;
use crate::units::{LengthUnit, MM_PER_INCH};

/// Longest expression in bytes; one that is longer is a mistake or an attack.
const LONGEST: usize = 1000;
/// Deepest nesting of brackets, signs and powers.
const DEEPEST: usize = 50;

/// What a unit has made of a value.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Kind {
    /// Just a number, fit for anything.
    Plain,
    /// A length in the drawing's unit.
    Length,
    /// An angle in degrees.
    Angle,
}

/// A finite value.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Quantity {
    /// The value, lengths in the drawing's unit, angles in degrees.
    pub(super) value: f64,
    /// What it is the value of.
    pub(super) kind: Kind,
}

/// What stands behind a name.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Lookup {
    /// This value.
    Known(Quantity),
    /// A parameter whose own fault has been reported already.
    Faulty,
    /// Nothing.
    Unknown,
}

/// Why an expression has no value.
#[derive(Clone, Debug, PartialEq)]
pub(super) enum Failure {
    /// It is wrong here, in bytes of the expression.
    Wrong(Range<usize>, Fault),
    /// It uses a parameter whose own fault has been reported already.
    Dependent,
}

/// What is wrong with an expression.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub(super) enum Fault {
    #[error("the expression is empty")]
    Empty,
    #[error("the expression has {0} bytes; the limit is {LONGEST}")]
    TooLong(usize),
    #[error("brackets, signs and powers are nested deeper than {DEEPEST}")]
    TooDeep,
    #[error("`{0}` has no meaning in an expression")]
    StrayCharacter(char),
    #[error("`{0}` is not a number")]
    NotNumber(String),
    #[error("the expression ends where a value is expected")]
    MissingValue,
    #[error("`{0}` stands where a value is expected")]
    NotValue(String),
    #[error("`{0}` stands where an operator or the end is expected")]
    NotOperator(String),
    #[error("this bracket is never closed")]
    Unclosed,
    #[error("there is no function `{0}`")]
    UnknownFunction(String),
    #[error("there is no parameter `{0}`")]
    UnknownName(String),
    #[error("`{0}` is a function and takes its values in brackets")]
    BareFunction(&'static str),
    #[error("`{0}` is a unit and follows a number")]
    BareUnit(&'static str),
    #[error("`{name}` takes {takes}, not {given}")]
    Count { name: &'static str, takes: &'static str, given: usize },
    #[error("a length and an angle cannot be combined here")]
    Mixed,
    #[error("`{0}` takes an angle or a plain number, not a length")]
    LengthIntoAngle(&'static str),
    #[error("this divides by zero")]
    DivisionByZero,
    #[error("this has no real value")]
    NoRealValue,
    #[error("this is too large for a number")]
    Overflow,
}

impl Fault {
    /// What to do about it; `names` are the parameters there are.
    pub(super) fn help<'a>(&self, names: impl Iterator<Item = &'a str>) -> Option<String> {
        let functions = Function::ALL.iter().map(|f| f.name());
        match self {
            Self::UnknownName(name) => {
                let meant = nearest(name, names.chain(functions).chain(["pi"]));
                Some(meant.map_or_else(
                    || format!("add `{name} = …` to [parameters]"),
                    |m| format!("did you mean `{m}`?"),
                ))
            }
            Self::UnknownFunction(name) => {
                let all: Vec<&str> = functions.collect();
                Some(nearest(name, all.iter().copied()).map_or_else(
                    || format!("the functions are {}", all.join(", ")),
                    |m| format!("did you mean `{m}`?"),
                ))
            }
            Self::StrayCharacter('−' | '–') => Some("write the minus sign as -".to_owned()),
            Self::StrayCharacter('×' | '·') => Some("write * to multiply".to_owned()),
            Self::StrayCharacter('÷' | ':') => Some("write / to divide".to_owned()),
            Self::StrayCharacter('°') => Some("write `deg` after the number".to_owned()),
            Self::StrayCharacter('"' | '″') => Some("write `in` after the number".to_owned()),
            Self::NotOperator(text) if text == "," => {
                Some("write a decimal point, not a comma".to_owned())
            }
            Self::BareFunction(name) => Some(format!("write `{name}(…)`")),
            Self::BareUnit(unit) => Some(format!("write it after a number, as in `2 {unit}`")),
            Self::Empty | Self::MissingValue => {
                Some("write a number, a parameter or an expression such as `width / 2`".to_owned())
            }
            Self::TooLong(_) | Self::TooDeep => {
                Some("give parts of it names in [parameters]".to_owned())
            }
            Self::StrayCharacter(_)
            | Self::NotNumber(_)
            | Self::NotValue(_)
            | Self::NotOperator(_)
            | Self::Unclosed
            | Self::Count { .. }
            | Self::Mixed
            | Self::LengthIntoAngle(_)
            | Self::DivisionByZero
            | Self::NoRealValue
            | Self::Overflow => None,
        }
    }
}

/// A parsed expression.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Expression {
    root: Node,
}

#[derive(Clone, Debug, PartialEq)]
struct Node {
    what: What,
    range: Range<usize>,
}

#[derive(Clone, Debug, PartialEq)]
enum What {
    Number(f64, Option<Unit>),
    Name(String),
    Negative(Box<Node>),
    Binary(Operator, Box<Node>, Box<Node>),
    Call(Function, Vec<Node>),
}

#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Operator {
    Plus,
    Minus,
    Times,
    Over,
    Power,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Unit {
    Millimetre,
    Inch,
    Degree,
}

impl Unit {
    const ALL: [Self; 3] = [Self::Millimetre, Self::Inch, Self::Degree];

    fn name(self) -> &'static str {
        match self {
            Self::Millimetre => "mm",
            Self::Inch => "in",
            Self::Degree => "deg",
        }
    }

    fn named(name: &str) -> Option<Self> {
        Self::ALL.into_iter().find(|u| u.name() == name)
    }

    /// The number with this unit, in the drawing's unit.
    fn quantity(self, number: f64, units: LengthUnit) -> Quantity {
        // Dividing only where the units differ keeps `2.5 in` exactly 2.5 in an inch drawing.
        let length = |own: LengthUnit, mm: f64| {
            if own == units { number } else { number * mm / units.in_mm() }
        };
        match self {
            Self::Millimetre => {
                Quantity { value: length(LengthUnit::Millimetre, 1.0), kind: Kind::Length }
            }
            Self::Inch => {
                Quantity { value: length(LengthUnit::Inch, MM_PER_INCH), kind: Kind::Length }
            }
            Self::Degree => Quantity { value: number, kind: Kind::Angle },
        }
    }
}

#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Function {
    Sqrt,
    Abs,
    Min,
    Max,
    Floor,
    Ceil,
    Round,
    Sin,
    Cos,
    Tan,
    Asin,
    Acos,
    Atan,
    Atan2,
    Hypot,
}

impl Function {
    const ALL: [Self; 15] = [
        Self::Sqrt,
        Self::Abs,
        Self::Min,
        Self::Max,
        Self::Floor,
        Self::Ceil,
        Self::Round,
        Self::Sin,
        Self::Cos,
        Self::Tan,
        Self::Asin,
        Self::Acos,
        Self::Atan,
        Self::Atan2,
        Self::Hypot,
    ];

    fn name(self) -> &'static str {
        match self {
            Self::Sqrt => "sqrt",
            Self::Abs => "abs",
            Self::Min => "min",
            Self::Max => "max",
            Self::Floor => "floor",
            Self::Ceil => "ceil",
            Self::Round => "round",
            Self::Sin => "sin",
            Self::Cos => "cos",
            Self::Tan => "tan",
            Self::Asin => "asin",
            Self::Acos => "acos",
            Self::Atan => "atan",
            Self::Atan2 => "atan2",
            Self::Hypot => "hypot",
        }
    }

    fn named(name: &str) -> Option<Self> {
        Self::ALL.into_iter().find(|f| f.name() == name)
    }

    /// How many values it takes, and the words for that.
    fn takes(self) -> (std::ops::RangeInclusive<usize>, &'static str) {
        match self {
            Self::Min | Self::Max => (1..=usize::MAX, "at least one value"),
            Self::Atan2 | Self::Hypot => (2..=2, "two values"),
            Self::Sqrt
            | Self::Abs
            | Self::Floor
            | Self::Ceil
            | Self::Round
            | Self::Sin
            | Self::Cos
            | Self::Tan
            | Self::Asin
            | Self::Acos
            | Self::Atan => (1..=1, "one value"),
        }
    }
}

/// Whether a parameter may not have this name because expressions use it already.
pub(super) fn is_taken(name: &str) -> bool {
    name == "pi" || Function::named(name).is_some() || Unit::named(name).is_some()
}

/// Whether expressions can read this as a name: a letter or `_`, then letters, digits and `_`.
pub(super) fn is_name(text: &str) -> bool {
    let mut chars = text.chars();
    chars.next().is_some_and(begins_name) && chars.all(continues_name)
}

fn begins_name(c: char) -> bool {
    c.is_alphabetic() || c == '_'
}

fn continues_name(c: char) -> bool {
    c.is_alphanumeric() || c == '_'
}

impl Expression {
    /// Parses a whole text.
    pub(super) fn parse(text: &str) -> Result<Self, Failure> {
        if text.len() > LONGEST {
            return Err(Failure::Wrong(0..text.len(), Fault::TooLong(text.len())));
        }
        let tokens = tokens(text)?;
        if tokens.is_empty() {
            return Err(Failure::Wrong(0..text.len(), Fault::Empty));
        }
        let mut parser = Parser { text, tokens: &tokens, depth: 0 };
        let root = parser.sum()?;
        match parser.tokens.first() {
            None => Ok(Self { root }),
            Some(t) => {
                let found = text[t.range.clone()].to_owned();
                Err(Failure::Wrong(t.range.clone(), Fault::NotOperator(found)))
            }
        }
    }

    /// The names that it uses, in order of appearance, repeats included.
    pub(super) fn names(&self) -> Vec<(&str, Range<usize>)> {
        let mut names = Vec::new();
        let mut nodes = vec![&self.root];
        while let Some(node) = nodes.pop() {
            match &node.what {
                What::Number(..) => {}
                What::Name(name) => names.push((name.as_str(), node.range.clone())),
                What::Negative(a) => nodes.push(a),
                What::Binary(_, a, b) => nodes.extend([&**b, &**a]),
                What::Call(_, values) => nodes.extend(values.iter().rev()),
            }
        }
        names
    }

    /// Its value, with names looked up and units converted to the drawing's.
    pub(super) fn value(
        &self,
        units: LengthUnit,
        lookup: &dyn Fn(&str) -> Lookup,
    ) -> Result<Quantity, Failure> {
        Evaluation { units, lookup }.node(&self.root)
    }
}

#[derive(Clone, Debug, PartialEq)]
enum Token {
    Number(f64),
    Name,
    Sign(char),
}

#[derive(Clone, Debug, PartialEq)]
struct Placed {
    token: Token,
    range: Range<usize>,
}

fn tokens(text: &str) -> Result<Vec<Placed>, Failure> {
    let mut tokens = Vec::new();
    let mut at = 0;
    while let Some(c) = text[at..].chars().next() {
        let rest = &text[at..];
        let (token, length) = if c.is_whitespace() {
            at += c.len_utf8();
            continue;
        } else if c.is_ascii_digit() || (c == '.' && rest[1..].starts_with(digit)) {
            let length = number_length(rest);
            let written = &rest[..length];
            let number: f64 = written.parse().map_err(|_| {
                Failure::Wrong(at..at + length, Fault::NotNumber(written.to_owned()))
            })?;
            if !number.is_finite() {
                return Err(Failure::Wrong(at..at + length, Fault::Overflow));
            }
            (Token::Number(number), length)
        } else if begins_name(c) {
            (Token::Name, rest.find(|c| !continues_name(c)).unwrap_or(rest.len()))
        } else if "+-*/^(),".contains(c) {
            (Token::Sign(c), 1)
        } else {
            return Err(Failure::Wrong(at..at + c.len_utf8(), Fault::StrayCharacter(c)));
        };
        tokens.push(Placed { token, range: at..at + length });
        at += length;
    }
    Ok(tokens)
}

fn digit(c: char) -> bool {
    c.is_ascii_digit()
}

/// Length of the number that `text` begins with: digits and points, then an exponent if digits
/// follow the `e`. Two points make it a text that is no number, to be reported as such.
fn number_length(text: &str) -> usize {
    let mantissa = text.find(|c: char| !digit(c) && c != '.').unwrap_or(text.len());
    let exponent = &text[mantissa..];
    let Some(power) = exponent.strip_prefix(['e', 'E']) else { return mantissa };
    let unsigned = power.strip_prefix(['+', '-']).unwrap_or(power);
    if !unsigned.starts_with(digit) {
        return mantissa;
    }
    let digits = unsigned.find(|c| !digit(c)).unwrap_or(unsigned.len());
    text.len() - unsigned.len() + digits
}

struct Parser<'a> {
    text: &'a str,
    tokens: &'a [Placed],
    depth: usize,
}

impl Parser<'_> {
    fn take_sign(&mut self, wanted: &str) -> Option<(char, Range<usize>)> {
        let [Placed { token: Token::Sign(c), range }, rest @ ..] = self.tokens else { return None };
        if !wanted.contains(*c) {
            return None;
        }
        self.tokens = rest;
        Some((*c, range.clone()))
    }

    /// Runs a rule that may come back to itself, one level deeper.
    fn deeper(&mut self, rule: fn(&mut Self) -> Result<Node, Failure>) -> Result<Node, Failure> {
        if self.depth == DEEPEST {
            let at = self.tokens.first().map_or(self.text.len(), |t| t.range.start);
            return Err(Failure::Wrong(at..self.text.len(), Fault::TooDeep));
        }
        self.depth += 1;
        let node = rule(self);
        self.depth -= 1;
        node
    }

    fn sum(&mut self) -> Result<Node, Failure> {
        let mut left = self.product()?;
        while let Some((c, _)) = self.take_sign("+-") {
            let operator = if c == '+' { Operator::Plus } else { Operator::Minus };
            left = binary(operator, left, self.product()?);
        }
        Ok(left)
    }

    fn product(&mut self) -> Result<Node, Failure> {
        let mut left = self.sign()?;
        while let Some((c, _)) = self.take_sign("*/") {
            let operator = if c == '*' { Operator::Times } else { Operator::Over };
            left = binary(operator, left, self.sign()?);
        }
        Ok(left)
    }

    fn sign(&mut self) -> Result<Node, Failure> {
        match self.take_sign("+-") {
            Some(('-', range)) => {
                let value = self.deeper(Self::sign)?;
                let range = range.start..value.range.end;
                Ok(Node { what: What::Negative(Box::new(value)), range })
            }
            Some(_) => self.deeper(Self::sign),
            None => self.power(),
        }
    }

    fn power(&mut self) -> Result<Node, Failure> {
        let base = self.atom()?;
        match self.take_sign("^") {
            Some(_) => Ok(binary(Operator::Power, base, self.deeper(Self::sign)?)),
            None => Ok(base),
        }
    }

    fn atom(&mut self) -> Result<Node, Failure> {
        let Some((first, rest)) = self.tokens.split_first() else {
            let end = self.text.len();
            return Err(Failure::Wrong(end..end, Fault::MissingValue));
        };
        self.tokens = rest;
        let range = first.range.clone();
        match first.token {
            Token::Number(number) => Ok(self.number(number, range)),
            Token::Name => self.name(range),
            Token::Sign('(') => {
                let node = self.deeper(Self::sum)?;
                let end = self.close(range.clone())?;
                Ok(Node { range: range.start..end, ..node })
            }
            Token::Sign(c) => Err(Failure::Wrong(range, Fault::NotValue(c.to_string()))),
        }
    }

    fn number(&mut self, number: f64, mut range: Range<usize>) -> Node {
        let unit = match self.tokens {
            [Placed { token: Token::Name, range: name }, ..] => {
                Unit::named(&self.text[name.clone()]).inspect(|_| range.end = name.end)
            }
            _ => None,
        };
        if unit.is_some() {
            self.tokens = &self.tokens[1..];
        }
        Node { what: What::Number(number, unit), range }
    }

    fn name(&mut self, range: Range<usize>) -> Result<Node, Failure> {
        let name = &self.text[range.clone()];
        let function = Function::named(name);
        match (self.take_sign("("), function) {
            (Some((_, bracket)), Some(function)) => self.call(function, range, bracket),
            (Some(_), None) => Err(Failure::Wrong(range, Fault::UnknownFunction(name.to_owned()))),
            (None, Some(function)) => {
                Err(Failure::Wrong(range, Fault::BareFunction(function.name())))
            }
            (None, None) => match Unit::named(name) {
                Some(unit) => Err(Failure::Wrong(range, Fault::BareUnit(unit.name()))),
                None => Ok(Node { what: What::Name(name.to_owned()), range }),
            },
        }
    }

    fn call(
        &mut self,
        function: Function,
        name: Range<usize>,
        bracket: Range<usize>,
    ) -> Result<Node, Failure> {
        let mut values = vec![self.deeper(Self::sum)?];
        while self.take_sign(",").is_some() {
            values.push(self.deeper(Self::sum)?);
        }
        let range = name.start..self.close(bracket)?;
        let (count, takes) = function.takes();
        if !count.contains(&values.len()) {
            let fault = Fault::Count { name: function.name(), takes, given: values.len() };
            return Err(Failure::Wrong(range, fault));
        }
        Ok(Node { what: What::Call(function, values), range })
    }

    /// Takes the closing bracket of the one at `open` and gives the byte after it.
    fn close(&mut self, open: Range<usize>) -> Result<usize, Failure> {
        match (self.take_sign(")"), self.tokens.first()) {
            (Some((_, range)), _) => Ok(range.end),
            (None, None) => Err(Failure::Wrong(open, Fault::Unclosed)),
            (None, Some(t)) => {
                let found = self.text[t.range.clone()].to_owned();
                Err(Failure::Wrong(t.range.clone(), Fault::NotOperator(found)))
            }
        }
    }
}

fn binary(operator: Operator, left: Node, right: Node) -> Node {
    let range = left.range.start..right.range.end;
    Node { what: What::Binary(operator, Box::new(left), Box::new(right)), range }
}

struct Evaluation<'a> {
    units: LengthUnit,
    lookup: &'a dyn Fn(&str) -> Lookup,
}

impl Evaluation<'_> {
    fn node(&self, node: &Node) -> Result<Quantity, Failure> {
        let wrong = |fault| Failure::Wrong(node.range.clone(), fault);
        let quantity = match &node.what {
            What::Number(number, None) => Quantity { value: *number, kind: Kind::Plain },
            What::Number(number, Some(unit)) => unit.quantity(*number, self.units),
            What::Name(name) => self.name(name).map_err(|f| f.map_or(Failure::Dependent, wrong))?,
            What::Negative(a) => {
                let a = self.node(a)?;
                Quantity { value: -a.value, ..a }
            }
            What::Binary(operator, a, b) => {
                combine(*operator, self.node(a)?, self.node(b)?).map_err(wrong)?
            }
            What::Call(function, values) => {
                let values: Vec<Quantity> =
                    values.iter().map(|v| self.node(v)).collect::<Result<_, _>>()?;
                call(*function, &values).map_err(wrong)?
            }
        };
        if quantity.value.is_nan() {
            return Err(wrong(Fault::NoRealValue));
        }
        if quantity.value.is_infinite() {
            return Err(wrong(Fault::Overflow));
        }
        Ok(quantity)
    }

    /// The value of a name, or what is wrong with it (nothing to say if that was said before).
    fn name(&self, name: &str) -> Result<Quantity, Option<Fault>> {
        match (self.lookup)(name) {
            Lookup::Known(quantity) => Ok(quantity),
            Lookup::Faulty => Err(None),
            Lookup::Unknown if name == "pi" => {
                Ok(Quantity { value: std::f64::consts::PI, kind: Kind::Plain })
            }
            Lookup::Unknown => Err(Some(Fault::UnknownName(name.to_owned()))),
        }
    }
}

fn combine(operator: Operator, a: Quantity, b: Quantity) -> Result<Quantity, Fault> {
    let (x, y) = (a.value, b.value);
    Ok(match operator {
        Operator::Plus => Quantity { value: x + y, kind: common(&[a, b])? },
        Operator::Minus => Quantity { value: x - y, kind: common(&[a, b])? },
        Operator::Times => Quantity { value: x * y, kind: product_kind(a.kind, b.kind) },
        Operator::Over if y == 0.0 => return Err(Fault::DivisionByZero),
        Operator::Over => {
            let kind = if b.kind == Kind::Plain { a.kind } else { Kind::Plain };
            Quantity { value: x / y, kind }
        }
        Operator::Power if x == 0.0 && y < 0.0 => return Err(Fault::DivisionByZero),
        Operator::Power => Quantity { value: x.powf(y), kind: Kind::Plain },
    })
}

/// What a sum or the greatest of some values is: what all of them can be.
fn common(values: &[Quantity]) -> Result<Kind, Fault> {
    let has = |kind| values.iter().any(|v| v.kind == kind);
    match (has(Kind::Length), has(Kind::Angle)) {
        (true, true) => Err(Fault::Mixed),
        (true, false) => Ok(Kind::Length),
        (false, true) => Ok(Kind::Angle),
        (false, false) => Ok(Kind::Plain),
    }
}

/// What a product is. Areas and the like are not followed further: they count as plain.
fn product_kind(a: Kind, b: Kind) -> Kind {
    match (a, b) {
        (Kind::Plain, kind) | (kind, Kind::Plain) => kind,
        (Kind::Length | Kind::Angle, Kind::Length | Kind::Angle) => Kind::Plain,
    }
}

fn call(function: Function, values: &[Quantity]) -> Result<Quantity, Fault> {
    let plain = |value| Quantity { value, kind: Kind::Plain };
    let angle = |value: f64| Quantity { value, kind: Kind::Angle };
    let numbers: Vec<f64> = values.iter().map(|v| v.value).collect();
    let kind = common(values)?;
    let alike = |value| Quantity { value, kind };
    let (x, y) = (numbers[0], numbers.get(1).copied().unwrap_or(0.0));
    Ok(match function {
        Function::Sqrt => plain(x.sqrt()),
        Function::Abs => alike(x.abs()),
        Function::Min => alike(numbers.iter().copied().fold(x, f64::min)),
        Function::Max => alike(numbers.iter().copied().fold(x, f64::max)),
        Function::Floor => alike(x.floor()),
        Function::Ceil => alike(x.ceil()),
        Function::Round => alike(x.round()),
        Function::Hypot => alike(x.hypot(y)),
        Function::Asin => angle(x.asin().to_degrees()),
        Function::Acos => angle(x.acos().to_degrees()),
        Function::Atan => angle(x.atan().to_degrees()),
        Function::Atan2 => angle(x.atan2(y).to_degrees()),
        Function::Sin | Function::Cos | Function::Tan if kind == Kind::Length => {
            return Err(Fault::LengthIntoAngle(function.name()));
        }
        Function::Sin => plain(cos_sin(x).1),
        Function::Cos => plain(cos_sin(x).0),
        Function::Tan => {
            let (cos, sin) = cos_sin(x);
            if cos == 0.0 {
                return Err(Fault::NoRealValue);
            }
            plain(sin / cos)
        }
    })
}

/// Cosine and sine of an angle in degrees; exact at right angles, where `sin(180)` would otherwise
/// leave 1e-16 in a coordinate that the author knows to be 0.
fn cos_sin(degrees: f64) -> (f64, f64) {
    let turn = degrees.rem_euclid(360.0);
    for (right_angle, exact) in
        [(0.0, (1.0, 0.0)), (90.0, (0.0, 1.0)), (180.0, (-1.0, 0.0)), (270.0, (0.0, -1.0))]
    {
        if turn == right_angle {
            return exact;
        }
    }
    let direction = Vector::<View>::at_angle(turn);
    (direction.x, direction.y)
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;

    use super::*;

    fn quantity(text: &str, units: LengthUnit) -> Result<Quantity, Failure> {
        Expression::parse(text)?.value(units, &|name| match name {
            "width" => Lookup::Known(Quantity { value: 140.0, kind: Kind::Plain }),
            "slope" => Lookup::Known(Quantity { value: 30.0, kind: Kind::Angle }),
            "broken" => Lookup::Faulty,
            _ => Lookup::Unknown,
        })
    }

    fn value(text: &str) -> f64 {
        let q = quantity(text, LengthUnit::Millimetre).unwrap_or_else(|e| panic!("{text}: {e:?}"));
        q.value
    }

    fn fault(text: &str) -> (Range<usize>, Fault) {
        match quantity(text, LengthUnit::Millimetre) {
            Err(Failure::Wrong(range, fault)) => (range, fault),
            other => panic!("{text}: {other:?}"),
        }
    }

    #[test]
    fn operators_bind_as_in_mathematics() {
        for (text, expected) in [
            ("1 + 2 * 3", 7.0),
            ("(1 + 2) * 3", 9.0),
            ("10 - 4 - 3", 3.0),
            ("16 / 4 / 2", 2.0),
            ("2 ^ 3 ^ 2", 512.0),
            ("-2^2", -4.0),
            ("(-2)^2", 4.0),
            ("2^-1", 0.5),
            ("--3", 3.0),
            ("+0.02", 0.02),
            ("2 * -3", -6.0),
            ("1e-3", 0.001),
            (".5", 0.5),
            ("2.5E+2", 250.0),
            ("width / 2 + 10", 80.0),
        ] {
            assert!((value(text) - expected).abs() < 1e-12, "{text} = {}", value(text));
        }
    }

    #[test]
    fn functions_agree_with_known_values() {
        for (text, expected) in [
            ("sqrt(2)", std::f64::consts::SQRT_2),
            ("sin(30)", 0.5),
            ("cos(60 deg)", 0.5),
            ("tan(45)", 1.0),
            ("sin(180)", 0.0),
            ("cos(90)", 0.0),
            ("asin(1)", 90.0),
            ("acos(-1)", 180.0),
            ("atan(1)", 45.0),
            ("atan2(1, -1)", 135.0),
            ("hypot(3, 4)", 5.0),
            ("abs(-3) + min(4, 2, 9) + max(1, 5)", 10.0),
            ("floor(2.7) + ceil(2.1) + round(2.5)", 8.0),
            ("pi", std::f64::consts::PI),
        ] {
            assert!((value(text) - expected).abs() < 1e-12, "{text} = {}", value(text));
        }
        assert_eq!(value("sin(180)"), 0.0);
    }

    #[test]
    fn units_convert_to_the_drawings_unit() {
        let inch = |text| quantity(text, LengthUnit::Inch).map(|q| q.value);
        assert_eq!(inch("2.5 in"), Ok(2.5));
        assert_eq!(inch("25.4 mm"), Ok(1.0));
        assert_eq!(value("2 in"), 50.8);
        assert_eq!(value("3 mm + 1"), 4.0);
        assert_eq!(inch("45 deg"), Ok(45.0));
    }

    #[test]
    fn lengths_and_angles_do_not_mix() {
        assert_eq!(fault("2 mm + slope").1, Fault::Mixed);
        assert_eq!(fault("max(2 mm, 3 deg)").1, Fault::Mixed);
        assert_eq!(fault("sin(2 mm)").1, Fault::LengthIntoAngle("sin"));
        let kind = |text| quantity(text, LengthUnit::Millimetre).map(|q| q.kind);
        assert_eq!(kind("2 * 3 mm"), Ok(Kind::Length));
        assert_eq!(kind("3 mm / 2 mm"), Ok(Kind::Plain));
        assert_eq!(kind("atan2(3 mm, 2 mm)"), Ok(Kind::Angle));
        assert_eq!(kind("10 mm * sin(slope)"), Ok(Kind::Length));
    }

    #[test]
    fn faults_name_their_place() {
        for (text, range, expected) in [
            ("", 0..0, Fault::Empty),
            ("  ", 0..2, Fault::Empty),
            ("1 +", 3..3, Fault::MissingValue),
            ("1 * / 2", 4..5, Fault::NotValue("/".into())),
            ("(1 + 2", 0..1, Fault::Unclosed),
            ("1 2", 2..3, Fault::NotOperator("2".into())),
            ("3,5", 1..2, Fault::NotOperator(",".into())),
            ("1.2.3", 0..5, Fault::NotNumber("1.2.3".into())),
            ("a − 1", 2..5, Fault::StrayCharacter('−')),
            ("1 / (2 - 2)", 0..11, Fault::DivisionByZero),
            ("2 + sqrt(-1)", 4..12, Fault::NoRealValue),
            ("(-8)^0.5", 0..8, Fault::NoRealValue),
            ("tan(90)", 0..7, Fault::NoRealValue),
            ("10^400", 0..6, Fault::Overflow),
            ("1e999", 0..5, Fault::Overflow),
            ("sqrt(1, 2)", 0..10, Fault::Count { name: "sqrt", takes: "one value", given: 2 }),
            ("2 * sqrt", 4..8, Fault::BareFunction("sqrt")),
            ("mm", 0..2, Fault::BareUnit("mm")),
            ("root(2)", 0..4, Fault::UnknownFunction("root".into())),
            ("2 * widht", 4..9, Fault::UnknownName("widht".into())),
        ] {
            assert_eq!(fault(text), (range, expected), "{text}");
        }
    }

    #[test]
    fn a_faulty_parameter_is_not_reported_twice() {
        let found = quantity("broken + 1", LengthUnit::Millimetre);
        assert_eq!(found, Err(Failure::Dependent));
    }

    #[test]
    fn depth_and_length_are_limited() {
        assert_eq!(fault(&"(".repeat(500)).1, Fault::TooDeep);
        assert_eq!(fault(&"-".repeat(500)).1, Fault::TooDeep);
        assert_eq!(fault(&format!("1{}", "^1".repeat(400))).1, Fault::TooDeep);
        assert_eq!(fault(&"1+".repeat(600)).1, Fault::TooLong(1200));
        assert_eq!(value(&format!("1{}", "+1".repeat(499))), 500.0);
    }

    /// A random tree as text, bracketed so that it means the same in any language, and its value by
    /// Rust's own arithmetic.
    fn trees() -> impl Strategy<Value = (String, f64)> {
        let leaf = (0u32..1000).prop_map(|n| {
            let number = f64::from(n) / 8.0;
            (number.to_string(), number)
        });
        leaf.prop_recursive(5, 40, 2, |inner| {
            (inner.clone(), inner, 0..6).prop_map(|((a, x), (b, y), operation)| match operation {
                0 => (format!("({a} + {b})"), x + y),
                1 => (format!("({a} - {b})"), x - y),
                2 => (format!("({a}) * ({b})"), x * y),
                3 => (format!("({a}) / ({b})"), x / y),
                4 => (format!("(-{a})"), -x),
                _ => (format!("max({a}, {b})"), x.max(y)),
            })
        })
    }

    proptest! {
        #[test]
        fn arithmetic_is_that_of_rust((text, expected) in trees()) {
            match quantity(&format!("({text})"), LengthUnit::Millimetre) {
                Ok(q) => prop_assert!(q.value == expected || (q.value - expected).abs() <= 1e-9 * expected.abs(), "{text} = {} not {expected}", q.value),
                Err(Failure::Wrong(_, Fault::TooLong(_) | Fault::TooDeep | Fault::Overflow)) => {}
                Err(Failure::Wrong(_, Fault::DivisionByZero)) => prop_assert!(!expected.is_finite() || text.contains('/')),
                Err(other) => prop_assert!(false, "{text}: {other:?}"),
            }
        }

        #[test]
        fn bare_sums_and_products_bind_as_in_rust(a in 0u8..50, b in 1u8..50, c in 1u8..50, d in 0u8..50) {
            let [x, y, z, w] = [a, b, c, d].map(f64::from);
            let text = format!("{a} - {b} * {c} / {b} + {d} - {a}");
            prop_assert!((value(&text) - (x - y * z / y + w - x)).abs() < 1e-9);
        }

        #[test]
        fn no_text_panics(text in "[-+*/^(),.0-9a-z _e×]{0,60}|\\PC{0,40}") {
            if let Err(Failure::Wrong(range, _)) = quantity(&text, LengthUnit::Inch) {
                prop_assert!(text.get(range).is_some());
            }
        }
    }
}
