#!/usr/bin/env python3
"""A second opinion on the arithmetic of the main job, in NumPy and without a line of the product.

The same choices in both: Holland 1980 from the file's maximum wind, radius and B (cyclostrophic maximum), 0.9 to the
surface, Sobey's inflow, 0.6 of the translation added in proportion to the vortex wind, nothing subtracted, straight
lines between fixes, one-minute steps. Here distances are those of a local plane, as an analyst would write them.

usage: second_opinion.py FIXES.csv PEAK.tif
PEAK.tif comes from
  galewake swath FIXES.csv --bounds=... --cell 0.1 --set vortex.profile=holland-1980 --set vortex.maximum=cyclostrophic
    --set path.interpolation=linear --set surface.motion=vector --set surface.motion_fraction=0.6
    --set surface.motion_rotation_deg=0 --set surface.motion_weight=relative --set surface.maximum=added
    --set vortex.radius_km=500
Fails where the peak is 8 m/s or more, outside the taper, and the two differ by more than 0.1 m/s.
"""
import csv
import datetime as dt
import sys

import numpy as np
from osgeo import gdal

gdal.UseExceptions()
DEGREE_KM = 6371.0088 * np.pi / 180
TAPER_KM = 450.0


def main():
    fixes, raster = sys.argv[1:3]
    rows = list(csv.DictReader(open(fixes)))
    seconds = np.array([dt.datetime.fromisoformat(r["time"].replace("Z", "+00:00")).timestamp() for r in rows])
    lon, lat, vmax, rmax, b = (
        np.array([float(r[name]) for r in rows]) for name in ("lon_deg", "lat_deg", "vmax_mps", "rmax_km", "holland_b")
    )
    data = gdal.Open(raster)
    west, cell, _, north, _, _ = data.GetGeoTransform()
    ours = data.GetRasterBand(1).ReadAsArray().astype(float)
    ny, nx = ours.shape
    x = west + (np.arange(nx) + 0.5) * cell
    y = (north - (np.arange(ny) + 0.5) * cell)[:, None]
    legs = np.diff(seconds)
    middle = np.radians(0.5 * (lat[1:] + lat[:-1]))
    east_mps = np.diff(lon) * DEGREE_KM * 1000 * np.cos(middle) / legs
    north_mps = np.diff(lat) * DEGREE_KM * 1000 / legs
    peak = np.zeros((ny, nx))
    nearest = np.full((ny, nx), np.inf)
    for t in np.arange(seconds[0], seconds[-1] + 1, 60.0):
        leg = min(np.searchsorted(seconds, t, side="right") - 1, len(legs) - 1)
        at = [np.interp(t, seconds, values) for values in (lon, lat, vmax, rmax, b)]
        dy = (y - at[1]) * DEGREE_KM
        dx = (x - at[0]) * DEGREE_KM * np.cos(np.radians(0.5 * (y + at[1])))
        r = np.maximum(np.hypot(dx, dy), 1e-3)
        nearest = np.minimum(nearest, r)
        gradient_max = at[2] / 0.9
        s = (at[3] / r) ** at[4]
        half_coriolis = 7.292115e-5 * abs(np.sin(np.radians(at[1]))) * r * 1000
        v = np.sqrt(np.e * gradient_max**2 * s * np.exp(-s) + half_coriolis**2) - half_coriolis
        ratio = r / at[3]
        angle = np.radians(np.where(ratio < 1, 10 * ratio, np.where(ratio < 1.2, 10 + 75 * (ratio - 1), 25)))
        share = 0.6 * v / gradient_max
        side = 1 if at[1] >= 0 else -1
        u = 0.9 * v * (-side * dy / r * np.cos(angle) - dx / r * np.sin(angle)) + share * east_mps[leg]
        w = 0.9 * v * (side * dx / r * np.cos(angle) - dy / r * np.sin(angle)) + share * north_mps[leg]
        inside = r < TAPER_KM
        peak = np.where(inside, np.maximum(peak, np.hypot(u, w)), peak)
    compared = (peak >= 8) & (nearest < TAPER_KM - 20)
    off = np.abs(peak - ours)[compared]
    print(f"second opinion: {compared.sum()} cells, largest difference {off.max():.3f} m/s, mean {off.mean():.4f} m/s")
    if not (compared.sum() > 1000 and off.max() <= 0.1):
        sys.exit("second opinion: the two differ by more than 0.1 m/s")


if __name__ == "__main__":
    main()
