//! A row of a plain shape: its sizes read and checked, then one piece of glass.

use kurbo::{Affine, BezPath, Point, Shape as _};

use super::drawn::{Drawn, Made};
use super::finding;
use super::route::route;
use crate::drawing::shapes::{self, Arrow};
use crate::job::{Shape, ShapeRow};
use crate::measure::{self, LengthUnit, Limit};
use crate::rules::Finding;

/// The shape of a row.
pub(super) fn row(at: usize, row: &ShapeRow, findings: &mut Vec<Finding>) -> Made {
    let Some(path) = path(&row.shape, &mut Sizes { at, findings }) else {
        return Made::default();
    };
    let turned = if measure::ROTATION_DEGREES.holds(row.rotation_degrees) {
        row.rotation_degrees
    } else {
        findings.push(finding::not_laid_out(
            at,
            &measure::ROTATION_DEGREES,
            row.rotation_degrees,
            "drawn upright",
        ));
        0.0
    };
    let strokes = vec![if turned == 0.0 {
        path
    } else {
        Affine::rotate(-turned.to_radians()) * path
    }];
    let label = match row.label.trim() {
        "" => row.shape.kind(),
        label => label,
    };
    let bounds = strokes[0].bounding_box();
    let way = route(&strokes);
    let drawn = Drawn::new(label.to_owned(), strokes, &way);
    // Not -0 mm, which is the sum of nothing.
    let long = drawn.lit() + 0.0;
    if !measure::SHAPE_LENGTH_MM.holds(long) {
        let limit = &measure::SHAPE_LENGTH_MM;
        findings.push(finding::outside(at, None, limit, long));
        return Made::default();
    }
    Made {
        pieces: vec![drawn],
        bounds,
    }
}

/// The stroke of a shape; None, with findings, where its sizes give none.
fn path(shape: &Shape, sizes: &mut Sizes) -> Option<BezPath> {
    // All sizes of a shape are read before the first that is missing ends it, so that each that
    // cannot be read is told at once.
    match shape {
        Shape::Line { length } => Some(shapes::line(sizes.size("Length", length)?)),
        Shape::Polyline { points } => Some(shapes::polyline(&sizes.points(points)?)),
        Shape::Rectangle {
            width,
            height,
            corner,
        } => {
            let (width, height) = (sizes.size("Width", width), sizes.size("Height", height));
            let corner = sizes.corner(corner);
            let (width, height, corner) = (width?, height?, corner?);
            sizes.corner_fits(corner, width.min(height) / 2.0)?;
            Some(shapes::rectangle(width, height, corner))
        }
        Shape::Circle { diameter } => {
            let diameter = sizes.size("Diameter", diameter)?;
            Some(shapes::ellipse(diameter, diameter))
        }
        Shape::Ellipse { width, height } => {
            let (width, height) = (sizes.size("Width", width), sizes.size("Height", height));
            Some(shapes::ellipse(width?, height?))
        }
        Shape::Arc {
            radius,
            sweep_degrees,
        } => {
            let radius = sizes.read("Radius", radius);
            let radius = radius.and_then(|mm| sizes.holds(&measure::ARC_RADIUS_MM, mm));
            let sweep = sizes.holds(&measure::ARC_SWEEP_DEGREES, *sweep_degrees);
            Some(shapes::arc(radius?, sweep?))
        }
        Shape::Polygon {
            sides,
            across_corners,
        } => {
            let sides = sizes.count(&measure::POLYGON_SIDES, *sides);
            let across = sizes.size("Across the corners", across_corners);
            Some(shapes::polygon(sides?, across?))
        }
        Shape::Star {
            points,
            outer_diameter,
            inner_diameter,
        } => {
            let points = sizes.count(&measure::STAR_POINTS, *points);
            let outer = sizes.size("Outer diameter", outer_diameter);
            let inner = sizes.size("Inner diameter", inner_diameter);
            let (points, outer, inner) = (points?, outer?, inner?);
            // Where the notches lie on the straight lines from point to point.
            let straight = outer * (core::f64::consts::PI / f64::from(points)).cos();
            let why = "there the sides run straight from point to point";
            sizes.less(("Inner diameter", inner), straight, why)?;
            Some(shapes::star(points, outer, inner))
        }
        Shape::Arrow {
            length,
            head_length,
            head_width,
            shaft_width,
        } => {
            let length = sizes.size("Length", length);
            let head_length = sizes.size("Head length", head_length);
            let head_width = sizes.size("Head width", head_width);
            let shaft_width = sizes.size("Shaft width", shaft_width);
            let size = Arrow {
                length: length?,
                head_length: head_length?,
                head_width: head_width?,
                shaft_width: shaft_width?,
            };
            let of = ("Head length", size.head_length);
            let head = sizes.less(of, size.length, "the length of the whole arrow");
            let of = ("Shaft width", size.shaft_width);
            let shaft = sizes.less(of, size.head_width, "the width of the head");
            head.and(shaft)?;
            Some(shapes::arrow(size))
        }
    }
}

/// Reads the sizes of a row; what is not taken becomes a finding.
struct Sizes<'f> {
    at: usize,
    findings: &'f mut Vec<Finding>,
}

impl Sizes<'_> {
    fn size(&mut self, field: &'static str, typed: &str) -> Option<f64> {
        let mm = self.read(field, typed)?;
        let limit = Limit {
            name: field,
            ..measure::SHAPE_SIZE_MM
        };
        self.holds(&limit, mm)
    }

    /// A length in millimetres, whatever it is.
    fn read(&mut self, field: &str, typed: &str) -> Option<f64> {
        match measure::length(typed, LengthUnit::Millimetres) {
            Ok(length) => Some(length.length().mm()),
            Err(error) => {
                let finding = finding::unreadable(self.at, field, &error);
                self.findings.push(finding);
                None
            }
        }
    }

    fn holds(&mut self, limit: &Limit, value: f64) -> Option<f64> {
        self.holds_in(None, limit, value)
    }

    /// `field` names the place in the row where it has several of the kind.
    fn holds_in(&mut self, field: Option<&str>, limit: &Limit, value: f64) -> Option<f64> {
        if !limit.holds(value) {
            let finding = finding::outside(self.at, field, limit, value);
            self.findings.push(finding);
            return None;
        }
        Some(value)
    }

    fn count(&mut self, limit: &Limit, count: i64) -> Option<u32> {
        #[allow(
            clippy::cast_precision_loss,
            reason = "only compared with a small limit"
        )]
        self.holds(limit, count as f64)?;
        u32::try_from(count).ok()
    }

    /// The radius of corners; 0 where none is typed.
    fn corner(&mut self, typed: &str) -> Option<f64> {
        if typed.trim().is_empty() {
            return Some(0.0);
        }
        self.read("Corner radius", typed)
    }

    fn corner_fits(&mut self, corner: f64, most: f64) -> Option<()> {
        if corner > most {
            let finding = finding::corner(self.at, corner, most);
            self.findings.push(finding);
            return None;
        }
        Some(())
    }

    /// A size that must be less than another, `why` saying what that is.
    fn less(&mut self, (field, value): (&str, f64), than: f64, why: &str) -> Option<()> {
        if value < than {
            return Some(());
        }
        let finding = finding::not_less(self.at, (field, value), than, why);
        self.findings.push(finding);
        None
    }

    /// The points of a polyline.
    fn points(&mut self, typed: &str) -> Option<Vec<Point>> {
        let parts = || {
            let parts = typed.split(';').enumerate();
            parts.filter(|(_, part)| !part.trim().is_empty())
        };
        #[allow(
            clippy::cast_precision_loss,
            reason = "only compared with a small limit"
        )]
        self.holds(&measure::POLYLINE_POINTS, parts().count() as f64)?;
        let mut points = Vec::new();
        let mut whole = true;
        for (number, part) in parts() {
            let field = format!("Point {}", number + 1);
            let point = match measure::point(part.trim(), LengthUnit::Millimetres) {
                Ok(lengths) => {
                    let [across, up] =
                        [("across", lengths[0]), ("up", lengths[1])].map(|(name, length)| {
                            let limit = Limit {
                                name,
                                ..measure::POINT_MM
                            };
                            self.holds_in(Some(&field), &limit, length.length().mm())
                        });
                    across.zip(up)
                }
                Err(error) => {
                    let finding = finding::unreadable(self.at, &field, &error);
                    self.findings.push(finding);
                    None
                }
            };
            whole &= point.is_some();
            points.push(Point::from(point.unwrap_or_default()));
        }
        whole.then_some(points)
    }
}
