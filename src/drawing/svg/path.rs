//! Path data and lists of points.

use super::geometry::Pen;
use kurbo::{Point, Vec2};
use svgtypes::{Error, NumberListParser, PathParser, PathSegment as S};

/// Draws path data; where they cannot be read, why, as the rest of a sentence.
pub(super) fn path(data: &str) -> Result<Pen, String> {
    let mut pen = Pen::default();
    // The point behind the last one that a smooth curve mirrors, by the kind of the last curve.
    let (mut cubic, mut quad) = (None, None);
    for segment in PathParser::from(data) {
        let segment = segment.map_err(|error| unreadable("path data", data, &error))?;
        let at = pen.at();
        let to = |abs: bool, x: f64, y: f64| {
            if abs {
                Point::new(x, y)
            } else {
                at + Vec2::new(x, y)
            }
        };
        let (last_cubic, last_quad) = (cubic.take(), quad.take());
        let mirrored = |last: Option<Point>| last.map_or(at, |last| at + (at - last));
        match segment {
            S::MoveTo { abs, x, y } => pen.move_to(to(abs, x, y)),
            S::LineTo { abs, x, y } => pen.line_to(to(abs, x, y)),
            S::HorizontalLineTo { abs, x } => pen.line_to(Point::new(to(abs, x, 0.0).x, at.y)),
            S::VerticalLineTo { abs, y } => pen.line_to(Point::new(at.x, to(abs, 0.0, y).y)),
            S::CurveTo {
                abs,
                x1,
                y1,
                x2,
                y2,
                x,
                y,
            } => {
                let second = to(abs, x2, y2);
                pen.cubic_to(to(abs, x1, y1), second, to(abs, x, y));
                cubic = Some(second);
            }
            S::SmoothCurveTo { abs, x2, y2, x, y } => {
                let second = to(abs, x2, y2);
                pen.cubic_to(mirrored(last_cubic), second, to(abs, x, y));
                cubic = Some(second);
            }
            S::Quadratic { abs, x1, y1, x, y } => {
                let by = to(abs, x1, y1);
                pen.quad_to(by, to(abs, x, y));
                quad = Some(by);
            }
            S::SmoothQuadratic { abs, x, y } => {
                let by = mirrored(last_quad);
                pen.quad_to(by, to(abs, x, y));
                quad = Some(by);
            }
            S::EllipticalArc {
                abs,
                rx,
                ry,
                x_axis_rotation,
                large_arc,
                sweep,
                x,
                y,
            } => pen.arc_to(
                Vec2::new(rx, ry),
                x_axis_rotation.to_radians(),
                large_arc,
                sweep,
                to(abs, x, y),
            ),
            S::ClosePath { .. } => pen.close(),
        }
        if pen.is_full() {
            break;
        }
    }
    Ok(pen)
}

/// Draws the points of a polyline, closed for a polygon.
pub(super) fn points(list: &str, closed: bool) -> Result<Pen, String> {
    let mut pen = Pen::default();
    let mut numbers = NumberListParser::from(list.trim());
    let mut first = true;
    while let Some(x) = numbers.next() {
        // A number without its fellow makes no point.
        let y = numbers.next().unwrap_or(Err(Error::UnexpectedEndOfStream));
        let to = x.and_then(|x| Ok(Point::new(x, y?)));
        let to = to.map_err(|error| unreadable("points", list, &error))?;
        if first {
            pen.move_to(to);
        } else {
            pen.line_to(to);
        }
        if pen.is_full() {
            break;
        }
        first = false;
    }
    if closed && !first {
        pen.close();
    }
    Ok(pen)
}

/// Why a list of numbers cannot be read.
fn unreadable(what: &str, text: &str, error: &Error) -> String {
    match error {
        Error::UnexpectedData(at)
        | Error::InvalidChar(_, at)
        | Error::InvalidString(_, at)
        | Error::InvalidNumber(at)
            if *at <= text.chars().count() =>
        {
            format!("its {what} cannot be read at character {at}")
        }
        _ => format!("its {what} break off before their end"),
    }
}
