# Reads a FITS file by astropy and healpy and prints what it holds as JSON: the outside authority of regionFiles.test.ts.
import json
import sys

import numpy as np
from astropy.io import fits

SR_DEG2 = (180 / np.pi) ** 2

with fits.open(sys.argv[1]) as hdus:
    hdus.verify("exception")
    table = hdus[1]
    header = table.header
    out = {
        "ordering": header["ORDERING"],
        "coordsys": header["COORDSYS"],
        "object": header["OBJECT"],
        "rows": len(table.data),
    }
    if header["ORDERING"] == "NUNIQ":
        uniq = table.data["UNIQ"].astype(np.int64)
        density = table.data["PROBDENSITY"]
        order = (np.log2(uniq / 4) / 2).astype(int)
        area = 4 * np.pi / (12 * 4.0**order)
        held = density * area
        by_density = np.argsort(-density, kind="stable")
        cumulated = np.cumsum(held[by_density])
        areas = np.cumsum(area[by_density]) * SR_DEG2
        start = (uniq - 4 * 4**order) * 4 ** (29 - order)
        end = start + 4 ** (29 - order)
        by_place = np.argsort(start)
        out |= {
            "sum": float(held.sum()),
            "area90Deg2": float(np.interp(0.9, cumulated, areas)),
            "area50Deg2": float(np.interp(0.5, cumulated, areas)),
            # Every place of the sky in one cell.
            "tiled": bool(
                start[by_place][0] == 0
                and end[by_place][-1] == 12 * 4**29
                and (start[by_place][1:] == end[by_place][:-1]).all()
            ),
            "ascending": bool((np.diff(uniq) > 0).all()),
        }
    else:
        bounds = table.data["RANGE"].astype(object)
        cells = sum(int(end) - int(start) for start, end in zip(bounds[::2], bounds[1::2]))
        out |= {"areaDeg2": cells / (12 * 4**29) * 4 * np.pi * SR_DEG2}
    try:
        import healpy

        if header["ORDERING"] == "NUNIQ":
            peak = int(np.argmax(density))
            lon, lat = healpy.pix2ang(
                2 ** int(order[peak]), int(uniq[peak] - 4 * 4 ** order[peak]), nest=True, lonlat=True
            )
            out |= {"peakRaDeg": float(lon), "peakDecDeg": float(lat)}
    except ImportError:
        pass
    print(json.dumps(out))
