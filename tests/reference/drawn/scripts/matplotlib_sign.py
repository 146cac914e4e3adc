"""A cup with steam and a sun of markers, as the SVG backend of matplotlib 3.11.2 writes it.

Writes matplotlib.svg and prints the length of each kind of line in units of the file (pt), worked
out from the data: straight lines between the points as they were handed over, arcs by radius.
"""
import math
import matplotlib
matplotlib.use("svg")
matplotlib.rcParams.update({"path.simplify": False, "svg.hashsalt": "sign", "svg.fonttype": "path"})
import matplotlib.pyplot as plt
import numpy as np
from matplotlib import patches
from matplotlib.path import Path

figure = plt.figure(figsize=(5, 4))
axes = figure.add_axes([0, 0, 1, 1])
axes.set_xlim(0, 500)
axes.set_ylim(0, 400)
axes.axis("off")
pt = 5 * 72 / 500  # pt to a unit of the data

# Cup: one path of lines and cubics, closed.
cup = Path([(120, 200), (380, 200), (380, 90), (320, 40), (250, 40), (180, 40), (120, 90), (120, 200)],
           [1, 2, 4, 4, 4, 4, 4, 4])
axes.add_patch(patches.PathPatch(cup, fill=False, ec="#1060ff", lw=4))
# Handle: an arc of an ellipse.
axes.add_patch(patches.Arc((380, 140), 90, 80, theta1=-90, theta2=90, ec="#1060ff", lw=4))
# Steam: two sampled waves.
y = np.linspace(220, 330, 56)
for x in (200, 300):
    axes.plot(x + 15 * np.sin(y / 12), y, color="#ff8000", lw=3)
# Sun: rays as markers used again and again, and a ring.
turn = np.arange(12) * math.pi / 6
axes.plot(60 + 40 * np.cos(turn), 330 + 40 * np.sin(turn), "o", mfc="none", mec="red", ms=8, ls="none")
axes.add_patch(patches.Circle((60, 330), 25, fill=False, ec="red"))
axes.plot([20, 480], [20, 20], "k--", lw=2)
axes.text(330, 350, "TEA", color="green", size=30)
figure.savefig("matplotlib.svg", metadata={"Date": None})

def steps(x, y):
    return float(np.hypot(np.diff(x), np.diff(y)).sum())

def cubic(p):
    t, w = np.polynomial.legendre.leggauss(64)
    t = (t + 1) / 2
    p = np.array(p, float)
    d = 3 * ((1 - t)**2 * (p[1] - p[0])[:, None] + 2 * t * (1 - t) * (p[2] - p[1])[:, None] + t**2 * (p[3] - p[2])[:, None])
    return float((np.hypot(*d) * w).sum() / 2)

from mpmath import mp, mpf, quad, sin, cos, sqrt, pi
handle = float(quad(lambda t: sqrt((45 * sin(t))**2 + (40 * cos(t))**2), [-pi / 2, 0, pi / 2]))
cup_length = 260 + cubic([(380, 200), (380, 90), (320, 40), (250, 40)]) + cubic([(250, 40), (180, 40), (120, 90), (120, 200)])
print("#1060ff", (cup_length + handle) * pt)
print("#ff8000", 2 * steps(15 * np.sin(y / 12), y) * pt)
print("#ff0000", 12 * math.pi * 8 + math.pi * 50 * pt)
print("#000000", 460 * pt)
