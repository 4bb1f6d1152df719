"""Earth and Sun about the solar-system barycentre by JPL's DE405, 1960-2023.

Run with Debian's python3-casacore and casacore-data-jpl-de405, which holds
the Chebyshev coefficients of DE405 (Standish 1998, JPL IOM 312.F-98-048);
prints the table de405_earth_sun.csv.
"""
import numpy as np
from casacore.tables import table
from numpy.polynomial import chebyshev

DE405 = table("/usr/share/casacore/data/ephemerides/DE405", ack=False)
START = DE405.getcol("MJD") + 2400000.5  # of each record of 32 days
RECORDS = DE405.getcol("x")
EMRAT = DE405.getkeyword("EMRAT")
# first coefficient, coefficients per component, pieces per record (JPL's
# header; this copy leaves out the two dates that begin a record)
LAYOUT = {"emb": (228, 13, 2), "moon": (438, 13, 8), "sun": (750, 11, 2)}


def body(name, jd):
    first, count, pieces = LAYOUT[name]
    i = np.searchsorted(START, jd, side="right") - 1
    span = 32.0 / pieces
    piece = min(int((jd - START[i]) // span), pieces - 1)
    x = 2 * (jd - START[i] - piece * span) / span - 1
    place, velocity = [], []
    for axis in range(3):
        at = first + (piece * 3 + axis) * count
        c = RECORDS[i][at : at + count]
        place.append(chebyshev.chebval(x, c))
        velocity.append(chebyshev.chebval(x, chebyshev.chebder(c)) * 2 / span / 86400)
    return np.array(place), np.array(velocity)


print("# Earth's centre and Sun about the barycentre, DE405's axes (ICRF); km and km/s; TDB Julian date")
print("# DE405 from Debian's casacore-data-jpl-de405; made by de405_earth_sun.py")
print("jd,ex,ey,ez,evx,evy,evz,sx,sy,sz,svx,svy,svz")
for k in range(200):
    jd = 2437000.5 + k * 116.137  # 1960 to 2023
    (e, ev), (m, mv), (s, sv) = (body(n, jd) for n in ("emb", "moon", "sun"))
    e, ev = e - m / (1 + EMRAT), ev - mv / (1 + EMRAT)
    cells = [f"{jd:.3f}"]
    for place, velocity in ((e, ev), (s, sv)):
        cells += [f"{x:.5f}" for x in place] + [f"{v:.10f}" for v in velocity]
    print(",".join(cells))
