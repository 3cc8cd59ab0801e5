#!/usr/bin/env bash
# Reads the vector files of folders with ogrinfo and GDAL's Python: layers, attributes, styles, valid polygons, and that
# GeoJSON, KML and FlatGeobuf hold the same isotachs.
# usage: check_vectors.sh FOLDER...    needs Debian's gdal-bin and python3-gdal; exit code 1 when anything is wrong
set -euo pipefail
[ $# -gt 0 ] || { sed -n '2,4p' "$0"; exit 2; }

for folder in "$@"; do
  echo "$folder:"
  for name in isotachs.geojson track.geojson swath.kml isotachs.fgb; do
    [ -e "$folder/$name" ] || { echo "      no $name here"; continue; }
    if said=$(ogrinfo -ro -al -so "$folder/$name" 2>&1) && ! grep -qE '^(ERROR|Warning)' <<<"$said"; then
      echo "ok    ogrinfo reads $name: $(grep -cE '^Layer name:' <<<"$said") layer(s), $(grep -E '^Feature Count:' <<<"$said" | cut -d' ' -f3 | paste -sd+) features"
    else
      echo "WRONG ogrinfo on $name: $said"
      exit 1
    fi
  done
done

/usr/bin/python3 - "$@" <<'PYTHON'
import os
import sys
from osgeo import gdal, ogr

gdal.UseExceptions()
failures = 0
NUMBERS = ["threshold_mps", "threshold_kt", "averaging_s", "area_km2"]


def check(condition, what):
    global failures
    failures += 0 if condition else 1
    print(("ok    " if condition else "WRONG ") + what)


def isotachs(path, layer_name=None):
    """threshold in m/s → attributes and geometry"""
    data = gdal.OpenEx(path, gdal.OF_VECTOR)
    layer = data.GetLayerByName(layer_name) if layer_name else data.GetLayer(0)
    found = {}
    for feature in layer:
        geometry = feature.GetGeometryRef()
        if geometry is None or geometry.IsEmpty():
            continue
        definition = layer.GetLayerDefn()
        names = [definition.GetFieldDefn(i).GetName() for i in range(definition.GetFieldCount())]
        values = {name: feature.GetField(name) for name in names if feature.IsFieldSetAndNotNull(name)}
        found[round(values["threshold_mps"], 4)] = (values, geometry.Clone(), feature.GetStyleString())
    return found


for folder in sys.argv[1:]:
    print(f"{folder}:")
    sources = {}
    for name, layer in (("isotachs.geojson", None), ("swath.kml", "Isotachs"), ("isotachs.fgb", "isotachs")):
        path = os.path.join(folder, name)
        if os.path.exists(path):
            sources[name] = isotachs(path, layer)
    for name, found in sources.items():
        check(all(all(isinstance(values.get(key), (int, float)) for key in NUMBERS) and values.get("quantity") in ("wind", "gust") for values, _, _ in found.values()), f"{name}: {len(found)} isotachs with typed attributes")
        check(all(geometry.IsValid() for _, geometry, _ in found.values()), f"{name}: every polygon is valid")
        west, east, south, north = 180.0, -180.0, 90.0, -90.0
        for _, geometry, _ in found.values():
            a, b, c, d = geometry.GetEnvelope()
            west, east, south, north = min(west, a), max(east, b), min(south, c), max(north, d)
        check(west >= -180 and east <= 180 and south >= -90 and north <= 90, f"{name}: within the bounds of longitude and latitude")
        if name == "swath.kml":
            check(all(style for _, _, style in found.values()), f"{name}: every isotach has a style")
    first, *others = sources.items()
    for name, found in others:
        check(found.keys() == first[1].keys(), f"{name} has the levels of {first[0]}")
        for level, (values, geometry, _) in found.items():
            reference, shape, _ = first[1].get(level, ({}, None, None))
            if shape is None:
                continue
            check(all(values[key] == reference[key] for key in [*NUMBERS, "quantity"]), f"{name}: attributes at {level} m/s")
            apart = geometry.SymDifference(shape).GetArea() if not geometry.Equals(shape) else 0.0
            check(apart < 1e-6, f"{name}: the polygons at {level} m/s")
    path = os.path.join(folder, "swath.kml")
    if os.path.exists(path):
        data = gdal.OpenEx(path, gdal.OF_VECTOR)
        stamped = [f.IsFieldSetAndNotNull("timestamp") for f in data.GetLayerByName("Track") if ogr.GT_Flatten(f.GetGeometryRef().GetGeometryType()) == ogr.wkbPoint]
        check(stamped and all(stamped), f"swath.kml: {len(stamped)} fixes with their times")
if failures:
    sys.exit(f"{failures} checks failed")
print("vectors agree")
PYTHON
