"""A small SPK file, and states read from it by an independent reader.

Writes de405_1990.bsp, half a year of DE405 in NAIF's SPK format (type 2: Sun
and Earth-Moon barycentre about the barycentre, Earth about the latter), and
prints de405_1990_states.csv, read back by jplephem. Run with Debian's
python3-casacore, casacore-data-jpl-de405 and python3-jplephem.
"""
import struct

import numpy as np
from casacore.tables import table
from jplephem.spk import SPK

DE405 = table("/usr/share/casacore/data/ephemerides/DE405", ack=False)
MJD = DE405.getcol("MJD")
RECORDS = DE405.getcol("x")
EMRAT = DE405.getkeyword("EMRAT")
FIRST = int(np.searchsorted(MJD, 47892))  # 1990
COUNT = 6
START = (MJD[FIRST] + 2400000.5 - 2451545.0) * 86400
# target, centre, first coefficient, coefficients, pieces in 32 days, factor
SEGMENTS = [(3, 0, 228, 13, 2, 1.0), (10, 0, 750, 11, 2, 1.0), (399, 3, 438, 13, 8, -1 / (1 + EMRAT))]

words, summaries = [], []
address = 1 + 3 * 128  # file record, summaries, names
for target, centre, first, n, pieces, factor in SEGMENTS:
    step = 32.0 * 86400 / pieces
    data = []
    for r in range(COUNT):
        for p in range(pieces):
            data += [START + (r * pieces + p + 0.5) * step, step / 2]
            at = first + p * 3 * n
            data += [factor * c for c in RECORDS[FIRST + r][at : at + 3 * n]]
    data += [START, step, 2 + 3 * n, COUNT * pieces]
    summaries.append(struct.pack("<dd6i", START, START + COUNT * 32 * 86400, target, centre, 1, 2, address, address + len(data) - 1))
    words += data
    address += len(data)
head = struct.pack("<8sii60siii8s", b"DAF/SPK ", 2, 6, b"half a year of DE405".ljust(60), 2, 2, address, b"LTL-IEEE")
summary = struct.pack("<ddd", 0, 0, len(summaries)) + b"".join(summaries)
with open("de405_1990.bsp", "wb") as out:
    guard = b"FTPSTR:\r:\n:\r\n:\r\x00:\x81:\x10\xce:ENDFTP"  # DAF Required Reading: at byte 700
    out.write((head.ljust(699, b"\0") + guard).ljust(1024, b"\0") + summary.ljust(1024, b"\0") + b" " * 1024 + struct.pack(f"<{len(words)}d", *words))

kernel = SPK.open("de405_1990.bsp")
print("# Earth's centre and Sun about the barycentre; km and km/s; TDB Julian date")
print("# de405_1990.bsp read by jplephem; made by de405_spk.py")
print("jd,ex,ey,ez,evx,evy,evz,sx,sy,sz,svx,svy,svz")
for k in range(40):
    jd = 2451545.0 + START / 86400 + 0.3 + k * 4.77
    (e, ev), (m, mv), (s, sv) = (kernel[c, t].compute_and_differentiate(jd) for c, t in ((0, 3), (3, 399), (0, 10)))
    numbers = [*(e + m), *((ev + mv) / 86400), *s, *(sv / 86400)]
    print(f"{jd:.6f}," + ",".join(f"{x:.9f}" for x in numbers))
