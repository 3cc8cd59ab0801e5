#!/usr/bin/env python3
"""Compares return-periods.nc of a run of an event set with its return-wind.tif and return-gust.tif, by several readers.

usage: check_return_periods.py RUN
"""
import subprocess
import sys

import numpy as np
import xarray
from osgeo import gdal
from osgeo_utils.samples import validate_cloud_optimized_geotiff

gdal.UseExceptions()
failures = 0


def check(condition, what):
    global failures
    failures += 0 if condition else 1
    print(("ok    " if condition else "WRONG ") + what)


run = sys.argv[1]
path = f"{run}/return-periods.nc"
with xarray.open_dataset(path, decode_timedelta=False) as file:
    years = file["return_period"].values
    check(list(years) == [10, 25, 50, 100, 250, 500, 1000], f"xarray: return periods {years}")
    for quantity in ("wind", "gust"):
        tif = f"{run}/return-{quantity}.tif"
        warned, errors, _ = validate_cloud_optimized_geotiff.validate(tif, full_check=True)
        check(not errors and not warned, f"{tif} is a valid Cloud Optimized GeoTIFF {errors} {warned}")
        raster = gdal.Open(tif)
        bands = raster.ReadAsArray()
        check([raster.GetRasterBand(i + 1).GetDescription() for i in range(7)] == [f"{quantity}_{int(y)}y" for y in years], "names of the bands")
        check(bands.max() > 17 and (np.diff(bands, axis=0) >= 0).all(), f"{quantity} rises with the return period, up to {bands.max():.1f} m/s")
        check(np.array_equal(file[f"return_{quantity}"].values, bands), f"xarray: return_{quantity} is the raster")
        other = gdal.Open(f'NETCDF:"{path}":return_{quantity}')
        check(np.array_equal(other.ReadAsArray(), bands), f"GDAL: return_{quantity} is the raster")
        check(np.allclose(other.GetGeoTransform(), raster.GetGeoTransform(), rtol=0, atol=1e-9), "GDAL: it lies where the raster lies")
        number = subprocess.run(["cdo", "-s", "output", "-fldmax", f"-selname,return_{quantity}", path], capture_output=True, text=True)
        told = [float(word) for word in number.stdout.split()]
        check(len(told) == 7 and np.allclose(told, bands.max(axis=(1, 2)), rtol=1e-4), f"cdo: highest {quantity} of each period {told} {number.stderr.strip()}")
header = subprocess.run(["ncdump", "-h", path], capture_output=True, text=True)
check(header.returncode == 0 and "return_gust(return_period," in header.stdout, "ncdump reads it")
sys.exit(f"{failures} checks failed" if failures else 0)
