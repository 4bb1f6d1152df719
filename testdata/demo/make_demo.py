#!/usr/bin/python3
"""Makes the demo: tables of an invented star, and the truth about them.

Run in this folder:  /usr/bin/python3 make_demo.py
Needs python3-erfa, numpy and openpyxl. Writes the source tables, truth.json
and SHA256SUMS; the same bytes every time.

Every date and velocity is converted here with ERFA alone, from the digits
that were printed, so that the truth does not depend on the program under
test. The formulas:

  Before 1960, UT is UT1 and TT = UT + Delta T (the historical table of the
  U.S. Naval Observatory, half-yearly, linear between its points). From 1960
  on TT follows from UTC through ERFA's dat, and UT1 is taken equal to UTC.

  BJD_TDB = TDB + r.k/c - (r^2 - (r.k)^2)/(2 D c) + (2 G M / c^3) ln(1 - cos q)
    r  observer about the solar-system barycentre (epv00; pvtob on the WGS84
       ellipsoid, turned by era00 and the IAU 2006/2000A pole; no polar motion)
    k  direction of the star from the barycentre, moved by pmsafe to TDB
    D  distance of the star, q angle between the Sun and the star as seen by
       the observer (Eastman, Siverd and Gaudi 2010, PASP 122, 935)
  TDB - TT is dtdb at the site.

  HJD = date + h.k/c in the same scale, h the observer about the Sun's centre.

  Velocities are c z. With 1 + z for each:
    barycentric = heliocentric (1 + s.k/c), s the Sun's velocity about the
      barycentre;
    barycentric = observatory (1 + v.n/c) / (1 - v^2/(2 c^2) - U/c^2), v the
      observer's velocity about the barycentre, n the star's direction from
      the observer, U the potential of the Sun and the Earth (Lindegren and
      Dravins 2003, A&A 401, 1185).

The star's own velocity is a constant and an orbit; the perspective
acceleration of its straight motion, 0.09 m/s a year, is not planted.
"""
import gzip
import hashlib
import io
import json
import math
import os
import re
import sys
import warnings
import zipfile
from datetime import datetime, timedelta
from decimal import Decimal, ROUND_HALF_EVEN

import erfa
import numpy as np
import openpyxl

warnings.simplefilter("ignore", erfa.ErfaWarning)
HERE = os.path.dirname(os.path.abspath(__file__))
SEED = 19251960

AU_KM = 149597870.7
C_KMS = 299792.458
GM_SUN = 1.32712440041e11  # km^3/s^2, TDB-compatible (IAU 2009 constants)
GM_EARTH = 398600.4418  # km^3/s^2 (IERS Conventions 2010)
YEAR_1960 = 2436934.5
DEG = math.pi / 180
MAS = DEG / 3600e3

# ---------------------------------------------------------------- the star

STAR = dict(ra="14 22 31.80", dec="-12 04 55.1", pm_ra=-312.4, pm_dec=254.7, parallax=40.1, systemic=-17.0)
RA = (14 + 22 / 60 + 31.80 / 3600) * 15 * DEG
DEC = -(12 + 4 / 60 + 55.1 / 3600) * DEG
PM_RA = STAR["pm_ra"] * MAS / math.cos(DEC)
PM_DEC = STAR["pm_dec"] * MAS
SIGNAL = dict(systemic_kms=-17.062, period_days=5903.7, semi_amplitude_kms=1.104, eccentricity=0.02,
              omega_deg=131.0, periastron_bjd_tdb=2450217.4)


def signal(bjd):
    """Systemic velocity and orbit, km/s, at a BJD_TDB."""
    s = SIGNAL
    mean = 2 * math.pi * (bjd - s["periastron_bjd_tdb"]) / s["period_days"]
    e, ecc = s["eccentricity"], mean
    for _ in range(50):
        ecc = mean + e * math.sin(ecc)
    true = 2 * math.atan2(math.sqrt(1 + e) * math.sin(ecc / 2), math.sqrt(1 - e) * math.cos(ecc / 2))
    w = s["omega_deg"] * DEG
    return s["systemic_kms"] + s["semi_amplitude_kms"] * (math.cos(true + w) + e * math.cos(w))


# ------------------------------------------------------- sites, instruments

SITES = {  # longitude east, latitude (deg), height (m)
    "Hohenrauth": (11.3127, 51.6408, 322),
    "Cape Ollery": (26.4415, -33.1972, 1450),
    "Wirrabeen": (148.2203, -30.9116, 1012),
    "Kessend": (41.0388, 43.9251, 1905),
    "Thornback Ridge": (-110.7142, 33.1064, 2133),
    "Alto Quirel": (-69.9031, -28.6127, 2391),
    "Isla Moriz": (-17.2260, 28.4417, 2350),
}

# What is planted: zero point and jitter in km/s.
PLANTED = {
    "Hohenrauth three-prism": (3.420, 1.250),
    "Ollery two-prism/first": (-2.130, 0.450),
    "Ollery two-prism/rebuilt": (1.270, 0.300),
    "Hohenrauth grating": (-1.740, 0.350),
    "Wirrabeen coude": (0.860, 0.150),
    "Wirrabeen Cassegrain": (-1.050, 0.250),
    "Kessend scanner": (0.522, 0.120),
    "Ollery photoelectric": (-0.641, 0.100),
    "Thornback fibre": (0.3100, 0.0200),
    "Quirel echelle": (-0.1850, 0.0120),
    "Quirel second reduction": (-0.1480, 0.0080),
    "Moriz stabilised": (0.0, 0.0060),
}
REFERENCE = "Moriz stabilised"
SITE_OF = {name: site for site, names in {
    "Hohenrauth": ["Hohenrauth three-prism", "Hohenrauth grating"],
    "Cape Ollery": ["Ollery two-prism/first", "Ollery two-prism/rebuilt", "Ollery photoelectric"],
    "Wirrabeen": ["Wirrabeen coude", "Wirrabeen Cassegrain"],
    "Kessend": ["Kessend scanner"],
    "Thornback Ridge": ["Thornback fibre"],
    "Alto Quirel": ["Quirel echelle", "Quirel second reduction"],
    "Isla Moriz": ["Moriz stabilised"],
}.items() for name in names}

# ------------------------------------------------------------------- times

# TT - UT in seconds at 1898.0, 1898.5, ... 1960.0: historical table of the
# U.S. Naval Observatory.
DELTA_T_FIRST = 1898.0
DELTA_T = [
    -4.68, -4.19, -3.72, -3.21, -2.70, -2.09, -1.48, -0.75, -0.08, 0.62, 1.26, 1.95, 2.59, 3.28, 3.92, 4.61, 5.20,
    5.73, 6.29, 7.00, 7.68, 8.45, 9.13, 9.78, 10.38, 10.99, 11.64, 12.47, 13.23, 14.00, 14.69, 15.38, 16.00, 16.64,
    17.19, 17.72, 18.19, 18.67, 19.13, 19.69, 20.14, 20.54, 20.86, 21.14, 21.41, 21.78, 22.06, 22.30, 22.51, 22.79,
    23.01, 23.29, 23.46, 23.55, 23.63, 23.80, 23.95, 24.25, 24.39, 24.42, 24.34, 24.22, 24.10, 24.08, 24.02, 24.04,
    23.98, 23.91, 23.89, 23.95, 23.93, 23.92, 23.88, 23.94, 23.91, 23.82, 23.76, 23.87, 23.91, 23.95, 23.96, 24.00,
    24.04, 24.20, 24.35, 24.61, 24.82, 25.09, 25.30, 25.56, 25.77, 26.05, 26.27, 26.54, 26.76, 27.04, 27.27, 27.55,
    27.77, 28.03, 28.25, 28.50, 28.70, 28.95, 29.15, 29.38, 29.57, 29.80, 29.97, 30.19, 30.36, 30.57, 30.72, 30.93,
    31.07, 31.24, 31.349, 31.516, 31.677, 31.923, 32.166, 32.449, 32.671, 32.919, 33.150,
]


def delta_t(jd):
    place = (2000 + (jd - 2451544.5) / 365.25 - DELTA_T_FIRST) * 2
    i = int(place)
    return DELTA_T[i] + (place - i) * (DELTA_T[i + 1] - DELTA_T[i])


def split(text):
    """Decimal digits of a day count as whole days and a fraction."""
    value = Decimal(text)
    whole = value.to_integral_value(rounding="ROUND_FLOOR")
    return float(whole), float(value - whole)


def civil(year, month, day):
    """Julian date of a civil day (Decimal, may have a fraction)."""
    whole = int(day)
    first, second = erfa.cal2jd(year, month, whole)
    return float(first + second), float(day - whole)


def ut_to_tt(day, frac):
    """TT and UT1 of UT (before 1960) or UTC."""
    if day + frac < YEAR_1960:
        return (day, frac + delta_t(day + frac) / 86400), (day, frac)
    tai = erfa.utctai(day, frac)
    return tuple(map(float, erfa.taitt(*tai))), (day, frac)


def tt_to_ut(day, frac):
    """UT1 = UTC of TT, from 1960."""
    return tuple(map(float, erfa.taiutc(*erfa.tttai(day, frac))))


class Instant:
    """The observer at one instant: light times in seconds, velocities in km/s."""

    def __init__(self, tt, ut, site):
        longitude, latitude, height = SITES[site][0] * DEG, SITES[site][1] * DEG, SITES[site][2]
        itrs = erfa.gd2gc(1, longitude, latitude, height) / 1e3
        whole = math.floor(ut[1] + ut[0] - 0.5)
        ut_day = (ut[0] - 0.5 - whole) + ut[1]
        self.tdb_tt = float(erfa.dtdb(tt[0], tt[1], ut_day, longitude, math.hypot(itrs[0], itrs[1]), itrs[2]))
        self.tdb = (tt[0], tt[1] + self.tdb_tt / 86400)
        heliocentric, barycentric = erfa.epv00(*self.tdb)
        pv = erfa.pvtob(longitude, latitude, height, 0.0, 0.0, erfa.sp00(*tt), erfa.era00(*ut))
        x, y = erfa.bpn2xy(erfa.pnm06a(*tt))
        to_gcrs = erfa.c2ixys(x, y, erfa.s06(*tt, x, y)).T
        site_p, site_v = to_gcrs @ pv["p"] / 1e3, to_gcrs @ pv["v"] / 1e3
        day_kms = AU_KM / 86400
        self.p = barycentric["p"] * AU_KM + site_p
        self.v = barycentric["v"] * day_kms + site_v
        self.from_sun = heliocentric["p"] * AU_KM + site_p
        self.sun_v = (barycentric["v"] - heliocentric["v"]) * day_kms
        ra, dec, _, _, parallax, _ = erfa.pmsafe(RA, DEC, PM_RA, PM_DEC, STAR["parallax"] / 1e3, STAR["systemic"],
                                                 2451545.0, 0.0, *self.tdb)
        self.k = np.array([math.cos(dec) * math.cos(ra), math.cos(dec) * math.sin(ra), math.sin(dec)])
        self.distance = AU_KM / (parallax * DEG / 3600)
        self.earth_km = float(np.linalg.norm(site_p))

    def bjd(self):
        along = self.p @ self.k
        seconds = along / C_KMS - (self.p @ self.p - along**2) / (2 * self.distance * C_KMS)
        cosine = -(self.from_sun @ self.k) / np.linalg.norm(self.from_sun)
        seconds += 2 * GM_SUN / C_KMS**3 * math.log(1 - cosine)
        return self.tdb[0], self.tdb[1] + float(seconds) / 86400

    def heliocentric_s(self):
        return float(self.from_sun @ self.k) / C_KMS

    def factor(self, frame):
        """(1 + z barycentric) / (1 + z in the frame)."""
        if frame == "barycentric":
            return 1.0
        if frame == "heliocentric":
            return 1 + self.sun_v @ self.k / C_KMS
        line = self.k * self.distance - self.p
        line = line / np.linalg.norm(line)
        potential = GM_SUN / np.linalg.norm(self.from_sun) + GM_EARTH / self.earth_km
        return (1 + self.v @ line / C_KMS) / (1 - self.v @ self.v / (2 * C_KMS**2) - potential / C_KMS**2)


def to_barycentric(kms, factor):
    return float(((1 + kms / C_KMS) * factor - 1) * C_KMS)


def from_barycentric(kms, factor):
    return float(((1 + kms / C_KMS) / factor - 1) * C_KMS)


def at(scale, place, stamp, site):
    """The observer at a printed date. Of a BJD_TDB only the BJD is returned."""
    if place == "barycentre":
        return None, stamp
    clock = stamp
    for _ in range(6 if place == "heliocentre" else 1):
        if scale == "tt":
            instant = Instant(clock, tt_to_ut(*clock), site)
        else:
            tt, ut = ut_to_tt(*clock)
            instant = Instant(tt, ut, site)
        if place == "heliocentre":
            clock = stamp[0], stamp[1] - instant.heliocentric_s() / 86400
    return instant, instant.bjd()


def bjd_text(bjd):
    total = Decimal(bjd[0]) + Decimal(bjd[1])
    return str(total.quantize(Decimal("0.0000000001"), rounding=ROUND_HALF_EVEN))


# ------------------------------------------------------------ observations

RNG = np.random.default_rng(SEED)


def jd_of_year(year):
    return 2451544.5 + (year - 2000) * 365.25


def observable(jd, site):
    """Night at the site, the star at least 20 deg up."""
    longitude, latitude = SITES[site][0] * DEG, SITES[site][1] * DEG
    heliocentric, _ = erfa.epv00(jd, 0.0)
    sun = -heliocentric["p"] / np.linalg.norm(heliocentric["p"])
    star = np.array([math.cos(DEC) * math.cos(RA), math.cos(DEC) * math.sin(RA), math.sin(DEC)])
    sidereal = erfa.gmst06(jd, 0.0, jd, 0.0) + longitude
    zenith = np.array([math.cos(latitude) * math.cos(sidereal), math.cos(latitude) * math.sin(sidereal), math.sin(latitude)])
    return zenith @ sun < math.sin(-10 * DEG) and zenith @ star > math.sin(20 * DEG)


def nights(site, first, last, n):
    """n dates (JD, UT) between two years, in order, at least an hour apart."""
    found = []
    while len(found) < n:
        jd = jd_of_year(RNG.uniform(first, last))
        if observable(jd, site) and all(abs(jd - other) > 0.05 for other in found):
            found.append(jd)
    return sorted(found)


class Exposure:
    """One row to be printed. error is a standard error in km/s, 0 = none."""

    def __init__(self, instrument, jd, error):
        self.instrument, self.jd, self.error = instrument, jd, error
        self.site = SITE_OF[instrument]
        zero, jitter = PLANTED[instrument]
        self.offset = zero + RNG.normal() * math.hypot(error, jitter)
        self.spread = math.hypot(error, jitter)
        self.outlier = False

    def make_outlier(self):
        self.outlier = True
        self.offset += RNG.choice([-1, 1]) * RNG.uniform(8, 20) * self.spread


def series(instrument, first, last, n, low, high, outliers, spare=()):
    """n exposures, some of them outliers, but none of those numbered in spare
    or, when spare is a year, after that year."""
    rows = []
    for jd in nights(SITE_OF[instrument], first, last, n):
        rows.append(Exposure(instrument, jd, round(RNG.uniform(low, high), 4) if high else 0.0))
    if isinstance(spare, float):
        spare = [i for i, e in enumerate(rows) if e.jd > jd_of_year(spare)]
    for i in sorted(RNG.choice([i for i in range(n) if i not in spare], outliers, replace=False)):
        rows[i].make_outlier()
    return rows


class Row:
    """A printed row and the truth about it."""

    def __init__(self, source, exposure, stamp, velocity, convention):
        self.source, self.exposure, self.stamp, self.velocity = source, exposure, stamp, velocity
        scale, place, frame, unit = convention
        self.instant, self.bjd = at(scale, place, stamp, exposure.site)
        self.factor = self.instant.factor(frame) if frame != "barycentric" else 1.0
        self.barycentric = None
        if velocity is not None:
            self.barycentric = to_barycentric(float(velocity) * unit, self.factor)
        self.number, self.set_aside, self.duplicate_of = 0, "", None

    def truth(self):
        bjd = self.bjd[0] + self.bjd[1]
        return {
            "source": self.source, "row": self.number, "instrument": self.exposure.instrument,
            "bjd_tdb": bjd_text(self.bjd),
            "barycentric_kms": None if self.barycentric is None else round(self.barycentric, 9),
            "signal_kms": round(signal(bjd), 9), "outlier": bool(self.exposure.outlier),
            "duplicate_of": None if self.duplicate_of is None else
            {"source": self.duplicate_of.source, "row": self.duplicate_of.number},
            "set_aside": self.set_aside,
        }


TRUTH = []


def printed_velocity(exposure, stamp, convention, decimals):
    """The velocity as the table prints it, in the table's frame and unit."""
    scale, place, frame, unit = convention
    instant, bjd = at(scale, place, stamp, exposure.site)
    kms = signal(bjd[0] + bjd[1]) + exposure.offset
    kms = from_barycentric(kms, instant.factor(frame) if frame != "barycentric" else 1.0)
    return f"{kms / unit:.{decimals}f}"


def true_clock(exposure, convention):
    """The exposure's date in the table's scale and at the table's place."""
    scale, place = convention[:2]
    day = math.floor(exposure.jd)
    clock = (float(day), exposure.jd - day)
    tt, ut = ut_to_tt(*clock)
    instant = Instant(tt, ut, exposure.site)
    if place == "barycentre":
        return instant.bjd()
    if scale == "tt":
        clock = tt
    if place == "heliocentre":
        clock = clock[0], clock[1] + instant.heliocentric_s() / 86400
    return clock


def decimal_date(clock, subtract, decimals):
    value = Decimal(clock[0]) + Decimal(clock[1]) - Decimal(subtract)
    return str(value.quantize(Decimal(1).scaleb(-decimals)))


def read_decimal_date(text, subtract):
    return split(str(Decimal(text) + Decimal(subtract)))


def record(source, exposure, stamp, velocity, convention):
    row = Row(source, exposure, stamp, velocity, convention)
    TRUTH.append(row)
    return row


def write(name, data):
    with open(os.path.join(HERE, name), "wb") as f:
        f.write(data)


MONTHS = "Jan Feb Mar Apr May Jun Jul Aug Sep Oct Nov Dec".split()
ROMAN = "I II III IV V VI VII VIII IX X XI XII".split()


def calendar_of(day, frac):
    """Year, month, day and fraction of the day from midnight."""
    y, m, d, f = erfa.jd2cal(day, frac)
    return int(y), int(m), int(d), float(f)


# ----------------------------------------------------------------- sources


def make_hohenrauth_plates():
    """Blanks between the columns, days from Greenwich mean noon, no errors."""
    source, convention = "hohenrauth-plates", ("ut", "observatory", "heliocentric", 1.0)
    lines = ["# Velthorn 9. Radial velocities from plates of the three-prism spectrograph, 1899-1924",
             "# Times are Greenwich mean astronomical time, the day beginning at noon; middle of exposure.",
             "# Velocities in km/s, reduced to the Sun.", "Year Month Day Plate Vel Grade"]
    rows = []
    for i, e in enumerate(series("Hohenrauth three-prism", 1899.1, 1924.6, 60, 0, 0, 3, (17, 52))):
        if i == 40:
            lines.append("# New slit from here on.")
        decimals = 3 if i < 40 else 4
        # The noon-based day has the date of the noon it began at.
        y, m, d, f = calendar_of(math.floor(e.jd - 0.5), e.jd - 0.5 - math.floor(e.jd - 0.5))
        day = Decimal(d) + Decimal(f).quantize(Decimal(1).scaleb(-decimals))
        whole, frac = civil(y, m, day)
        stamp = (whole + 0.5, frac)
        velocity = printed_velocity(e, stamp, convention, 1)
        if i in (17, 52):
            velocity = f"{float(velocity) + 55:.1f}"
        row = record(source, e, stamp, velocity, convention)
        lines.append(f"{y} {MONTHS[m - 1]:<3} {day:>8} H{1200 + 13 * i:<5} {velocity:>6} {'abc'[i % 3]}")
        row.number = len(lines)
        if i in (17, 52):
            row.set_aside = "two exposures on one plate"
        rows.append(row)
    write("hohenrauth_plates.txt", ("\n".join(lines) + "\n").encode())
    return rows


def excel_text(sheet_xml, cell):
    return re.search(rf'<c r="{cell}"[^>]*><v>([^<]*)</v>', sheet_xml).group(1)


def make_ollery_workbook():
    """Two sheets: date cells with numbers typed as text, and civil dates as
    text with probable errors."""
    convention = ("ut", "observatory", "heliocentric", 1.0)
    book = openpyxl.Workbook()
    late = book.active
    late.title = "1926-1952"
    for line in (["Cape Ollery Observatory, two-prism spectrograph (rebuilt)"],
                 ["Mid-exposure, Universal Time; velocities in km/s reduced to the Sun"], []):
        late.append(line)
    late.append(["UT", "Plate", "Velocity", "m.e.", "Remarks"])
    late_rows = []
    for i, e in enumerate(series("Ollery two-prism/rebuilt", 1926.1, 1952.6, 52, 0.4, 0.9, 3, (11, 30, 47))):
        y, m, d, f = calendar_of(math.floor(e.jd), e.jd - math.floor(e.jd))
        date = datetime(y, m, d) + timedelta(minutes=round(f * 1440))
        error = f"{e.error:.2f}"
        number = 5 + i
        late.append([date, 3000 + 7 * i, None, None, None])
        late.cell(number, 1).number_format = "yyyy-mm-dd hh:mm"
        serial = (date - datetime(1899, 12, 30)) / timedelta(days=1)
        stamp = split(repr(serial))
        stamp = (2415018.5 + stamp[0], stamp[1])
        velocity = printed_velocity(e, stamp, convention, 2)
        as_text = i % 9 == 4
        late.cell(number, 3).value = velocity.replace("-", "\u2212") if as_text else float(velocity)
        late.cell(number, 4).value = error if i % 7 == 2 else float(error)
        row = record("ollery-late", e, stamp, velocity, convention)
        row.number = number
        if i in (11, 47):
            late.cell(number, 5).value = "trailed"
            row.set_aside = "trailed spectrum"
        if i == 30:
            late.cell(number, 3).value, row.velocity, row.barycentric = "--", None, None
            row.set_aside = "no velocity printed"
        late_rows.append((row, serial))
    early = book.create_sheet("1911-1924")
    early.append(["Cape Ollery Observatory, two-prism spectrograph"])
    early.append(["Dates: Greenwich mean astronomical time (day from noon)"])
    early.append(["Date", "Plate", "Vel.", "p.e."])
    for i, e in enumerate(series("Ollery two-prism/first", 1911.1, 1924.6, 42, 0.7, 1.5, 2)):
        y, m, d, f = calendar_of(math.floor(e.jd - 0.5), e.jd - 0.5 - math.floor(e.jd - 0.5))
        day = Decimal(d) + Decimal(f).quantize(Decimal("0.0001"))
        whole, frac = civil(y, m, day)
        stamp = (whole + 0.5, frac)
        velocity = printed_velocity(e, stamp, convention, 2)
        early.append([f"{y} {MONTHS[m - 1]} {day}", 900 + 5 * i, float(velocity), float(f"{e.error * 0.6745:.2f}")])
        record("ollery-early", e, stamp, velocity, convention).number = 4 + i
    book.properties.creator = "Cape Ollery Observatory (invented)"
    raw = io.BytesIO()
    book.save(raw)
    write("ollery.xlsx", settled_zip(raw.getvalue()))
    with zipfile.ZipFile(os.path.join(HERE, "ollery.xlsx")) as z:
        xml = z.read("xl/worksheets/sheet1.xml").decode()
    for row, serial in late_rows:
        stored = excel_text(xml, f"A{row.number}")
        if abs(float(stored) - serial) > 1e-10:
            sys.exit(f"the workbook stores {stored} for {serial}")


def settled_zip(data):
    """The same archive with fixed times in it."""
    out = io.BytesIO()
    with zipfile.ZipFile(io.BytesIO(data)) as old, zipfile.ZipFile(out, "w", zipfile.ZIP_DEFLATED) as new:
        for name in sorted(old.namelist(), key=lambda n: (n != "[Content_Types].xml", n)):
            content = old.read(name)
            if name == "docProps/core.xml":
                content = re.sub(rb">\d{4}-\d\d-\d\dT[^<]*<", b">2024-01-01T00:00:00Z<", content)
            info = zipfile.ZipInfo(name, (2024, 1, 1, 0, 0, 0))
            info.compress_type, info.external_attr = zipfile.ZIP_DEFLATED, 0o644 << 16
            new.writestr(info, content)
    return out.getvalue()


def make_hohenrauth_grating():
    """Semicolons, decimal commas, Latin-1, the date split over columns; year
    and month printed only when they change."""
    source, convention = "hohenrauth-gitter", ("ut", "observatory", "heliocentric", 1.0)
    lines = ["Jahr;Monat;Tag;Stunde;Minute;Radialgeschw. für Sonne;m. F.;Bemerkung"]
    before = None
    for i, e in enumerate(series("Hohenrauth grating", 1930.1, 1941.6, 44, 0.5, 0.9, 2, (21,))):
        y, m, d, f = calendar_of(math.floor(e.jd), e.jd - math.floor(e.jd))
        tenths = min(round(f * 14400), 14399)
        hour, minute = tenths // 600, Decimal(tenths % 600) / 10
        day, _ = civil(y, m, Decimal(d))
        stamp = (day, float((Decimal(hour) * 60 + minute) / 1440))
        velocity = printed_velocity(e, stamp, convention, 2)
        row = record(source, e, stamp, velocity, convention)
        text = velocity.replace(".", ",")
        if i == 21:
            text, row.velocity, row.barycentric = "--", None, None
            row.set_aside = "no velocity printed"
        year = "" if before and before[0] == y else str(y)
        month = "" if before == (y, m) else ROMAN[m - 1]
        before = (y, m)
        remark = "dünn" if i % 11 == 6 else ""
        lines.append(f"{year};{month};{d};{hour};{minute:.1f};{{v}};{e.error:.2f};{remark}".replace(".", ",").replace("{v}", text))
        row.number = len(lines)
    write("hohenrauth_gitter.csv", ("\r\n".join(lines) + "\r\n").encode("latin-1"))


WIRRABEEN_README = """\
J/Wirr/7/114    Velocities of Velthorn 9            (Wirrabeen Observatory, 1967)
================================================================================
Radial velocities of Velthorn 9 from Wirrabeen, 1949-1966
     (an invented table of an invented star)
================================================================================
File Summary:
--------------------------------------------------------------------------------
 FileName      Lrecl  Records   Explanations
--------------------------------------------------------------------------------
ReadMe            80        .   This file
wirrabeen.dat     31       {n}   Radial velocities
--------------------------------------------------------------------------------

Byte-by-byte Description of file: wirrabeen.dat
--------------------------------------------------------------------------------
   Bytes Format Units   Label     Explanations
--------------------------------------------------------------------------------
   1- 11  F11.5 d       HJD       Heliocentric Julian date, UT, mid-exposure
                                   (HJD-2400000)
  13- 14  A2    ---     Inst      [WC WK] Spectrograph (1)
  16- 21  F6.2  km/s    RV        ? Heliocentric radial velocity
  23- 26  F4.2  km/s  e_RV        ? Mean (standard) error of RV
  28- 31  A4    ---     Note      Remark
--------------------------------------------------------------------------------
Note (1): WC = coude spectrograph, WK = Cassegrain spectrograph.
--------------------------------------------------------------------------------
"""


def make_wirrabeen():
    """Fixed columns with a ReadMe; heliocentric dates; some errors blank."""
    source, convention = "wirrabeen", ("utc", "heliocentre", "heliocentric", 1.0)
    rows, lines = [], []
    both = series("Wirrabeen coude", 1949.1, 1966.6, 42, 0.3, 0.6, 2) + \
        series("Wirrabeen Cassegrain", 1951.1, 1964.6, 30, 0.5, 0.8, 1)
    for i, e in enumerate(sorted(both, key=lambda e: e.jd)):
        date = decimal_date(true_clock(e, convention), 2400000, 5)
        stamp = read_decimal_date(date, 2400000)
        code = "WC" if e.instrument.endswith("coude") else "WK"
        error = f"{e.error:.2f}"
        if code == "WC" and i % 12 == 5:
            # No error printed: these exposures have the usual 0.45 km/s.
            error = ""
            if not e.outlier:
                e.offset = PLANTED[e.instrument][0] + RNG.normal() * math.hypot(0.45, PLANTED[e.instrument][1])
        velocity = printed_velocity(e, stamp, convention, 2)
        row = record(source, e, stamp, velocity, convention)
        note = ""
        if i == 33:
            row.velocity, row.barycentric = None, None
            row.set_aside, e.outlier, note, velocity = "no velocity printed", False, "lost", ""
        lines.append(f"{date:>11} {code} {velocity:>6} {error:>4} {note:<4}".rstrip())
        row.number = len(lines)
        rows.append(row)
    write("wirrabeen.dat", ("\n".join(lines) + "\n").encode())
    write("wirrabeen_ReadMe", WIRRABEEN_README.format(n=len(lines)).encode())
    return rows


def observer_ut(row):
    """UT (before 1960) or UTC of the instant behind a printed row."""
    tt = (row.instant.tdb[0], row.instant.tdb[1] - row.instant.tdb_tt / 86400)
    if tt[0] + tt[1] < YEAR_1960:
        jd = tt[0] + tt[1]
        return tt[0], tt[1] - delta_t(jd - delta_t(jd) / 86400) / 86400
    return tt_to_ut(*tt)


def make_catalogue(plates, wirrabeen):
    """A later catalogue: prints earlier rows again with fewer digits, adds
    rows of its own, and lists another star as well."""
    source, convention = "general-catalogue", ("utc", "heliocentre", "heliocentric", 1.0)
    entries = []  # heliocentric date, exposure, repeated row
    for rows, count in ((plates, 15), (wirrabeen, 13)):
        good = [r for r in rows if not r.set_aside and not r.exposure.outlier]
        for i in sorted(RNG.choice(len(good), count, replace=False)):
            ut = observer_ut(good[i])
            entries.append(((ut[0], ut[1] + good[i].instant.heliocentric_s() / 86400), good[i].exposure, good[i]))
    known = [r.exposure.jd for r in plates + wirrabeen]
    fresh = series("Hohenrauth three-prism", 1924.7, 1926.6, 6, 0, 0, 0) + series("Wirrabeen coude", 1952.1, 1966.6, 7, 0.4499, 0.4501, 0)
    for e in fresh:
        if min(abs(e.jd - jd) for jd in known) < 0.05:
            sys.exit("a new row of the catalogue falls on an old one; change the seed")
        entries.append((true_clock(e, convention), e, None))
    entries.sort(key=lambda entry: entry[0][0] + entry[0][1])
    names = {"Hohenrauth three-prism": "Hohenrauth 3 pr.", "Wirrabeen coude": "Wirrabeen C", "Wirrabeen Cassegrain": "Wirrabeen K"}
    lines = ["Star,HJD-2400000,RV,Spectrograph"]
    for i, (clock, e, repeated) in enumerate(entries):
        if i % 9 == 3:  # a row of another star, invented as well
            other = Decimal(repr(round(clock[0] - 2400000 + clock[1] + 30.25, 3)))
            lines.append(f"Velthorn 11,{other:.3f},{RNG.normal(24, 2):.1f},{names[e.instrument]}")
            FOREIGN.append((source, len(lines), e.instrument))
        date = decimal_date(clock, 2400000, 3)
        stamp = read_decimal_date(date, 2400000)
        if repeated:
            velocity = f"{float(repeated.velocity):.1f}"
        else:
            velocity = printed_velocity(e, stamp, convention, 1)
        row = record(source, e, stamp, velocity, convention)
        row.duplicate_of = repeated
        lines.append(f"Velthorn 9,{date},{velocity},{names[e.instrument]}")
        row.number = len(lines)
    write("general_catalogue.csv", ("\n".join(lines) + "\n").encode())


FOREIGN = []


def make_kessend():
    """Tabs; HJD in UTC; heliocentric."""
    source, convention = "kessend", ("utc", "heliocentre", "heliocentric", 1.0)
    lines = ["HJD\tVr\tsigma\tNotes"]
    for i, e in enumerate(series("Kessend scanner", 1962.1, 1985.6, 46, 0.15, 0.35, 2, (8, 39))):
        date = decimal_date(true_clock(e, convention), 0, 5)
        stamp = read_decimal_date(date, 0)
        velocity = printed_velocity(e, stamp, convention, 2)
        row = record(source, e, stamp, velocity, convention)
        note = ""
        if i in (8, 39):
            note, row.set_aside = "cloud", "taken through cloud"
        lines.append(f"{date}\t{velocity}\t{e.error:.2f}\t{note}")
        row.number = len(lines)
    write("kessend.tsv", ("\n".join(lines) + "\n").encode())


def make_ollery_photoelectric():
    """Blanks between the columns; JD-2440000 in TT at the observatory."""
    source, convention = "ollery-photoelectric", ("tt", "observatory", "heliocentric", 1.0)
    lines = ["# Cape Ollery, photoelectric speedometer. JED = JD - 2440000 in dynamical time, mid-exposure.",
             "JED RV err"]
    for e in series("Ollery photoelectric", 1973.1, 1992.6, 38, 0.2, 0.4, 2):
        date = decimal_date(true_clock(e, convention), 2440000, 6)
        stamp = read_decimal_date(date, 2440000)
        velocity = printed_velocity(e, stamp, convention, 2)
        row = record(source, e, stamp, velocity, convention)
        lines.append(f"{date:>13} {velocity:>7} {e.error:.2f}")
        row.number = len(lines)
    write("ollery_photoelectric.txt", ("\n".join(lines) + "\n").encode())


def make_thornback():
    """Commas; ISO 8601 in UTC; velocities as measured at the observatory."""
    source, convention = "thornback", ("utc", "observatory", "observatory", 1.0)
    lines = ["mid_exposure_utc,rv_measured_kms,rv_error_kms,exposure"]
    for i, e in enumerate(series("Thornback fibre", 1986.1, 2004.6, 50, 0.02, 0.05, 2)):
        y, m, d, f = calendar_of(math.floor(e.jd), e.jd - math.floor(e.jd))
        date = datetime(y, m, d) + timedelta(milliseconds=100 * round(f * 864000))
        text = date.strftime("%Y-%m-%dT%H:%M:%S.") + str(date.microsecond // 100000)
        tenths = (date.hour * 3600 + date.minute * 60 + date.second) * 10 + date.microsecond // 100000
        day, _ = civil(date.year, date.month, Decimal(date.day))
        stamp = (day, tenths / 864000)
        velocity = printed_velocity(e, stamp, convention, 4)
        row = record(source, e, stamp, velocity, convention)
        lines.append(f"{text},{velocity},{e.error:.4f},tb{i:04d}")
        row.number = len(lines)
    write("thornback.csv", ("\n".join(lines) + "\n").encode())


def make_quirel():
    """MJD in UTC, m/s, barycentric, compressed; and a later reduction of some
    of the same exposures, in BJD_TDB."""
    source, convention = "quirel", ("utc", "observatory", "barycentric", 1e-3)
    lines = ["# Alto Quirel echelle spectrograph, first reduction.", "MJD_UTC RV e_RV"]
    rows = []
    for e in series("Quirel echelle", 1989.1, 2012.6, 56, 0.008, 0.020, 3, 2005.0):
        date = decimal_date(true_clock(e, convention), "2400000.5", 6)
        stamp = read_decimal_date(date, "2400000.5")
        velocity = printed_velocity(e, stamp, convention, 1)
        row = record(source, e, stamp, velocity, convention)
        lines.append(f"{date} {velocity} {e.error * 1e3:.1f}")
        row.number = len(lines)
        rows.append(row)
    packed = io.BytesIO()
    with gzip.GzipFile("", "wb", 9, packed, mtime=0) as f:
        f.write(("\n".join(lines) + "\n").encode())
    write("quirel.dat.gz", packed.getvalue())

    source, convention = "quirel-second", ("tdb", "barycentre", "barycentric", 1e-3)
    again = [r for r in rows if r.bjd[0] > jd_of_year(2005)]
    entries = []
    for row in again:
        entries.append((Exposure("Quirel second reduction", row.exposure.jd, round(RNG.uniform(0.006, 0.012), 4)), row))
    entries += [(e, None) for e in series("Quirel second reduction", 2012.7, 2018.6, 18, 0.006, 0.012, 1)]
    lines = ["BJD_TDB\tRV (m/s)\te_RV (m/s)"]
    for e, repeated in entries:
        clock = repeated.bjd if repeated else true_clock(e, convention)
        date = decimal_date(clock, 0, 6)
        stamp = read_decimal_date(date, 0)
        velocity = printed_velocity(e, stamp, convention, 1)
        row = record(source, e, stamp, velocity, convention)
        lines.append(f"{date}\t{velocity}\t{e.error * 1e3:.1f}")
        row.number = len(lines)
        if repeated:  # this reduction is the better one
            repeated.duplicate_of = row
    write("quirel_second.tsv", ("\n".join(lines) + "\n").encode())


def make_moriz():
    """Commas; BJD_TDB; m/s."""
    source, convention = "moriz", ("tdb", "barycentre", "barycentric", 1e-3)
    lines = ["bjd_tdb,rv_ms,rv_err_ms"]
    for e in series("Moriz stabilised", 2001.1, 2024.6, 72, 0.005, 0.009, 3):
        date = decimal_date(true_clock(e, convention), 0, 8)
        stamp = read_decimal_date(date, 0)
        velocity = printed_velocity(e, stamp, convention, 2)
        row = record(source, e, stamp, velocity, convention)
        lines.append(f"{date},{velocity},{e.error * 1e3:.2f}")
        row.number = len(lines)
    write("moriz.csv", ("\n".join(lines) + "\n").encode())


FILES = ["hohenrauth_plates.txt", "ollery.xlsx", "hohenrauth_gitter.csv", "wirrabeen.dat", "wirrabeen_ReadMe",
         "general_catalogue.csv", "kessend.tsv", "ollery_photoelectric.txt", "thornback.csv", "quirel.dat.gz",
         "quirel_second.tsv", "moriz.csv", "truth.json"]


def main():
    plates = make_hohenrauth_plates()
    make_ollery_workbook()
    make_hohenrauth_grating()
    wirrabeen = make_wirrabeen()
    make_catalogue(plates, wirrabeen)
    make_kessend()
    make_ollery_photoelectric()
    make_thornback()
    make_quirel()
    make_moriz()
    rows = [row.truth() for row in TRUTH]
    for source, number, instrument in FOREIGN:
        rows.append({"source": source, "row": number, "instrument": instrument, "bjd_tdb": "", "barycentric_kms": None,
                     "signal_kms": None, "outlier": False, "duplicate_of": None, "set_aside": "another star"})
    order = {name: i for i, name in enumerate(dict.fromkeys(row["source"] for row in rows))}
    rows.sort(key=lambda row: (order[row["source"]], row["row"]))
    head = {"reference_instrument": REFERENCE, "signal": SIGNAL,
            "instruments": {name: {"zero_point_kms": z, "jitter_kms": j} for name, (z, j) in PLANTED.items()}}
    text = json.dumps(head, indent=1)[:-2] + ',\n "rows": [\n' + ",\n".join("  " + json.dumps(row) for row in rows) + "\n ]\n}\n"
    write("truth.json", text.encode())
    sums = []
    for name in FILES + ["plan.toml", "make_demo.py"]:
        with open(os.path.join(HERE, name), "rb") as f:
            sums.append(f"{hashlib.sha256(f.read()).hexdigest()}  {name}\n")
    write("SHA256SUMS", "".join(sums).encode())
    print(f"{len(rows)} rows; {sum(r['outlier'] for r in rows)} outliers; "
          f"{sum(r['duplicate_of'] is not None for r in rows)} duplicates; {sum(bool(r['set_aside']) for r in rows)} set aside")


if __name__ == "__main__":
    main()
