#!/usr/bin/env python3
"""What is written by hand with NumPy for the peak wind of a storm on a longitude-latitude grid: every cell near enough at
every step, in double precision. Holland 1980 with gradient balance, 0.9 to the surface, an inflow angle by pieces, a share
of the motion added with the wind relative to its maximum as weight. The peer of the benchmarks, in the same run.

usage: numpy_peer.py FIXES.csv WEST SOUTH CELL NX NY STEP_MIN [REPEATS]
Prints one JSON line: CPU seconds of each repeat and the peak. Debian package: python3-numpy.
"""
import csv
import datetime
import json
import sys
import time

import numpy as np

KM_PER_DEGREE = 111.195
ROTATION = 7.292115e-5
REACH_KM = 500.0


def fixes(path):
    with open(path, encoding="utf-8") as file:
        rows = list(csv.DictReader(file))
    instant = lambda text: datetime.datetime.fromisoformat(text.replace("Z", "+00:00")).timestamp()
    names = ("lon_deg", "lat_deg", "vmax_mps", "rmax_km", "holland_b")
    return np.array([instant(row["time"]) for row in rows]), {n: np.array([float(r[n]) for r in rows]) for n in names}


def moments(path, step_min):
    time_s, columns = fixes(path)
    at = np.arange(time_s[0], time_s[-1] + 1, 60.0 * step_min)
    leg = np.clip(np.searchsorted(time_s, at, side="right") - 1, 0, len(time_s) - 2)
    lat, lon = columns["lat_deg"], columns["lon_deg"]
    metres = 1000 * KM_PER_DEGREE / np.diff(time_s)
    east = np.diff(lon) * metres * np.cos(np.radians((lat[1:] + lat[:-1]) / 2))
    north = np.diff(lat) * metres
    values = [np.interp(at, time_s, column) for column in columns.values()]
    return zip(*values, east[leg], north[leg])


def swath(path, west, south, cell, nx, ny, step_min):
    lon = west + cell * (np.arange(nx) + 0.5)
    lat = south + cell * (np.arange(ny) + 0.5)
    peak = np.zeros((ny, nx))
    east_at_peak = np.zeros((ny, nx))
    north_at_peak = np.zeros((ny, nx))
    for clon, clat, vmax, rmax, b, u, v in moments(path, step_min):
        high = REACH_KM / KM_PER_DEGREE
        wide = high / np.cos(np.radians(min(abs(clat) + high, 89.0)))
        rows = slice(*np.searchsorted(lat, (clat - high, clat + high)))
        columns = slice(*np.searchsorted(lon, (clon - wide, clon + wide)))
        if rows.start == rows.stop or columns.start == columns.stop:
            continue
        y = lat[rows, None]
        dx = KM_PER_DEGREE * (lon[None, columns] - clon) * np.cos(np.radians((y + clat) / 2))
        dy = np.broadcast_to(KM_PER_DEGREE * (y - clat), dx.shape)
        r = np.maximum(np.hypot(dx, dy), 0.001)
        aloft = vmax / 0.9
        power = (rmax / r) ** b
        half = 500.0 * r * abs(2 * ROTATION * np.sin(np.radians(clat)))
        wind = np.sqrt(np.e * aloft**2 * power * np.exp(-power) + half**2) - half
        ratio = r / rmax
        angle = np.radians(np.where(ratio < 1, 10 * ratio, np.where(ratio < 1.2, 75 * ratio - 65, 25.0)))
        turn = 1.0 if clat >= 0 else -1.0
        ex, ey = dx / r, dy / r
        weight = 0.6 * wind / aloft
        eastward = 0.9 * wind * (-turn * ey * np.cos(angle) - ex * np.sin(angle)) + weight * u
        northward = 0.9 * wind * (turn * ex * np.cos(angle) - ey * np.sin(angle)) + weight * v
        speed = np.hypot(eastward, northward)
        higher = (speed > peak[rows, columns]) & (r <= REACH_KM)
        peak[rows, columns][higher] = speed[higher]
        east_at_peak[rows, columns][higher] = eastward[higher]
        north_at_peak[rows, columns][higher] = northward[higher]
    return peak, np.degrees(np.arctan2(-east_at_peak, -north_at_peak)) % 360


def main():
    path, west, south, cell, nx, ny, step = sys.argv[1:8]
    seconds = []
    for _ in range(int(sys.argv[8]) if len(sys.argv) > 8 else 1):
        start = time.process_time()
        peak, _direction = swath(path, float(west), float(south), float(cell), int(nx), int(ny), float(step))
        seconds.append(round(time.process_time() - start, 4))
    print(json.dumps({"cpu_s": seconds, "peak_mps": round(float(peak.max()), 3)}))


if __name__ == "__main__":
    main()
