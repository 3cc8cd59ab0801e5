"""Filled contours of one field by contourpy, timed on request.

usage: contour_peer.py FIELD NX NY LEVEL...
FIELD holds NX*NY little-endian floats. For every line on standard input ("above" or "bands") the field is contoured
once and a line "SECONDS VERTICES" is printed. Reading and conversion of the field are not timed.
"""

import sys
import time

import contourpy
import numpy as np

path, nx, ny = sys.argv[1], int(sys.argv[2]), int(sys.argv[3])
levels = [float(level) for level in sys.argv[4:]]
field = np.fromfile(path, dtype="<f4").reshape(ny, nx).astype(float)
# cells without data are left out by both
if np.isnan(field).any():
    field = np.ma.masked_invalid(field)

for line in sys.stdin:
    if line.strip() == "bands":
        ranges = list(zip(levels, levels[1:] + [np.inf]))
    else:
        ranges = [(level, np.inf) for level in levels]
    began = time.perf_counter()
    generator = contourpy.contour_generator(z=field, name="serial", fill_type=contourpy.FillType.OuterOffset)
    vertices = 0
    for lower, upper in ranges:
        points, _ = generator.filled(lower, upper)
        vertices += sum(len(one) for one in points)
    print(time.perf_counter() - began, vertices, flush=True)
