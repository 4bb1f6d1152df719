#!/usr/bin/python3
"""Barycentric times and velocity corrections by astropy and ERFA.

Reads cases as CSV with a header line on standard input and writes one line
per case, in the same order, on standard output.

Input columns
  ra dec epoch pmra pmdec parallax rv   deg, deg, Julian year, mas/yr (with
                                        cos dec), mas/yr, mas (0 = unknown), km/s
  lon lat height                        deg east, deg, m (WGS84)
  scale day frac                        utc, ut1, tai, tt, tdb or tcb; Julian
                                        date of the observer's clock in two parts
  place                                 observatory, heliocentre, barycentre
  deltat                                TT - UT1 in seconds, used before 1960 for
                                        ut1 and for the Earth's rotation; from
                                        1960 on UT1 = UTC

Output columns
  stamp_day stamp_frac                  the observer's clock plus the light time
                                        to the place: the stamp to be converted
  bjd_day bjd_frac                      BJD in TDB
  correction_ms                         velocity correction, m/s, relativistic
  observer_ms                           v.k of the observer about the barycentre, m/s

Nothing is fetched: the Earth's position is ERFA's epv00, UT1 - UTC is given,
polar motion comes from the table that astropy carries.
"""
import csv
import sys
import warnings

import erfa
import numpy as np
from astropy import units as u
from astropy.coordinates import EarthLocation, SkyCoord, get_body_barycentric_posvel, solar_system_ephemeris
from astropy.time import Time
from astropy.utils import iers

warnings.simplefilter("ignore")
iers.conf.auto_download = False
iers.conf.iers_degraded_accuracy = "ignore"
solar_system_ephemeris.set("builtin")

AU_KM = 149597870.7
LIGHT_KMS = 299792.458
SUN_2GM_C3 = 2 * 1.3271244e11 / LIGHT_KMS**3
FIRST_UTC = 2436934.5


def clock(scale, day, frac, deltat, location):
    """The observer's clock, with the rotation of the Earth it implies."""
    early = day + frac < FIRST_UTC
    if scale == "ut1":
        # Through TT: before 1960 with Delta T, afterwards UT1 = UTC.
        first = Time(day, frac, format="jd", scale="utc", location=location)
        atomic = first.tai
        leap = (atomic.jd1 - day + (atomic.jd2 - frac)) * 86400
        shift = np.where(early, deltat, leap + 32.184)
        time = Time(day, frac + shift / 86400, format="jd", scale="tt", location=location)
    else:
        time = Time(day, frac, format="jd", scale=scale, location=location)
    # Before 1960 ERFA's UTC is TAI, so UT1 - UTC there is 32.184 s - Delta T.
    time.delta_ut1_utc = np.where(early, 32.184 - deltat, 0.0)
    return time


def star_at(group, time):
    """Direction cosines and parallax at the times, by erfa.pmsafe."""
    deg = np.pi / 180
    dec = group["dec"] * deg
    mas = deg / 3600e3
    start = 2451545.0 + (group["epoch"] - 2000) * 365.25
    tdb = time.tdb
    ra, dec, _, _, parallax, _ = erfa.pmsafe(
        group["ra"] * deg, dec, group["pmra"] * mas / np.cos(dec), group["pmdec"] * mas,
        group["parallax"] / 1e3, np.where(group["parallax"] > 0, group["rv"], 0.0),
        start, np.zeros_like(start), tdb.jd1, tdb.jd2)
    return ra, dec, np.where(group["parallax"] > 0, parallax, 0.0)


def answer(group, scale, with_parallax):
    location = EarthLocation.from_geodetic(group["lon"] * u.deg, group["lat"] * u.deg, group["height"] * u.m, ellipsoid="WGS84")
    time = clock(scale, group["day"], group["frac"], group["deltat"], location)
    ra, dec, parallax = star_at(group, time)
    plane = SkyCoord(ra * u.rad, dec * u.rad, frame="icrs")
    bary_s = time.light_travel_time(plane, "barycentric").to_value(u.s)
    helio_s = time.light_travel_time(plane, "heliocentric").to_value(u.s)

    # Curvature and Shapiro of Eastman, Siverd and Gaudi 2010.
    towards = np.array([np.cos(dec) * np.cos(ra), np.cos(dec) * np.sin(ra), np.sin(dec)])
    earth, earth_v = get_body_barycentric_posvel("earth", time)
    site, site_v = location.get_gcrs_posvel(time)
    observer = (earth + site).xyz.to_value(u.km)
    sun = get_body_barycentric_posvel("sun", time)[0].xyz.to_value(u.km) - observer
    along = (observer * towards).sum(axis=0)
    across2 = (observer**2).sum(axis=0) - along**2
    distance = AU_KM / np.where(parallax > 0, parallax * np.pi / 648000, 1e-30)
    bary_s = bary_s - across2 / (2 * distance * LIGHT_KMS)
    cosine = (sun * towards).sum(axis=0) / np.sqrt((sun**2).sum(axis=0))
    bary_s = bary_s + SUN_2GM_C3 * np.log(1 - cosine)

    target = plane
    if with_parallax:
        target = SkyCoord(ra * u.rad, dec * u.rad, distance=distance * u.km, frame="icrs")
    correction = target.radial_velocity_correction("barycentric", obstime=time)
    observer_v = (earth_v + site_v).xyz.to_value(u.m / u.s)

    tdb = time.tdb
    bjd_day, bjd_frac = tdb.jd1, tdb.jd2 + bary_s / 86400
    light = np.where(group["place"] == "heliocentre", helio_s, np.where(group["place"] == "barycentre", bary_s, 0.0))
    return np.array([group["day"], group["frac"] + light / 86400, bjd_day, bjd_frac,
                     correction.to_value(u.m / u.s), (observer_v * towards).sum(axis=0)]).T


def main():
    rows = list(csv.DictReader(sys.stdin))
    words = ("scale", "place")
    columns = {key: np.array([row[key] if key in words else float(row[key]) for row in rows]) for key in rows[0]}
    result = np.zeros((len(rows), 6))
    for scale in sorted(set(columns["scale"])):
        for with_parallax in (False, True):
            chosen = (columns["scale"] == scale) & ((columns["parallax"] > 0) == with_parallax)
            if chosen.any():
                result[chosen] = answer({key: value[chosen] for key, value in columns.items()}, str(scale), with_parallax)
    out = csv.writer(sys.stdout, lineterminator="\n")
    out.writerow(["stamp_day", "stamp_frac", "bjd_day", "bjd_frac", "correction_ms", "observer_ms"])
    for row in result:
        out.writerow([repr(float(value)) for value in row])


if __name__ == "__main__":
    main()
