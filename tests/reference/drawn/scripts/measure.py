"""Lengths of the drawings in this folder, read by libraries that share no code with this program.

    python3 measure.py > drawn_lengths.csv

SVG is read by svgelements 1.9.6 (transforms, use, styles), DXF by ezdxf 1.4.5 (blocks, layers). Only
the geometry is taken from them. Lengths are worked out here: lines, circles and bulges in closed
form, ellipses and their arcs by mpmath 1.4.1, Bezier curves and splines by Gauss-Legendre quadrature
of 64 points on eighths of each curve or span. SVG in units of its viewBox, DXF in drawing units.
"""
import glob
import math
import sys
import ezdxf
import numpy as np
import svgelements as se
from ezdxf.entities import DXFGraphic
from mpmath import quad, sin, cos, sqrt

T, W = np.polynomial.legendre.leggauss(64)

def arc(u, v, start, by):
    """Length of u cos t + v sin t, an arc of an ellipse by two radii that need not be its axes."""
    uu, uv, vv = u[0]**2 + u[1]**2, u[0] * v[0] + u[1] * v[1], v[0]**2 + v[1]**2
    steps = [start + by * i / 8 for i in range(9)]
    return abs(float(quad(lambda t: sqrt(uu * sin(t)**2 - 2 * uv * sin(t) * cos(t) + vv * cos(t)**2), steps)))

def ellipse(a, b, start, by):
    return arc((a, 0), (0, b), start, by)

def bezier(points):
    p = np.array(points, float)
    d = len(p) - 1
    diff = d * np.diff(p, axis=0)
    total = 0.0
    for i in range(8):
        t = (T + 1) / 16 + i / 8
        v = sum(math.comb(d - 1, k) * ((1 - t)**(d - 1 - k) * t**k)[:, None] * diff[k] for k in range(d))
        total += float((np.hypot(v[:, 0], v[:, 1]) * W).sum()) / 16
    return total

def rows_svg(name):
    svg = se.SVG.parse(name, reify=False, ppi=96)
    per_unit = float(svg.width) / svg.viewbox.width if svg.viewbox is not None else 1.0
    for element in svg.elements():
        if not isinstance(element, se.Shape):
            continue
        values = element.values
        if values.get("display") == "none":
            continue
        line = element.stroke.value is not None and element.stroke.alpha > 0
        area = element.fill.value is not None and element.fill.alpha > 0
        if not (line or area):
            continue
        ink = element.stroke if line else element.fill
        # The library's own transforming of arcs is wrong where they are sheared: it is done here.
        path = se.Path(element)
        m = path.transform
        def to(p):
            return (m.a * p.x + m.c * p.y, m.b * p.x + m.d * p.y)
        path.transform = se.Matrix()
        for sub in path.as_subpaths():
            sub = se.Path(sub)
            length, closed = 0.0, False
            begin = None
            for s in sub:
                if isinstance(s, se.Move):
                    begin = s.end
                    continue
                if isinstance(s, (se.Line, se.Close)):
                    closed |= isinstance(s, se.Close)
                    if s.start is not None and s.end is not None:
                        length += math.dist(to(s.start), to(s.end))
                elif isinstance(s, se.QuadraticBezier):
                    length += bezier([to(s.start), to(s.control), to(s.end)])
                elif isinstance(s, se.CubicBezier):
                    length += bezier([to(s.start), to(s.control1), to(s.control2), to(s.end)])
                elif isinstance(s, se.Arc):
                    length += arc(to(s.prx - s.center), to(s.pry - s.center), s.get_start_t(), s.sweep)
                else:
                    sys.exit(f"{name}: {s!r}")
                end = s.end
            if length == 0:
                continue
            closed |= abs(complex(end) - complex(begin)) <= 1e-9 * length
            yield "", f"#{ink.red:02x}{ink.green:02x}{ink.blue:02x}", closed, length / per_unit

def line(points, closed):
    """Length of a polyline of points with bulges, and whether it ends where it begins."""
    total = 0.0
    ends = list(zip(points, points[1:])) + ([(points[-1], points[0])] if closed else [])
    for (x, y, b), (u, v, _) in ends:
        chord = math.hypot(u - x, v - y)
        total += chord * (1 + b * b) / (4 * b) * 4 * math.atan(b) if b else chord
    back = math.dist(points[0][:2], points[-1][:2]) <= 1e-9 * total
    return total, bool(closed or back)

def dxf_length(e):
    kind = e.dxftype()
    if kind == "LINE":
        return e.dxf.start.distance(e.dxf.end), False
    if kind == "CIRCLE":
        return 2 * math.pi * e.dxf.radius, True
    if kind == "ARC":
        return math.radians((e.dxf.end_angle - e.dxf.start_angle) % 360) * e.dxf.radius, False
    if kind == "ELLIPSE":
        a = e.dxf.major_axis.magnitude
        by = (e.dxf.end_param - e.dxf.start_param) % math.tau or math.tau
        return ellipse(a, a * e.dxf.ratio, e.dxf.start_param, by), abs(by - math.tau) < 1e-9
    if kind == "LWPOLYLINE":
        return line(list(e.get_points("xyb")), e.closed)
    if kind == "POLYLINE":
        points = [(v.dxf.location.x, v.dxf.location.y, v.dxf.get("bulge", 0)) for v in e.vertices]
        return line(points, e.is_closed)
    if kind == "SPLINE":
        tool = e.construction_tool()
        spans = sorted(set(tool.knots()))
        total = 0.0
        for a, b in zip(spans, spans[1:]):
            for i in range(8):
                low, high = a + (b - a) * i / 8, a + (b - a) * (i + 1) / 8
                at = (high - low) / 2 * T + (high + low) / 2
                speed = [d[1].magnitude for d in tool.derivatives(at, 1)]
                total += float((np.array(speed) * W).sum()) * (high - low) / 2
        ends = tool.control_points[0].distance(tool.control_points[-1])
        return total, ends <= 1e-9 * total
    return None

def rows_dxf(name):
    doc = ezdxf.readfile(name)
    def placed(entities, layer):
        for e in entities:
            if e.dxftype() == "INSERT":
                yield from placed(e.virtual_entities(), e.dxf.layer)
            elif isinstance(e, DXFGraphic):
                yield e, layer if e.dxf.layer == "0" and layer else e.dxf.layer
    for e, layer in placed(doc.modelspace(), None):
        on = doc.layers.get(layer) if layer in doc.layers else None
        if on is not None and (on.is_off() or on.is_frozen()):
            continue
        found = dxf_length(e)
        # What cannot be measured, and lines that begin and end at one point.
        if found is None or found[0] == 0:
            continue
        rgb = e.rgb
        if rgb is None:
            colour = e.dxf.color
            if colour in (0, 256) and on is not None:
                rgb = on.rgb
                colour = abs(on.color)
            if rgb is None:
                rgb = ezdxf.colors.aci2rgb(7 if colour in (0, 256) else colour)
        yield layer, "#%02x%02x%02x" % tuple(rgb), found[1], found[0]

print("file,layer,colour,lines,closed,length")
for name in sorted(glob.glob("*.svg") + glob.glob("*.dxf")):
    groups = {}
    for layer, colour, closed, length in (rows_svg if name.endswith("svg") else rows_dxf)(name):
        all = groups.setdefault((layer, colour), [0, 0, 0.0])
        all[0] += 1
        all[1] += closed
        all[2] += length
    for (layer, colour), (lines, closed, length) in groups.items():
        print(f"{name},{layer},{colour},{lines},{closed},{length:.12g}")
