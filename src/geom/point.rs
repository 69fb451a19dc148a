//! Positions and displacements, each tagged with its space.

use std::fmt;
use std::marker::PhantomData;
use std::ops::{Add, AddAssign, Div, Mul, Neg, Sub};

/// A coordinate space. Implemented by the three markers of this module and by nothing else.
pub trait Space: Copy + fmt::Debug + PartialEq + Send + Sync + 'static {
    /// Whether y grows towards the top of the page.
    const Y_UP: bool;
}

/// Flat picture of the part: mm of the part, x right, y up, origin at the part's origin.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct View;
/// Around one view: mm of paper, x right, y down, origin where the part's origin is drawn.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Paper;
/// The sheet: mm of paper, x right, y down, origin at the trimmed sheet's upper left corner.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Sheet;

impl Space for View {
    const Y_UP: bool = true;
}
impl Space for Paper {
    const Y_UP: bool = false;
}
impl Space for Sheet {
    const Y_UP: bool = false;
}

/// A position in space `S`, in mm.
#[derive(Clone, Copy, PartialEq)]
pub struct Point<S> {
    /// Distance to the right of the origin.
    pub x: f64,
    /// Distance from the origin along the space's y axis.
    pub y: f64,
    space: PhantomData<S>,
}

/// A displacement in space `S`, in mm.
#[derive(Clone, Copy, PartialEq)]
pub struct Vector<S> {
    /// Displacement to the right.
    pub x: f64,
    /// Displacement along the space's y axis.
    pub y: f64,
    space: PhantomData<S>,
}

impl<S> Point<S> {
    /// The position `x`, `y` mm from the origin of `S`.
    #[must_use]
    pub const fn new(x: f64, y: f64) -> Self {
        Self { x, y, space: PhantomData }
    }
}

impl<S: Space> Point<S> {
    /// Distance to `other` in mm.
    #[must_use]
    pub fn distance(self, other: Self) -> f64 {
        (other - self).length()
    }

    /// The point halfway to `other`.
    #[must_use]
    pub fn middle(self, other: Self) -> Self {
        self + (other - self) * 0.5
    }

    /// Whether the two positions are the same for drawing purposes.
    #[must_use]
    pub fn is_at(self, other: Self) -> bool {
        self.distance(other) <= super::COINCIDENT
    }

    /// The same numbers for kurbo, which knows no spaces.
    #[must_use]
    pub fn to_kurbo(self) -> kurbo::Point {
        kurbo::Point::new(self.x, self.y)
    }

    /// A kurbo point that is known to lie in `S`.
    #[must_use]
    pub fn from_kurbo(p: kurbo::Point) -> Self {
        Self::new(p.x, p.y)
    }
}

impl<S> Vector<S> {
    /// The displacement `x`, `y` mm.
    #[must_use]
    pub const fn new(x: f64, y: f64) -> Self {
        Self { x, y, space: PhantomData }
    }
}

impl<S: Space> Vector<S> {
    /// The unit vector that the reader sees at `degrees` counter-clockwise from "to the right",
    /// whichever way the space's y axis points.
    #[must_use]
    pub fn at_angle(degrees: f64) -> Self {
        let (sin, cos) = degrees.to_radians().sin_cos();
        Self::new(cos, if S::Y_UP { sin } else { -sin })
    }

    /// Direction as the reader sees it, in degrees counter-clockwise from "to the right",
    /// in (−180, 180].
    #[must_use]
    pub fn angle(self) -> f64 {
        let y = if S::Y_UP { self.y } else { -self.y };
        y.atan2(self.x).to_degrees()
    }

    /// Length in mm.
    #[must_use]
    pub fn length(self) -> f64 {
        // Not `hypot`: sheet sizes are far from overflow, and this is the hottest line of a layout.
        (self.x * self.x + self.y * self.y).sqrt()
    }

    /// The same direction with length 1; `None` for a displacement too short to have one.
    #[must_use]
    pub fn unit(self) -> Option<Self> {
        let length = self.length();
        (length > 1e-9).then(|| self / length)
    }

    /// Turned a quarter counter-clockwise as the reader sees it.
    #[must_use]
    pub fn left(self) -> Self {
        if S::Y_UP { Self::new(-self.y, self.x) } else { Self::new(self.y, -self.x) }
    }

    /// Scalar product.
    #[must_use]
    pub fn dot(self, other: Self) -> f64 {
        self.x * other.x + self.y * other.y
    }

    /// z component of the vector product of the raw coordinates.
    #[must_use]
    pub fn cross(self, other: Self) -> f64 {
        self.x * other.y - self.y * other.x
    }
}

impl<S> Sub for Point<S> {
    type Output = Vector<S>;
    fn sub(self, other: Self) -> Vector<S> {
        Vector::new(self.x - other.x, self.y - other.y)
    }
}
impl<S> Add<Vector<S>> for Point<S> {
    type Output = Self;
    fn add(self, v: Vector<S>) -> Self {
        Self::new(self.x + v.x, self.y + v.y)
    }
}
impl<S> Sub<Vector<S>> for Point<S> {
    type Output = Self;
    fn sub(self, v: Vector<S>) -> Self {
        Self::new(self.x - v.x, self.y - v.y)
    }
}
impl<S> AddAssign<Vector<S>> for Point<S> {
    fn add_assign(&mut self, v: Vector<S>) {
        self.x += v.x;
        self.y += v.y;
    }
}
impl<S> Add for Vector<S> {
    type Output = Self;
    fn add(self, v: Self) -> Self {
        Self::new(self.x + v.x, self.y + v.y)
    }
}
impl<S> Sub for Vector<S> {
    type Output = Self;
    fn sub(self, v: Self) -> Self {
        Self::new(self.x - v.x, self.y - v.y)
    }
}
impl<S> Mul<f64> for Vector<S> {
    type Output = Self;
    fn mul(self, k: f64) -> Self {
        Self::new(self.x * k, self.y * k)
    }
}
impl<S> Div<f64> for Vector<S> {
    type Output = Self;
    fn div(self, k: f64) -> Self {
        Self::new(self.x / k, self.y / k)
    }
}
impl<S> Neg for Vector<S> {
    type Output = Self;
    fn neg(self) -> Self {
        Self::new(-self.x, -self.y)
    }
}

impl<S> fmt::Debug for Point<S> {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "({:.3}, {:.3})", self.x, self.y)
    }
}
impl<S> fmt::Debug for Vector<S> {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "<{:.3}, {:.3}>", self.x, self.y)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn angles_are_those_the_reader_sees_in_every_space() {
        let up = Vector::<View>::at_angle(90.0);
        let on_paper = Vector::<Sheet>::at_angle(90.0);
        assert!(up.y > 0.99 && on_paper.y < -0.99);
        assert!((up.angle() - 90.0).abs() < 1e-9 && (on_paper.angle() - 90.0).abs() < 1e-9);
    }

    #[test]
    fn left_of_rightwards_is_upwards() {
        assert!(Vector::<View>::new(1.0, 0.0).left().y > 0.0);
        assert!(Vector::<Sheet>::new(1.0, 0.0).left().y < 0.0);
    }
}
