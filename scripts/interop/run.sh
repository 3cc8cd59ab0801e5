#!/usr/bin/env bash
# Reads what the product writes with the readers that people use, and runs an event set under Slurm. usage: run.sh OUT, the folder that the demo filled.
set -euo pipefail
out=${1:-out}
here=$(dirname "$0")
root=$(cd "$here/../.." && pwd)
python=/usr/bin/python3
folders=$(find "$out" -name peak.nc -printf '%h\n' | sort)

$python "$here/check_rasters.py" $folders
bash "$here/check_vectors.sh" $folders
$python "$here/check_polygons.py" $(find "$out" -name '*.geojson')

work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
node "$here/isotach_samples.js" "$work/samples"
$python "$here/check_polygons.py" "$work/samples"
node "$root/dist/cli/main.js" swath "$root/fixtures/steady-curve.csv" --bounds=-72,14.5,-60,30.5 --cell 0.1 \
  --set vortex.profile=holland-1980 --set vortex.maximum=cyclostrophic --set path.interpolation=linear \
  --set surface.motion=vector --set surface.motion_fraction=0.6 --set surface.motion_rotation_deg=0 \
  --set surface.motion_weight=relative --set surface.maximum=added --set vortex.radius_km=500 \
  --formats cog --out "$work/opinion" --quiet >/dev/null
$python "$here/second_opinion.py" "$root/fixtures/steady-curve.csv" "$work/opinion/peak.tif"
node "$root/scripts/make-events.js" --events 60 --years 1200 >"$work/set.csv"
node "$root/dist/cli/main.js" events run "$work/set.csv" --out "$work/run" --bounds=-90,5,-30,45 --cell 0.5 --quiet >/dev/null
$python "$here/check_return_periods.py" "$work/run"
bash "$here/check_slurm.sh"
echo "interoperability checks passed"
