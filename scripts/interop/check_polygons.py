#!/usr/bin/python3
"""Checks the polygons of GeoJSON files with shapely.

usage: check_polygons.py FILE_OR_FOLDER...    (folders are searched for *.geojson)

Every polygon and multipolygon must be valid and not empty, within +-180 and +-90 degrees, its shells anticlockwise and
its holes clockwise; isotachs at or above a level must lie inside those of the level below, bands must not overlap.
Needs Debian's python3-shapely. Exit code 1 when anything is wrong.
"""

import json
import pathlib
import sys

from shapely.geometry import LinearRing, shape
from shapely.validation import explain_validity


def geometries(document):
    """(name, properties, geometry) of everything in a GeoJSON document"""
    if document["type"] == "FeatureCollection":
        for i, feature in enumerate(document["features"]):
            if feature["geometry"]:
                yield f"feature {i}", feature.get("properties") or {}, feature["geometry"]
    elif document["type"] == "Feature":
        yield "feature", document.get("properties") or {}, document["geometry"]
    else:
        yield "geometry", {}, document


def faults(document):
    checked = 0
    levels = []
    found = []
    for name, properties, geometry in geometries(document):
        if geometry["type"] not in ("Polygon", "MultiPolygon"):
            continue
        checked += 1
        area = shape(geometry)
        if not area.is_valid:
            found.append(f"{name}: {explain_validity(area)}")
            continue
        if area.is_empty:
            found.append(f"{name}: empty")
            continue
        west, south, east, north = area.bounds
        if west < -180 or east > 180 or south < -90 or north > 90:
            found.append(f"{name}: bounds {area.bounds}")
        polygons = geometry["coordinates"] if geometry["type"] == "MultiPolygon" else [geometry["coordinates"]]
        if any(LinearRing(ring).is_ccw != (i == 0) for rings in polygons for i, ring in enumerate(rings)):
            found.append(f"{name}: wrong winding")
        if "threshold_mps" in properties:
            levels.append((properties["threshold_mps"], properties.get("upper_mps"), area))
    levels.sort(key=lambda level: level[0])
    bands = any(upper is not None for _, upper, _ in levels)
    for (low, _, outer), (high, _, inner) in zip(levels, levels[1:]):
        # rounding to six decimals on the common border of a grid: 1e-6 degrees along it
        tolerance = 3e-6 * (outer.length + inner.length)
        beyond = outer.intersection(inner).area if bands else inner.difference(outer).area
        if beyond > tolerance:
            found.append(f"{high} m/s {'overlaps' if bands else 'leaves'} {low} m/s by {beyond:.3g} square degrees")
    return checked, found


def main(paths):
    if not paths:
        print(__doc__, file=sys.stderr)
        return 2
    files = [file for path in map(pathlib.Path, paths) for file in (sorted(path.rglob("*.geojson")) if path.is_dir() else [path])]
    total = wrong = 0
    for file in files:
        checked, found = faults(json.loads(file.read_text()))
        total += checked
        wrong += len(found)
        for fault in found:
            print(f"WRONG {file}: {fault}")
    print(f"{'WRONG' if wrong else 'ok   '} {total} polygons and multipolygons of {len(files)} files, {wrong} faults")
    return 1 if wrong or total == 0 else 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
