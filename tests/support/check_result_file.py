# Opens a result file with h5py, xarray and ncdump and holds it against the summary inside it. Usage: check FILE
# SPDX-License-Identifier: MIT
import json
import subprocess
import sys

import h5py
import numpy as np
import xarray

path = sys.argv[1]
with h5py.File(path) as f:
    summary = json.loads(f["summary"][()])
    points = summary["points"]
    assert f.attrs["format"].decode() == "bandwright-result 1"
    assert f.attrs["Conventions"].decode().startswith("CF-")
    assert f.attrs["points_done"] == len(points) == len(f["bias"])
    for name in ("title", "bandwright_version", "created", "command_line", "status"):
        assert f.attrs[name].decode() != "", name
    assert f["structure_file"][()].decode() == open(sys.argv[2]).read()
    json.loads(f["structure"][()])
    assert len(json.loads(f["ledger"][()])) > 10
    depth = f["depth"][()]
    assert np.all(np.diff(depth) > 0)
    over_bias_and_depth = 0
    for name, data in f.items():
        if data.shape == ():
            continue
        assert data.attrs["long_name"].decode() != "", name
        units = data.attrs["units"].decode()
        subprocess.run(["udunits2", "-H", units, "-W", units], check=True, stdout=subprocess.DEVNULL)
        values = data[()]
        assert not np.any(np.isinf(values)), name
        for axis, scale in enumerate(data.dims):
            if name not in ("depth", "bias", "measured_0_depth"):
                assert len(scale) == 1, name
        if data.shape == (len(points), len(depth)):
            over_bias_and_depth += 1
            assert np.all(np.isfinite(values)), name
        elif data.shape == (len(points),) and name != "bias":
            # A value that the summary gives as null is the fill value; no other is.
            expected = np.array([p[name] if p[name] is not None else np.nan for p in points])
            assert np.array_equal(values, expected, equal_nan=True), name
            assert np.isnan(data.attrs["_FillValue"][0])
    assert over_bias_and_depth == 13, over_bias_and_depth
    # Abrupt steps: the boundary, and the next smaller double before it.
    layer = f["layer"][()]
    for k in np.nonzero(np.diff(layer))[0]:
        assert depth[k] == np.nextafter(depth[k + 1], 0), "boundary"
    assert list(f["net_doping"].dims[0].keys()) == ["depth"]
    reference_field = f["electric_field"][()]

with xarray.open_dataset(path, engine="h5netcdf") as data:
    assert set(data["electric_field"].dims) == {"bias", "depth"}
    assert data["electric_field"].attrs["units"] == "V cm-1"
    assert np.array_equal(data["electric_field"].values, reference_field)
    assert np.array_equal(data["current_density"].values, [p["current_density"] for p in points])

header = subprocess.run(["ncdump", "-h", path], check=True, capture_output=True, text=True).stdout
assert "phony_dim" not in header
assert "double electric_field(bias, depth)" in header, header
print("checked", len(points), "points,", len(depth), "depths")
