//! Whether points make a pad: a simple polygon that stays clear of the axis.
//!
//! Every decision rests on the sign of exact orientation predicates, so that rounding never lets a
//! touching outline through.

use std::cmp::Ordering;

use robust::{Coord, orient2d};

use crate::calc::fault::{FaultCode, Faults};

/// A point in the plane of the disc, m.
pub(super) type Point = [f64; 2];

/// Fewest and most points of an outline. The contract sets them.
const COUNT: std::ops::RangeInclusive<usize> = 3..=1000;

/// Beyond this, in m, cubes of lengths and the exact predicates overflow.
const LARGEST_COORDINATE: f64 = 1e75;

/// A side of the polygon, from one point to the next.
#[derive(Debug, Clone, Copy)]
pub(super) struct Edge {
    pub(super) start: Point,
    pub(super) end: Point,
}

/// The sides in order, each with the point it starts from; the last one closes the outline.
pub(super) fn edges(points: &[Point]) -> Vec<Edge> {
    let ends = points.iter().cycle().skip(1);
    points.iter().zip(ends).map(|(start, end)| Edge { start: *start, end: *end }).collect()
}

/// Demands a simple polygon without the axis, which is the origin.
pub(super) fn check(points: &[Point]) -> Result<(), Faults> {
    let mut faults = Faults::new();
    let holds = COUNT.contains(&points.len());
    faults.require(holds, "points", FaultCode::WrongCount, "must be 3 to 1000 points");
    if !faults.is_empty() {
        return Err(faults);
    }
    for (index, point) in points.iter().enumerate() {
        let holds = point.iter().all(|coordinate| coordinate.abs() <= LARGEST_COORDINATE);
        let detail = "must lie within what can be computed";
        faults.require(holds, &format!("points/{index}"), FaultCode::OutOfRange, detail);
    }
    find_repeated(&mut faults, points);
    if !faults.is_empty() {
        return Err(faults);
    }
    if on_one_line(points) {
        faults.add("points", FaultCode::OutlineWithoutArea, "must not lie on one line");
        return Err(faults);
    }
    let edges = edges(points);
    find_crossing(&mut faults, &edges);
    let detail = "must not hold the disc axis inside or on an edge";
    let holds = !axis_within(&edges);
    faults.require(holds, "points", FaultCode::OutlineContainsAxis, detail);
    faults.into_result(())
}

/// Adds a fault for each point that lies on an earlier one.
fn find_repeated(faults: &mut Faults, points: &[Point]) {
    let mut sorted: Vec<_> = points.iter().enumerate().collect();
    sorted.sort_by(|(_, first), (_, second)| by_coordinates(first, second));
    let mut repeated: Vec<_> = sorted
        .iter()
        .zip(sorted.iter().skip(1))
        .filter(|((_, first), (_, second))| by_coordinates(first, second).is_eq())
        .map(|((_, _), (index, _))| *index)
        .collect();
    repeated.sort_unstable();
    for index in repeated {
        let detail = "lies on an earlier point; the last side closes by itself";
        faults.add(format!("points/{index}"), FaultCode::OutlineSelfIntersects, detail);
    }
}

/// Orders by x, then y. Adding zero makes -0 and 0 the same.
fn by_coordinates([first_x, first_y]: &Point, [second_x, second_y]: &Point) -> Ordering {
    let by_x = (first_x + 0.0).total_cmp(&(second_x + 0.0));
    by_x.then((first_y + 0.0).total_cmp(&(second_y + 0.0)))
}

fn on_one_line(points: &[Point]) -> bool {
    match points {
        [first, second, rest @ ..] => rest.iter().all(|point| turn(*first, *second, *point) == 0.0),
        _ => true,
    }
}

/// Adds a fault for the first side that crosses or touches a later one, which also bounds the work.
fn find_crossing(faults: &mut Faults, edges: &[Edge]) {
    for (index, edge) in edges.iter().enumerate() {
        for (other_index, other) in edges.iter().enumerate().skip(index + 1) {
            let meet = if other_index == index + 1 {
                folds_back(edge, other)
            } else if index == 0 && other_index + 1 == edges.len() {
                folds_back(other, edge)
            } else {
                meets(edge, other)
            };
            if meet {
                let detail =
                    format!("the side from here crosses or touches that from point {other_index}");
                let member = format!("points/{index}");
                return faults.add(member, FaultCode::OutlineSelfIntersects, detail);
            }
        }
    }
}

/// Whether the next side runs back over this one.
fn folds_back(edge: &Edge, next: &Edge) -> bool {
    let [back_x, back_y] = minus(edge.start, edge.end);
    let [on_x, on_y] = minus(next.end, next.start);
    back_x * on_x + back_y * on_y > 0.0 && turn(edge.start, edge.end, next.end) == 0.0
}

/// Whether two sides have a point in common: their boxes overlap, and each has the other's ends not on one side.
fn meets(first: &Edge, second: &Edge) -> bool {
    boxes_overlap(first, second) && straddles(first, second) && straddles(second, first)
}

fn boxes_overlap(first: &Edge, second: &Edge) -> bool {
    let ([ax, ay], [bx, by]) = (first.start, first.end);
    let ([cx, cy], [dx, dy]) = (second.start, second.end);
    overlap(ax, bx, cx, dx) && overlap(ay, by, cy, dy)
}

fn overlap(a: f64, b: f64, c: f64, d: f64) -> bool {
    a.min(b) <= c.max(d) && c.min(d) <= a.max(b)
}

fn straddles(line: &Edge, other: &Edge) -> bool {
    let start = turn(line.start, line.end, other.start);
    let end = turn(line.start, line.end, other.end);
    !(start > 0.0 && end > 0.0 || start < 0.0 && end < 0.0)
}

/// Whether the axis lies inside or on a side: a ray along +x crosses the outline an odd number of times.
fn axis_within(edges: &[Edge]) -> bool {
    let axis = [0.0, 0.0];
    let here = Edge { start: axis, end: axis };
    let mut inside = false;
    for edge in edges {
        let side = turn(edge.start, edge.end, axis);
        if side == 0.0 && boxes_overlap(edge, &here) {
            return true;
        }
        let ([_, start], [_, end]) = (edge.start, edge.end);
        let crosses = (start > 0.0) != (end > 0.0);
        if crosses && (side > 0.0) == (end > start) {
            inside = !inside;
        }
    }
    inside
}

/// Above 0 if `third` lies left of the line from `first` to `second`, 0 if on it; the sign is exact.
fn turn(first: Point, second: Point, third: Point) -> f64 {
    orient2d(coordinates(first), coordinates(second), coordinates(third))
}

fn coordinates([x, y]: Point) -> Coord<f64> {
    Coord { x, y }
}

/// The way from `from` to `to`, m.
pub(super) fn minus([to_x, to_y]: Point, [from_x, from_y]: Point) -> Point {
    [to_x - from_x, to_y - from_y]
}
