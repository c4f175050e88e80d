//! Pads of any outline, by exact integrals along the sides of a polygon.

use std::f64::consts::TAU;

use super::polygon::{Edge, Point, check, edges, minus};
use super::{Extent, Pad, PadIntegrals, PadKind};
use crate::calc::fault::Faults;
use crate::calc::quantity::{Area, Length, Si, Volume};
use crate::method_sheet;

method_sheet! {
    OUTLINE_UNIFORM_WEAR {
        id: "pad.outline.uniform_wear",
        name: "Polygon pad, uniform wear",
        equation: "p r = p_max r_0;  I = sum d L;  A = sum d (s_2 - s_1)/2;  (W, V) = sum d/2 (d n L + t (r_2 - r_1));  L = 2 artanh((s_2 - s_1)/(r_1 + r_2));  F = p_max r_0 I;  r_e = A/I;  r_F = sqrt(W^2 + V^2)/I",
        symbols: [
            ("p", "pressure at the radius r", "Pa"),
            ("p_max", "peak pressure, at the point nearest to the axis", "Pa"),
            ("r_0", "smallest radius of the outline", "m"),
            ("n, t", "outward normal and tangent of a side, counterclockwise", "1"),
            ("d", "distance of the side's line from the axis along n", "m"),
            ("s_1, s_2", "ends of a side along t", "m"),
            ("r_1, r_2", "ends of a side from the axis", "m"),
            ("A", "area", "m^2"),
            ("I", "integral of dA/r", "m"),
            ("W, V", "integrals of x dA/r and y dA/r", "m^2"),
            ("F", "clamp force", "N"),
            ("r_e", "effective radius: arm of the friction force", "m"),
            ("r_F", "distance of the force center from the axis", "m"),
        ],
        valid: "simple polygon of 3 to 1000 points, axis outside; a run-in pad on a flat, stiff backing",
        accuracy: "exact for the assumed pressure; a curved side is as good as its points",
        source: "p r = const: Orthwein, Clutches and Brakes, 2nd ed., ch. 1 (seen); integrals by the divergence theorem, derived and checked by quadrature",
        provenance: Memory,
        worked: "(70,-35) (118,-45) (131,4) (115,41) (92,28) (68,36) mm: r_e 97.465631 mm",
    }
    OUTLINE_UNIFORM_PRESSURE {
        id: "pad.outline.uniform_pressure",
        name: "Polygon pad, uniform pressure",
        equation: "p = p_max;  J = sum d/6 (s_2 r_2 - s_1 r_1 + d^2 L);  A = sum d (s_2 - s_1)/2;  L = 2 artanh((s_2 - s_1)/(r_1 + r_2));  F = p_max A;  r_e = J/A;  r_F = distance of the centroid",
        symbols: [
            ("p", "pressure", "Pa"),
            ("p_max", "peak pressure, everywhere", "Pa"),
            ("d", "distance of a side's line from the axis along the outward normal", "m"),
            ("s_1, s_2", "ends of a side along its tangent, counterclockwise", "m"),
            ("r_1, r_2", "ends of a side from the axis", "m"),
            ("A", "area", "m^2"),
            ("J", "integral of r dA", "m^3"),
            ("F", "clamp force", "N"),
            ("r_e", "effective radius: arm of the friction force", "m"),
            ("r_F", "distance of the force center from the axis", "m"),
        ],
        valid: "simple polygon of 3 to 1000 points, axis outside; a new pad on a flat, stiff backing",
        accuracy: "exact for the assumed pressure; a curved side is as good as its points",
        source: "integrals of constant pressure by the divergence theorem, derived and checked by quadrature",
        provenance: Memory,
        worked: "(70,-35) (118,-45) (131,4) (115,41) (92,28) (68,36) mm: r_e 100.171908 mm",
    }
}

impl Pad {
    /// A simple polygon of 3 to 1000 `points` (m), either winding, the disc axis outside at the origin.
    ///
    /// See [`OUTLINE_UNIFORM_WEAR`] and [`OUTLINE_UNIFORM_PRESSURE`].
    ///
    /// # Errors
    /// At `points` or the point concerned: wrong count, a point out of range or repeated, no area, sides
    /// that cross or touch, the axis inside or on a side; integrals that overflow or vanish.
    pub fn outline(points: &[[f64; 2]]) -> Result<Self, Faults> {
        check(points)?;
        let mut points = points.to_vec();
        if doubled_area(&points) < 0.0 {
            points.reverse();
        }
        let sides: Vec<_> = edges(&points).iter().map(Side::new).collect();
        let extent = extent(&points, &sides);
        let integrals = integrals(&points, &sides, &extent);
        let mut faults = Faults::new();
        let pad = Self::checked(PadKind::Outline, integrals, &extent);
        faults.part("points", pad).ok_or(faults)
    }
}

/// A side of a counterclockwise polygon, as seen from the axis; lengths in m.
struct Side {
    /// Outward unit normal.
    normal: Point,
    /// Unit tangent.
    tangent: Point,
    /// d: signed distance of the side's line from the axis.
    distance: f64,
    /// s₁, s₂: where the side starts and ends along its tangent.
    along: [f64; 2],
    /// r₁, r₂: how far its ends are from the axis.
    radii: [f64; 2],
    /// Angle under which the axis sees the side, rad; positive counterclockwise.
    angle: f64,
}

impl Side {
    fn new(edge: &Edge) -> Self {
        let way = minus(edge.end, edge.start);
        let [x, y] = way.map(|component| component / norm(way));
        Self {
            normal: [y, -x],
            tangent: [x, y],
            distance: cross(edge.start, [x, y]),
            along: [dot(edge.start, [x, y]), dot(edge.end, [x, y])],
            radii: [norm(edge.start), norm(edge.end)],
            angle: libm::atan2(cross(edge.start, edge.end), dot(edge.start, edge.end)),
        }
    }

    fn length(&self) -> f64 {
        let [start, end] = self.along;
        end - start
    }

    /// Λ = ∫ds/r along the side. Equal to asinh(s₂/|d|) - asinh(s₁/|d|), but without its cancellation
    /// on short sides and without dividing by d; 0 where d is 0 and the term has no weight.
    fn lambda(&self) -> f64 {
        let [start, end] = self.radii;
        if self.distance == 0.0 { 0.0 } else { 2.0 * libm::atanh(self.length() / (start + end)) }
    }

    /// Distance of the axis from the nearest point of the side.
    fn nearest(&self) -> f64 {
        let [start, end] = self.along;
        let [start_radius, end_radius] = self.radii;
        if start < 0.0 && end > 0.0 { self.distance.abs() } else { start_radius.min(end_radius) }
    }

    /// This side's part of A, I, J, W and V.
    fn contribution(&self) -> [f64; 5] {
        let ([s1, s2], [r1, r2]) = (self.along, self.radii);
        let ([nx, ny], [tx, ty]) = (self.normal, self.tangent);
        let (d, lambda) = (self.distance, self.lambda());
        let radius_change = self.length() * (s1 + s2) / (r1 + r2);
        [
            d * self.length() / 2.0,
            d * lambda,
            d / 6.0 * (s2 * r2 - s1 * r1 + d * d * lambda),
            d / 2.0 * (d * nx * lambda + tx * radius_change),
            d / 2.0 * (d * ny * lambda + ty * radius_change),
        ]
    }
}

fn extent(points: &[Point], sides: &[Side]) -> Extent {
    let (mut angle, mut lowest, mut highest) = (0.0_f64, 0.0_f64, 0.0_f64);
    for side in sides {
        angle += side.angle;
        lowest = lowest.min(angle);
        highest = highest.max(angle);
    }
    Extent {
        smallest_radius: sides.iter().map(Side::nearest).fold(f64::INFINITY, f64::min),
        largest_radius: points.iter().map(|point| norm(*point)).fold(0.0, f64::max),
        angular_width: (highest - lowest).min(TAU),
    }
}

/// Sums over the sides, held within the bounds that the outline's extent sets.
///
/// The sums lose digits where the pad is small against its distance from the axis. Area and centroid are
/// therefore taken from a point of the outline, and the others bounded: the nearer the bounds, the
/// smaller the error that is left. On pads of usual proportions the bounds never act.
fn integrals(points: &[Point], sides: &[Side], extent: &Extent) -> PadIntegrals {
    let [_, per_radius, moment, x_per_radius, y_per_radius] =
        sides.iter().map(Side::contribution).fold([0.0; 5], plus);
    let area = doubled_area(points) / 2.0;
    let [x_moment, y_moment] = first_moments(points, area);
    let (near, far) = (extent.smallest_radius, extent.largest_radius);
    let per_radius = within(per_radius, area / far, area / near);
    let [low_x, high_x] = bounds(points.iter().map(|[x, _]| *x));
    let [low_y, high_y] = bounds(points.iter().map(|[_, y]| *y));
    PadIntegrals {
        area: Area::from_si(area),
        area_per_radius: Length::from_si(per_radius),
        radius_moment: Volume::from_si(within(moment, area * near, area * far)),
        x_moment: Volume::from_si(x_moment),
        y_moment: Volume::from_si(y_moment),
        x_per_radius: Area::from_si(within(x_per_radius, low_x * per_radius, high_x * per_radius)),
        y_per_radius: Area::from_si(within(y_per_radius, low_y * per_radius, high_y * per_radius)),
    }
}

/// Twice the area, m², positive counterclockwise, measured from the first point.
fn doubled_area(points: &[Point]) -> f64 {
    let from_first = from_first(points);
    edges(&from_first).iter().map(|edge| cross(edge.start, edge.end)).sum()
}

/// ∫x dA and ∫y dA, m³, by way of the centroid seen from the first point.
fn first_moments(points: &[Point], area: f64) -> Point {
    let from_first = from_first(points);
    let [x, y] = edges(&from_first)
        .iter()
        .map(|edge| {
            let weight = cross(edge.start, edge.end) / 6.0;
            plus(edge.start, edge.end).map(|sum| sum * weight)
        })
        .fold([0.0; 2], plus);
    let [first_x, first_y] = points.first().copied().unwrap_or_default();
    [first_x * area + x, first_y * area + y]
}

fn from_first(points: &[Point]) -> Vec<Point> {
    let first = points.first().copied().unwrap_or_default();
    points.iter().map(|point| minus(*point, first)).collect()
}

/// `value` held in a closed range; what is not finite stays, to be refused.
fn within(value: f64, low: f64, high: f64) -> f64 {
    if value.is_finite() { value.max(low).min(high) } else { value }
}

fn bounds(values: impl Iterator<Item = f64>) -> [f64; 2] {
    values.fold([f64::INFINITY, f64::NEG_INFINITY], |[low, high], value| {
        [low.min(value), high.max(value)]
    })
}

fn plus<const N: usize>(mut first: [f64; N], second: [f64; N]) -> [f64; N] {
    for (sum, part) in first.iter_mut().zip(second) {
        *sum += part;
    }
    first
}

fn dot([ax, ay]: Point, [bx, by]: Point) -> f64 {
    ax * bx + ay * by
}

fn cross([ax, ay]: Point, [bx, by]: Point) -> f64 {
    ax * by - ay * bx
}

fn norm([x, y]: Point) -> f64 {
    libm::hypot(x, y)
}
