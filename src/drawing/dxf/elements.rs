//! Elements of a DXF file as paths in their own coordinates, y upwards.

use kurbo::{Affine, BezPath, Point, Vec2};

use super::colours::Ink;
use super::curves::{self, Spline};
use super::groups::{Group, text};
use crate::measure::quoted;

/// What stands between a group 0 and the next.
pub(super) struct Record<'a> {
    pub(super) kind: &'a [u8],
    /// The line of its kind.
    pub(super) line: usize,
    pub(super) groups: Vec<Group<'a>>,
}

/// What an element gives.
pub(super) enum Shape {
    /// A path, and whether it is closed.
    Path(BezPath, bool),
    /// A block placed here.
    Insert(Insert),
    /// Why it gives nothing.
    Unread(String),
}

/// A block placed once or in rows and columns.
pub(super) struct Insert {
    /// Name of the block as the file has it.
    pub(super) block: String,
    /// From the coordinates of the block, counted from its base point, to those around the INSERT,
    /// for a column and a row.
    turn: Affine,
    place: Affine,
    step: Vec2,
    pub(super) columns: i64,
    pub(super) rows: i64,
}

impl Insert {
    /// From coordinates of the block to those around the INSERT.
    pub(super) fn cell(&self, column: i64, row: i64, base: Point) -> Affine {
        #[expect(
            clippy::cast_precision_loss,
            reason = "cells are counted, not measured"
        )]
        let along = Vec2::new(self.step.x * column as f64, self.step.y * row as f64);
        // The distances in a grid are turned with the block, but not scaled with it.
        self.place * Affine::translate(along) * self.turn * Affine::translate(-base.to_vec2())
    }
}

/// What all elements have.
pub(super) struct Common {
    pub(super) layer: String,
    pub(super) ink: Ink,
    /// Kind, handle and line, for sentences.
    pub(super) element: String,
    /// The line of its kind.
    pub(super) line: usize,
}

/// A vertex with the bulge of the line that begins there.
pub(super) type Vertex = (Point, f64);

/// A POLYLINE, whose vertices are elements of their own up to a SEQEND.
pub(super) struct Polyline {
    pub(super) common: Common,
    why_not: Option<String>,
    vertices: Vec<Vertex>,
    heights: Vec<f64>,
    flags: i64,
    mirror: Affine,
}

impl Record<'_> {
    pub(super) fn first(&self, code: i32) -> Option<&Group<'_>> {
        self.groups.iter().find(|group| group.code == code)
    }

    pub(super) fn number(&self, code: i32, absent: f64) -> Result<f64, String> {
        self.first(code).map_or(Ok(absent), Group::number)
    }

    pub(super) fn whole(&self, code: i32, absent: i64) -> Result<i64, String> {
        self.first(code).map_or(Ok(absent), Group::whole)
    }

    fn needed(&self, code: i32) -> Result<f64, String> {
        match self.first(code) {
            Some(group) => group.number(),
            None => Err(format!("group {code} is missing")),
        }
    }

    /// The point whose x has this code, and its z.
    pub(super) fn point(&self, code: i32) -> Result<(Point, f64), String> {
        let point = Point::new(self.needed(code)?, self.needed(code + 10)?);
        Ok((point, self.number(code + 20, 0.0)?))
    }

    /// All points whose x has this code, and their z; with what `more` of the groups up to the next
    /// one adds to each.
    fn points<T: Default>(
        &self,
        code: i32,
        more: impl Fn(&Group<'_>, &mut T) -> Result<(), String>,
    ) -> Result<Vec<(Point, f64, T)>, String> {
        let mut points: Vec<(Point, f64, T)> = Vec::new();
        for group in &self.groups {
            if group.code == code {
                // The y takes the place of what is no number; see below.
                let point = Point::new(group.number()?, f64::NAN);
                points.push((point, 0.0, T::default()));
            } else if let Some((point, z, rest)) = points.last_mut() {
                if group.code == code + 10 {
                    point.y = group.number()?;
                } else if group.code == code + 20 {
                    *z = group.number()?;
                } else {
                    more(group, rest)?;
                }
            }
        }
        if points.iter().any(|(point, ..)| point.y.is_nan()) {
            return Err(format!("group {} of a point is missing", code + 10));
        }
        Ok(points)
    }

    pub(super) fn common(&self) -> Common {
        let handle = self.first(5).map(|group| text(group.value));
        let handle = handle
            .filter(|handle| handle.len() <= 16 && handle.bytes().all(|b| b.is_ascii_hexdigit()));
        let handle = handle.map_or(String::new(), |handle| format!(" {handle}"));
        let plain = |byte: &u8| byte.is_ascii_alphanumeric() || *byte == b'_';
        let kind = text(self.kind);
        let kind = match self.kind.len() {
            1..=24 if self.kind.iter().all(plain) => kind,
            _ => quoted(&kind),
        };
        let figure = |code| self.first(code).and_then(|group| group.whole().ok());
        Common {
            layer: self
                .first(8)
                .map_or_else(|| "0".to_owned(), |group| text(group.value)),
            ink: Ink::new(figure(62), figure(420)),
            element: format!("{kind}{handle} at line {}", self.line),
            line: self.line,
        }
    }

    /// Why it is not drawn though it could be.
    fn hidden(&self) -> Option<String> {
        let set = |code| self.whole(code, 0).is_ok_and(|value| value == 1);
        if set(67) {
            Some("it stands on a layout of paper, not in the drawing".to_owned())
        } else if set(60) {
            Some("it is hidden".to_owned())
        } else {
            None
        }
    }

    /// The element as a path or a placed block, or why it is neither. Splines that are no Bézier
    /// curves take from `fits`.
    pub(super) fn shape(&self, fits: &mut usize) -> Shape {
        if let Some(why) = self.hidden() {
            return Shape::Unread(why);
        }
        let path = match self.kind {
            b"LINE" => self.line(),
            b"ARC" => self.arc(),
            b"CIRCLE" => self.circle(),
            b"ELLIPSE" => self.ellipse(),
            b"LWPOLYLINE" => self.lwpolyline(),
            b"SPLINE" => self.spline(fits),
            b"INSERT" => {
                return self.insert().map_or_else(Shape::Unread, Shape::Insert);
            }
            other => Err(why_not(other).to_owned()),
        };
        path.and_then(|(path, closed)| finished(path, closed))
            .unwrap_or_else(Shape::Unread)
    }

    /// From the element's own plane to that of the drawing. Elements drawn from below are mirrored.
    fn plane(&self) -> Result<Affine, String> {
        let x = self.number(210, 0.0)?;
        let y = self.number(220, 0.0)?;
        let z = self.number(230, 1.0)?;
        if z == 0.0 || x.hypot(y) > 1e-6 * z.abs() {
            return Err("it lies in a plane tilted out of the drawing".to_owned());
        }
        Ok(if z < 0.0 {
            Affine::FLIP_X
        } else {
            Affine::IDENTITY
        })
    }

    fn line(&self) -> Result<(BezPath, bool), String> {
        let ((begin, begin_z), (end, end_z)) = (self.point(10)?, self.point(11)?);
        flat([begin_z, end_z], begin.distance(end))?;
        let mut path = BezPath::new();
        path.move_to(begin);
        curves::edge(&mut path, begin, end, 0.0);
        Ok((path, false))
    }

    fn radius(&self) -> Result<f64, String> {
        let radius = self.needed(40)?;
        if radius < 0.0 {
            return Err("its radius is below 0".to_owned());
        }
        Ok(radius)
    }

    fn arc(&self) -> Result<(BezPath, bool), String> {
        let (centre, _) = self.point(10)?;
        let (radius, plane) = (self.radius()?, self.plane()?);
        let (from, to) = (self.needed(50)?.to_radians(), self.needed(51)?.to_radians());
        let axes = (Vec2::new(radius, 0.0), Vec2::new(0.0, radius));
        Ok(round(centre, axes, from, to, plane))
    }

    fn circle(&self) -> Result<(BezPath, bool), String> {
        let (centre, _) = self.point(10)?;
        let (radius, plane) = (self.radius()?, self.plane()?);
        let axes = (Vec2::new(radius, 0.0), Vec2::new(0.0, radius));
        Ok(round(centre, axes, 0.0, std::f64::consts::TAU, plane))
    }

    /// The centre and axis of an ellipse are given in the drawing, not in its own plane; seen from
    /// below it only turns the other way.
    fn ellipse(&self) -> Result<(BezPath, bool), String> {
        let (centre, _) = self.point(10)?;
        let (axis, axis_z) = self.point(11)?;
        let axis = axis.to_vec2();
        flat([0.0, axis_z], axis.hypot())?;
        let ratio = self.needed(40)?;
        if ratio <= 0.0 {
            return Err("its ratio of axes is not above 0".to_owned());
        }
        let turn = if self.plane()? == Affine::IDENTITY {
            ratio
        } else {
            -ratio
        };
        let other = Vec2::new(-axis.y, axis.x) * turn;
        let from = self.number(41, 0.0)?;
        let to = self.number(42, std::f64::consts::TAU)?;
        Ok(round(centre, (axis, other), from, to, Affine::IDENTITY))
    }

    fn lwpolyline(&self) -> Result<(BezPath, bool), String> {
        let vertices = self.points(10, |group, bulge: &mut f64| {
            if group.code == 42 {
                *bulge = group.number()?;
            }
            Ok(())
        })?;
        let vertices: Vec<Vertex> = vertices
            .into_iter()
            .map(|(point, _, bulge)| (point, bulge))
            .collect();
        let closed = self.whole(70, 0)? & 1 != 0;
        let path = polyline(&vertices, closed);
        Ok((self.plane()? * path, closed))
    }

    fn spline(&self, fits: &mut usize) -> Result<(BezPath, bool), String> {
        let all = |code: i32| -> Result<Vec<f64>, String> {
            let groups = self.groups.iter().filter(|group| group.code == code);
            groups.map(Group::number).collect()
        };
        let points = self.points(10, |_, (): &mut ()| Ok(()))?;
        if points.is_empty() && self.first(11).is_some() {
            return Err(
                "it has fit points only; save it with the control points of its curve".to_owned(),
            );
        }
        let degree = self.whole(71, 3)?;
        let flat_points: Vec<Point> = points.iter().map(|&(point, ..)| point).collect();
        let reach = flat_points.first().map_or(0.0, |&first| {
            flat_points
                .iter()
                .map(|at| at.distance(first))
                .fold(0.0, f64::max)
        });
        flat(points.iter().map(|&(_, z, ())| z), reach)?;
        let spline = Spline {
            degree: usize::try_from(degree).map_err(|_| "its degree is below 0".to_owned())?,
            knots: all(40)?,
            points: flat_points,
            weights: all(41)?,
        };
        let mut elements = spline.path(fits)?.into_elements();
        // Ends that differ by rounding only are meant to be the same.
        let begin = elements.first().and_then(kurbo::PathEl::end_point);
        if let (Some(begin), Some(last)) = (begin, elements.last_mut()) {
            let end = match last {
                kurbo::PathEl::LineTo(end)
                | kurbo::PathEl::QuadTo(_, end)
                | kurbo::PathEl::CurveTo(_, _, end) => Some(end),
                _ => None,
            };
            if let Some(end) = end.filter(|end| end.distance(begin) <= 1e-10 * reach) {
                *end = begin;
            }
        }
        Ok((BezPath::from_vec(elements), false))
    }

    fn insert(&self) -> Result<Insert, String> {
        let block = self.first(2).ok_or("it names no block")?;
        let (at, _) = self.point(10)?;
        let (x, y) = (self.number(41, 1.0)?, self.number(42, 1.0)?);
        if x == 0.0 || y == 0.0 {
            return Err("its scale is 0".to_owned());
        }
        let angle = self.number(50, 0.0)?.to_radians();
        let step = Vec2::new(self.number(44, 0.0)?, self.number(45, 0.0)?);
        Ok(Insert {
            block: text(block.value),
            place: self.plane()? * Affine::translate(at.to_vec2()) * Affine::rotate(angle),
            turn: Affine::scale_non_uniform(x, y),
            step,
            columns: self.whole(70, 1)?.max(1),
            rows: self.whole(71, 1)?.max(1),
        })
    }

    /// A POLYLINE without its vertices.
    pub(super) fn polyline(&self) -> Polyline {
        let read = || {
            let flags = self.whole(70, 0)?;
            if flags & (16 | 64) != 0 {
                return Err("meshes are no lines".to_owned());
            }
            // One in space is given in the drawing, not in its own plane.
            let mirror = if flags & 8 == 0 {
                self.plane()?
            } else {
                Affine::IDENTITY
            };
            Ok((flags, mirror))
        };
        let (flags, mirror, why_not) = match read() {
            Ok((flags, mirror)) => (flags, mirror, self.hidden()),
            Err(why) => (0, Affine::IDENTITY, Some(why)),
        };
        Polyline {
            common: self.common(),
            why_not,
            vertices: Vec::new(),
            heights: Vec::new(),
            flags,
            mirror,
        }
    }
}

impl Polyline {
    /// Takes a VERTEX.
    pub(super) fn push(&mut self, vertex: &Record<'_>) {
        if self.why_not.is_some() {
            return;
        }
        let read = || {
            // The frame of a spline that was drawn as a polyline is no part of it.
            if vertex.whole(70, 0)? & 16 != 0 {
                return Ok(None);
            }
            let (point, z) = vertex.point(10)?;
            Ok::<_, String>(Some((point, vertex.number(42, 0.0)?, z)))
        };
        match read() {
            Ok(Some((point, bulge, z))) => {
                self.vertices.push((point, bulge));
                self.heights.push(z);
            }
            Ok(None) => {}
            Err(why) => self.why_not = Some(why),
        }
    }

    /// What it came to, once its SEQEND is there.
    pub(super) fn finish(self) -> (Common, Shape) {
        let closed = self.flags & 1 != 0;
        let length: f64 = self
            .vertices
            .windows(2)
            .map(|two| two[0].0.distance(two[1].0))
            .sum();
        // Only one in space has a height at each vertex.
        let level = match (self.why_not, self.flags & 8) {
            (Some(why), _) => Err(why),
            (None, 0) => Ok(()),
            (None, _) => flat(self.heights, length),
        };
        let shape = level
            .and_then(|()| finished(self.mirror * polyline(&self.vertices, closed), closed))
            .unwrap_or_else(Shape::Unread);
        (self.common, shape)
    }
}

/// A part of a circle or an ellipse, counter-clockwise in its own plane.
fn round(
    centre: Point,
    (u, v): (Vec2, Vec2),
    from: f64,
    to: f64,
    plane: Affine,
) -> (BezPath, bool) {
    use std::f64::consts::TAU;
    let mut path = BezPath::new();
    let begin = centre + u * from.cos() + v * from.sin();
    if u.hypot() == 0.0 {
        return (path, false);
    }
    path.move_to(begin);
    // A whole turn that was rounded when it was written is a whole turn; and ends that are the same
    // are no arc of no length.
    let turn = to - from;
    let partly = turn.rem_euclid(TAU);
    let whole = (turn - TAU).abs() < 1e-6 || partly == 0.0;
    if whole {
        curves::arc(&mut path, centre, (u, v), from, TAU, begin);
    } else {
        let end = centre + u * to.cos() + v * to.sin();
        curves::arc(&mut path, centre, (u, v), from, partly, end);
    }
    (plane * path, whole)
}

fn polyline(vertices: &[Vertex], closed: bool) -> BezPath {
    let mut path = BezPath::new();
    let Some(&(begin, _)) = vertices.first() else {
        return path;
    };
    path.move_to(begin);
    for two in vertices.windows(2) {
        curves::edge(&mut path, two[0].0, two[1].0, two[0].1);
    }
    if let Some(&(end, bulge)) = vertices.last().filter(|(_, bulge)| closed && *bulge != 0.0) {
        curves::edge(&mut path, end, begin, bulge);
    }
    path
}

/// Refuses what rises out of the drawing: its length is not the one that is seen. A slope of 1e-5
/// changes a length by less than a part in 10¹⁰.
fn flat(heights: impl IntoIterator<Item = f64>, length: f64) -> Result<(), String> {
    let (mut low, mut high) = (f64::INFINITY, f64::NEG_INFINITY);
    for z in heights {
        (low, high) = (low.min(z), high.max(z));
    }
    if high - low > 1e-5 * length {
        return Err("it rises out of the plane of the drawing".to_owned());
    }
    Ok(())
}

fn finished(path: BezPath, closed: bool) -> Result<Shape, String> {
    if path.elements().len() < 2 {
        return Err("it has no length".to_owned());
    }
    let (path, closed) = curves::close(path, closed);
    Ok(Shape::Path(path, closed))
}

/// Why elements of a kind are not read, as the rest of a sentence.
fn why_not(kind: &[u8]) -> &'static str {
    match kind {
        b"TEXT" | b"MTEXT" | b"ATTRIB" | b"ATTDEF" | b"RTEXT" | b"ARCALIGNEDTEXT" => {
            "text must be turned into outlines"
        }
        b"HATCH" | b"MPOLYGON" | b"SOLID" | b"TRACE" => {
            "fillings are not read; draw the outline as a polyline"
        }
        b"DIMENSION"
        | b"ARC_DIMENSION"
        | b"LARGE_RADIAL_DIMENSION"
        | b"LEADER"
        | b"MULTILEADER"
        | b"MLEADER"
        | b"TOLERANCE" => "dimensions and notes are no artwork",
        b"POINT" => "a point has no length",
        b"RAY" | b"XLINE" => "a line without end has no length",
        b"MLINE" => "break it up into lines first",
        b"IMAGE" | b"OLEFRAME" | b"OLE2FRAME" | b"WIPEOUT" | b"PDFUNDERLAY" => {
            "pictures are not read"
        }
        b"3DFACE" | b"3DSOLID" | b"BODY" | b"REGION" | b"MESH" | b"SURFACE" => {
            "faces and solids are no lines"
        }
        b"VIEWPORT" => "a window on a layout of paper is no artwork",
        b"VERTEX" | b"SEQEND" => "it belongs to no POLYLINE",
        _ => "elements of this kind are not read",
    }
}
