"""An anchor with a rope, as ezdxf 1.4.5 writes it: ezdxf_2018.dxf (blocks, splines, true colours,
text, hatch) and ezdxf_r12.dxf (POLYLINE, mirrored INSERT, a layer that is off).

Prints for each layer as it stands in the drawing how many lines are placed and how long they are
together: arcs and lines in closed form, bulges by chord (1+b^2)/(4b)*4*atan b, splines by Gauss
quadrature of the spline's own derivatives, ellipses by mpmath.
"""
import math
import ezdxf
import numpy as np
from ezdxf import units
from mpmath import quad, sin, cos, sqrt, pi

def common(doc, r12):
    m = doc.modelspace()
    for name, colour in (("Shank", 5), ("Rope", 30), ("Frame", 3), ("Off", 1)):
        doc.layers.add(name, color=colour)
    # Anchor: shank, stock, a ring, two arms that meet at the crown.
    m.add_line((0, -120), (0, 100), dxfattribs={"layer": "Shank"})
    m.add_line((-45, 70), (45, 70), dxfattribs={"layer": "Shank"})
    m.add_circle((0, 118), 18, dxfattribs={"layer": "Shank"})
    m.add_arc((0, -20), 100, 200, 340, dxfattribs={"layer": "Shank"})
    # A fluke, placed twice, mirrored the second time.
    fluke = doc.blocks.new("FLUKE", base_point=(0, 0))
    if r12:
        fluke.add_polyline2d([(0, 0), (24, 10), (8, 34)], format="xy", close=True)
    else:
        fluke.add_lwpolyline([(0, 0, 0), (24, 10, 0.5), (8, 34, 0)], format="xyb", close=True)
    end = (100 * math.cos(math.radians(340)), -20 + 100 * math.sin(math.radians(340)))
    m.add_blockref("FLUKE", end, dxfattribs={"layer": "Shank"})
    m.add_blockref("FLUKE", (-end[0], end[1]), dxfattribs={"layer": "Shank", "xscale": -1})
    m.add_text("HARBOUR", height=20, dxfattribs={"layer": "Rope"}).set_placement((-60, -160))
    m.add_circle((0, 0), 500, dxfattribs={"layer": "Off"})
    return m

doc = ezdxf.new("R2018", units=units.MM)
m = common(doc, False)
doc.layers.get("Rope").rgb = (210, 140, 40)
rope = m.add_spline(dxfattribs={"layer": "Rope"})
rope.apply_construction_tool(ezdxf.math.BSpline(
    [(0, 118), (60, 140), (90, 60), (20, 30), (-40, 10), (-70, -40), (10, -60), (70, -90), (60, -150)], order=4))
m.add_ellipse((0, 0), major_axis=(190, 0), ratio=0.9, dxfattribs={"layer": "Frame"})
m.add_lwpolyline([(-200, -190, 0), (200, -190, 0.2), (200, 190, 0), (-200, 190, 0.2)], format="xyb", close=True,
                 dxfattribs={"layer": "Frame", "true_color": 0x00C0A0})
hatch = m.add_hatch(color=2, dxfattribs={"layer": "Frame"})
hatch.paths.add_polyline_path([(-10, -10), (10, -10), (0, 10)], is_closed=True)
doc.layers.get("Off").off()
doc.saveas("ezdxf_2018.dxf")

old = ezdxf.new("R12")
o = common(old, True)
wave = [(x, -175 + 8 * math.sin(x / 12)) for x in range(-180, 181, 6)]
o.add_polyline2d(wave, dxfattribs={"layer": "Rope"})
o.add_polyline2d([(-200, -190, 0, 0, 0), (200, -190, 0, 0, 0.2), (200, 190, 0, 0, 0), (-200, 190, 0, 0, 0.2)],
                 format="xyseb", close=True, dxfattribs={"layer": "Frame", "color": 4})
old.layers.get("Off").off()
old.saveas("ezdxf_r12.dxf")

d = math.dist
bulge = lambda chord, b: chord * (1 + b * b) / (4 * b) * 4 * math.atan(b)
anchor = 220 + 90 + 36 * math.pi + math.radians(140) * 100
fluke = d((0, 0), (24, 10)) + bulge(d((24, 10), (8, 34)), 0.5) + d((8, 34), (0, 0))
straight = d((0, 0), (24, 10)) + d((24, 10), (8, 34)) + d((8, 34), (0, 0))
tool = rope.construction_tool()
spans = sorted(set(tool.knots()))
t, w = np.polynomial.legendre.leggauss(64)
spline = sum((b - a) / 2 * sum(wi * tool.derivatives([(b - a) / 2 * ti + (a + b) / 2], 1).__next__()[1].magnitude
             for ti, wi in zip(t, w)) for a, b in zip(spans, spans[1:]))
ellipse = float(4 * quad(lambda t: sqrt((190 * sin(t))**2 + (171 * cos(t))**2), [0, pi / 2]))
frame = 800 + 2 * bulge(380, 0.2)
print("2018 Shank", anchor + 2 * fluke)
print("2018 Rope", spline)
print("2018 Frame", ellipse, "and", frame)
print("r12 Shank", anchor + 2 * straight)
print("r12 Rope", sum(d(a, b) for a, b in zip(wave, wave[1:])))
print("r12 Frame", frame)
