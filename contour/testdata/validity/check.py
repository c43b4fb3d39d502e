"""Looks at the bands in the *.json beside it with a general-purpose geometry library, and writes verdicts.csv.

Run it after `go test -run TestValidityFixtures -update ./contour`. It is not needed by the tests: they compare bands with the
files, and the files with the hashes in verdicts.csv.
"""
import csv
import glob
import hashlib
import itertools
import json
import math
import os

import shapely
from shapely import geos
from shapely.geometry import Polygon
from shapely.validation import explain_validity

here = os.path.dirname(os.path.abspath(__file__))
library = f"shapely {shapely.__version__}, GEOS {geos.geos_version_string}"
rows = []
for path in sorted(glob.glob(os.path.join(here, "*.json"))):
    raw = open(path, "rb").read()
    data = json.loads(raw)
    x0, y0 = data["points"][0]  # areas are taken near the origin, where the library's sums lose no digits
    polygons, valid, area = [], 0, []
    for band in data["bands"]:
        p = Polygon(band["polygon"][0], band["polygon"][1:])
        polygons.append(p)
        if p.is_valid and p.exterior.is_ccw and not any(r.is_ccw for r in p.interiors):
            valid += 1
        else:
            print(path, explain_validity(p))
        near = [[(x - x0, y - y0) for x, y in ring] for ring in band["polygon"]]
        area.append(Polygon(near[0], near[1:]).area)
    overlap = 0.0
    for p, q in itertools.combinations(polygons, 2):
        if p.is_valid and q.is_valid and p.intersects(q):
            overlap += p.intersection(q).area
    rows.append([
        os.path.basename(path)[:-5], hashlib.sha256(raw).hexdigest(), len(polygons), valid,
        repr(math.fsum(area) - data["area"]), repr(overlap), library,
    ])
with open(os.path.join(here, "verdicts.csv"), "w", newline="") as f:
    out = csv.writer(f, lineterminator="\n")
    out.writerow(["fixture", "sha256", "polygons", "valid", "area_off", "overlap", "library"])
    out.writerows(rows)
