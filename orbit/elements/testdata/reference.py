#!/usr/bin/python3
"""Writes reference.csv: the verification sets as python-sgp4 2.15 reads them.

A general-purpose propagation library (Debian package python3-sgp4 2.15-0.1), its
pure Python reader. Angles in radians, mean motion in rad/min, B* in 1/Earth radii,
derivatives in rad/min^2 and rad/min^3, all as repr() prints a float; the epoch as
printed year and day. Run in this folder: /usr/bin/python3 reference.py > reference.csv
"""

import csv
import sys

from sgp4.earth_gravity import wgs72
from sgp4.io import twoline2rv

out = csv.writer(sys.stdout, lineterminator="\n")
out.writerow("number,designator,epoch_year,epoch_day,inclination_rad,node_rad,eccentricity,perigee_rad,"
             "anomaly_rad,motion_rad_min,bstar,motion_dot,motion_ddot".split(","))
lines = [x.rstrip("\n") for x in open("verification.tle") if x[0] in "12"]
for one, two in zip(lines[::2], lines[1::2]):
    s = twoline2rv(one, two, wgs72)
    out.writerow([s.satnum, s.intldesg, s.epochyr, repr(s.epochdays), repr(s.inclo), repr(s.nodeo), repr(s.ecco),
                  repr(s.argpo), repr(s.mo), repr(s.no_kozai), repr(s.bstar), repr(s.ndot), repr(s.nddot)])
