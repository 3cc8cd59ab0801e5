#!/usr/bin/env python3
"""Reads peak.tif, peak.csv and peak.nc of a folder with GDAL, netCDF4, xarray, cdo and ncdump, and compares them cell by cell.

usage: check_rasters.py FOLDER...
Needs Debian's python3-gdal, python3-netcdf4, python3-xarray, netcdf-bin and cdo. Exit code 1 when anything is wrong.
"""
import csv
import os
import subprocess
import sys
import warnings

import netCDF4
import numpy as np
import xarray
from osgeo import gdal, osr
from osgeo_utils.samples import validate_cloud_optimized_geotiff

gdal.UseExceptions()
osr.UseExceptions()
warnings.filterwarnings("ignore", category=RuntimeWarning, module="xarray")

NAMES = ["peak_wind", "peak_gust", "wind_from_direction", "peak_time"]
UNITS = ["m/s", "m/s", "degree", "s"]
# the bands of a surface, by option, stand in the raster alone: name, unit, least and most
SURFACE = [("land_fraction", "1", 0, 1), ("exposure_class", "1", 0, 3), ("roughness_length", "m", 1e-6, 9)]
# heading in the table and its number of decimals
HEADINGS = [("peak_wind_mps", 3), ("peak_gust_mps", 3), ("wind_from_deg", 2), ("peak_time_s", 1)]
failures = 0


def check(condition, what):
    global failures
    failures += 0 if condition else 1
    print(("ok    " if condition else "WRONG ") + what)


def same(a, b):
    return a.shape == b.shape and np.array_equal(a, b, equal_nan=True)


def read_tif(path):
    warned, errors, _ = validate_cloud_optimized_geotiff.validate(path, full_check=True)
    check(not errors and not warned, f"valid Cloud Optimized GeoTIFF {errors} {warned}")
    data = gdal.Open(path)
    count = data.RasterCount
    bands = [data.GetRasterBand(i + 1) for i in range(count)]
    names = [band.GetDescription() for band in bands]
    surface = SURFACE if SURFACE[0][0] in names else []
    hours = names[4 : count - len(surface)]
    check(names == NAMES + hours + [name for name, *_ in surface] and all(name.startswith("hours_") for name in hours), f"bands {names}")
    check([band.GetUnitType() for band in bands] == UNITS + ["h"] * len(hours) + [unit for _, unit, *_ in surface], "units of the bands")
    check(all(band.DataType == gdal.GDT_Float32 and np.isnan(band.GetNoDataValue()) for band in bands), "32-bit floats, NaN as no data")
    check(data.GetMetadataItem("AREA_OR_POINT") == "Area", "cells are areas")
    for item in ("recipe", "software", "input_sha256", "caution", "time_origin"):
        check(bool(data.GetMetadataItem(item)), f"metadata {item}")
    values = [band.ReadAsArray() for band in bands]
    wind = bands[0]
    for level in range(wind.GetOverviewCount()):
        coarse = [band.GetOverview(level).ReadAsArray() for band in bands]
        check(coarse[0].max() == values[0].max() and coarse[1].max() == values[1].max(), f"overview {level} keeps the maxima")
        check(np.array_equal(np.isnan(coarse[3]), coarse[0] == 0), f"overview {level}: a time where there is a wind")
        here = np.unravel_index(np.argmax(coarse[0]), coarse[0].shape)
        there = np.unravel_index(np.argmax(values[0]), values[0].shape)
        check(coarse[2][here] == values[2][there] and coarse[3][here] == values[3][there], f"overview {level}: direction and time of the peak")
    check(np.isfinite(values[0]).all() and (values[0] >= 0).all(), "winds are finite and not negative")
    check(np.array_equal(np.isnan(values[2]), values[0] == 0), "a direction where there is a wind, and nowhere else")
    return data, names, values


def compare_csv(path, data, names, values):
    origin_x, cell, _, origin_y, _, _ = data.GetGeoTransform()
    with open(path, newline="", encoding="utf-8") as file:
        reader = csv.reader(file)
        heading = next(reader)
        table = np.array([[float(cell or "nan") for cell in row] for row in reader]).reshape(-1, len(heading))
    column = {name: i for i, name in enumerate(heading)}
    projected = "x_m" in column
    if projected:
        x, y = table[:, column["x_m"]], table[:, column["y_m"]]
    else:
        width = cell * data.RasterXSize
        # longitudes of the table lie within ±180, those of the raster may run past it
        x = origin_x + np.mod(table[:, column["lon_deg"]] - origin_x, 360)
        x = np.where(x - origin_x > width, x - 360, x)
        y = table[:, column["lat_deg"]]
    places_x, places_y = (x - origin_x) / cell - 0.5, (origin_y - y) / cell - 0.5
    i, j = np.rint(places_x).astype(int), np.rint(places_y).astype(int)
    off = max(np.abs(places_x - i).max(initial=0), np.abs(places_y - j).max(initial=0))
    check(off < 0.01, f"places of the table are centres of cells (off by {off:.1e} of a cell)")
    inside = (i >= 0) & (i < data.RasterXSize) & (j >= 0) & (j < data.RasterYSize)
    check(inside.all(), "places of the table lie in the raster")
    table, i, j = table[inside], i[inside], j[inside]
    mask = np.zeros(values[0].shape, bool)
    mask[j, i] = True
    check(len(table) == mask.sum() and np.array_equal(mask, values[0] > 0), f"one row for each of {len(table)} cells with wind")
    expected = HEADINGS + [(name, 3) for name in names[4:]]
    check(heading[-len(expected):] == [name for name, _ in expected], f"headings {heading}")
    for band, (name, decimals) in enumerate(expected):
        worst = np.abs(table[:, column[name]] - values[band][j, i].astype(float)).max(initial=0)
        check(worst <= 0.5000001 * 10.0**-decimals, f"{name}: table and raster agree (worst {worst:.1e}, rounded to {decimals} decimals)")


def compare_netcdf(path, data, names, values):
    origin_x, cell, _, origin_y, _, _ = data.GetGeoTransform()
    x = origin_x + (np.arange(data.RasterXSize) + 0.5) * cell
    y = origin_y - (np.arange(data.RasterYSize) + 0.5) * cell
    with netCDF4.Dataset(path) as file:
        check(file.Conventions == "CF-1.11", "CF-1.11")
        columns, rows = ("lon", "lat") if "lon" in file.dimensions else ("x", "y")
        check(np.allclose(file[columns][:], x, rtol=0, atol=1e-6 * cell) and np.allclose(file[rows][:], y, rtol=0, atol=1e-6 * cell), "netCDF4: coordinates are centres of the raster's cells")
        for name, raster in zip(names, values):
            variable = file[name]
            variable.set_auto_mask(False)
            check(same(variable[0], raster), f"netCDF4: {name} is the raster's band")
            check(variable.filters()["zlib"] or raster.size <= 4096, f"netCDF4: {name} is compressed")
        origin = np.datetime64(netCDF4.num2date(0, file["peak_time"].units, file["peak_time"].calendar).isoformat())
    with xarray.open_dataset(path) as file:
        check(same(file["peak_wind"].values[0], values[0]), "xarray: peak_wind is the raster's band")
        times = file["peak_time"].values[0]
        blowing = values[0] > 0
        seconds = (times[blowing] - origin) / np.timedelta64(1, "ns") / 1e9
        check(np.issubdtype(times.dtype, np.datetime64) and np.allclose(seconds, values[3][blowing], rtol=0, atol=1e-3), "xarray: peak_time is a time")
        check(np.isnat(times[~blowing]).all(), "xarray: no time where there is no wind")
        check("height" in file["peak_wind"].coords and float(file["height"]) == 10, "xarray: at 10 m")
    for name, raster in zip(names, values):
        other = gdal.Open(f'NETCDF:"{path}":{name}')
        check(same(other.ReadAsArray(), raster), f"GDAL: {name} is the raster's band")
        check(np.allclose(other.GetGeoTransform(), data.GetGeoTransform(), rtol=0, atol=1e-6 * cell), f"GDAL: {name} lies where the raster lies")
    compare_systems(other.GetSpatialRef(), data)

    header = subprocess.run(["ncdump", "-h", path], capture_output=True, text=True)
    check(header.returncode == 0 and "peak_gust(time," in header.stdout, "ncdump reads it")
    told = subprocess.run(["cdo", "-s", "sinfon", path], capture_output=True, text=True)
    check(told.returncode == 0 and told.stderr.strip() == "", f"cdo reads it without a warning {told.stderr.strip()}")
    number = subprocess.run(["cdo", "-s", "output", "-fldmax", "-selname,peak_gust", path], capture_output=True, text=True)
    peak = float(number.stdout or "nan")
    check(abs(peak - values[1].max()) <= 1e-4 * max(1.0, values[1].max()), f"cdo: highest gust {peak}")


def compare_systems(other, data):
    """Both files put the corners at the same longitude and latitude."""
    def corners(system):
        system = system.Clone()
        system.SetAxisMappingStrategy(osr.OAMS_TRADITIONAL_GIS_ORDER)
        geographic = system.CloneGeogCS()
        geographic.SetAxisMappingStrategy(osr.OAMS_TRADITIONAL_GIS_ORDER)
        turn = osr.CoordinateTransformation(system, geographic)
        left, cell, _, top, _, _ = data.GetGeoTransform()
        places = [(left + 0.5 * cell, top - 0.5 * cell), (left + (data.RasterXSize - 0.5) * cell, top - (data.RasterYSize - 0.5) * cell)]
        return np.array([turn.TransformPoint(*place)[:2] for place in places])

    apart = np.abs(corners(other) - corners(data.GetSpatialRef())).max()
    check(apart < 1e-9, f"raster and netCDF name the same reference system (corners apart by {apart:.1e} degrees)")


def main(folders):
    if not folders:
        sys.exit(__doc__)
    for folder in folders:
        print(f"{folder}:")
        tif = os.path.join(folder, "peak.tif")
        check(os.path.exists(tif), "there is a peak.tif")
        if not os.path.exists(tif):
            continue
        data, names, values = read_tif(tif)
        own = names.index(SURFACE[0][0]) if SURFACE[0][0] in names else len(names)
        for (name, _, least, most), band in zip(SURFACE, values[own:]):
            check(np.nanmin(band) >= least and np.nanmax(band) <= most, f"{name} lies within {least} and {most}")
        for name, compare in (("peak.csv", compare_csv), ("peak.nc", compare_netcdf)):
            path = os.path.join(folder, name)
            if os.path.exists(path):
                compare(path, data, names[:own], values[:own])
            else:
                print(f"      no {name} here")
    if failures:
        sys.exit(f"{failures} checks failed")
    print("rasters agree")


main(sys.argv[1:])
