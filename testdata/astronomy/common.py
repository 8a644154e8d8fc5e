"""What the reference scripts share: element sets, sites, and the two libraries set
to one and the same orientation of the Earth.

Written for skyfield 1.45, astropy 5.2.1 (with erfa 2.0) and sgp4 2.15. No network:
UT1-UTC and the pole come from the arguments, never from a table.
"""
import csv
import datetime
import os

import numpy as np
from astropy import units as u
from astropy.coordinates import ITRS, TEME, CartesianDifferential, CartesianRepresentation, EarthLocation
from astropy.time import Time
from astropy.utils import iers
from sgp4.api import Satrec
from skyfield.api import EarthSatellite, load, wgs84
from skyfield.constants import ASEC2RAD
from skyfield.framelib import itrs

HERE = os.path.dirname(os.path.abspath(__file__))
UTC = datetime.timezone.utc
iers.conf.auto_download = False

# The Earth orientation of each set: UT1-UTC in s, pole x and y in arcseconds. Values
# are chosen by us, of the size that occurs, and are given to both libraries.
ORIENTATION = {
    'Polar low': (0.0, 0.0, 0.0),
    'Sun synchronous': (-0.4217, 0.0, 0.0),
    'Middle inclination': (0.3311, 0.1714, 0.4302),
    'Retrograde': (0.0, -0.2100, 0.3900),
    'Verification 08195': (0.1946, 0.1252, 0.3381),
    'Verification 28057': (0.1946, 0.1252, 0.3381),
}


def orientation(name):
    return ORIENTATION.get(name, (0.0, 0.0, 0.0))


def element_sets():
    """Returns {name: (line 1, line 2)} in the order of elements.tle."""
    with open(os.path.join(HERE, 'elements.tle')) as f:
        lines = f.read().splitlines()
    return {lines[i]: (lines[i + 1], lines[i + 2]) for i in range(0, len(lines), 3)}


def sites():
    """Returns {name: (latitude deg, longitude deg, altitude m)}."""
    with open(os.path.join(HERE, 'sites.csv')) as f:
        return {r['site']: (float(r['latitude_deg']), float(r['longitude_deg']), float(r['altitude_m']))
                for r in csv.DictReader(f)}


def epoch(lines):
    """Returns the epoch of an element set, rounded to the second."""
    s = Satrec.twoline2rv(*lines)
    seconds = (s.jdsatepoch - 2440587.5 + s.jdsatepochF) * 86400
    return datetime.datetime.fromtimestamp(round(seconds), UTC)


def stamp(start, seconds, digits=3):
    """Returns ISO 8601 of start + seconds, rounded to so many digits of the second."""
    ticks = round(seconds * 10**digits)
    whole, part = divmod(ticks, 10**digits)
    t = start + datetime.timedelta(seconds=whole)
    return t.strftime('%Y-%m-%dT%H:%M:%S') + f'.{part:0{digits}d}Z'


def write(name, header, rows):
    with open(os.path.join(HERE, name), 'w', newline='') as f:
        w = csv.writer(f, lineterminator='\n')
        w.writerow(header)
        w.writerows(rows)


class Skyfield:
    """skyfield at one Earth orientation; its TEME to ITRS uses the sidereal time of
    IAU 1982 and then no equation of the equinoxes (it is put in and taken out)."""

    def __init__(self, dut1, x, y):
        self.ts = load.timescale(builtin=True)
        self.dut1 = dut1
        # Two rows, for the library interpolates between them.
        self.ts.polar_motion_table = (np.array([2400000.0, 2500000.0]), np.full(2, x), np.full(2, y))

    def times(self, start, seconds):
        t = self.ts.utc(start.year, start.month, start.day, start.hour, start.minute,
                        start.second + np.asarray(seconds, float))
        # delta T = TT - UT1 = 32.184 s + (TAI - UTC) - (UT1 - UTC)
        t.delta_t = 32.184 + t._leap_seconds() - self.dut1 + np.zeros_like(t.tt)
        return t

    def satellite(self, lines):
        return EarthSatellite(*lines, ts=self.ts)

    def site(self, lat, lon, alt):
        return wgs84.latlon(lat, lon, elevation_m=alt)

    def earth_fixed(self, satellite, t):
        """Returns position in m and velocity in m/s, shape (3, n)."""
        r, v = satellite.at(t).frame_xyz_and_velocity(itrs)
        return r.m, v.km_per_s * 1000

    def look(self, satellite, site, t):
        """Returns azimuth deg, elevation deg, range m, range rate m/s."""
        el, az, rng, _, _, rate = (satellite - site).at(t).frame_latlon_and_rates(site)
        return az.degrees, el.degrees, rng.m, rate.km_per_s * 1000


class FixedOrientation(iers.IERS):
    """Stands where astropy looks for a table of Earth orientation; holds one value."""

    value = (0.0, 0.0, 0.0)

    def _fill(self, jd1, return_status, *columns):
        shape = np.shape(jd1.jd1 if isinstance(jd1, Time) else jd1)
        out = [np.full(shape, value) * unit for value, unit in columns]
        if return_status:
            out.append(np.full(shape, iers.FROM_IERS_B))
        return out[0] if len(out) == 1 else tuple(out)

    def ut1_utc(self, jd1, jd2=0.0, return_status=False):
        return self._fill(jd1, return_status, (self.value[0], u.s))

    def pm_xy(self, jd1, jd2=0.0, return_status=False):
        return self._fill(jd1, return_status, (self.value[1], u.arcsec), (self.value[2], u.arcsec))


class Astropy:
    """astropy at one Earth orientation; its TEME to ITRS follows AIAA 2006-6753."""

    def __init__(self, dut1, x, y):
        table = FixedOrientation()
        table.value = (dut1, x, y)
        iers.earth_orientation_table.set(table)

    def times(self, start, seconds):
        return Time(start.replace(tzinfo=None), scale='utc') + np.asarray(seconds, float) * u.s

    def earth_fixed(self, lines, t):
        """Returns position in m and velocity in m/s, shape (3, n)."""
        s = Satrec.twoline2rv(*lines)
        error, r, v = s.sgp4_array(t.jd1, t.jd2)
        if error.any():
            raise ValueError(f'sgp4 error {error.max()} in {lines[0]}')
        state = CartesianRepresentation(r.T * u.km).with_differentials(CartesianDifferential(v.T * u.km / u.s))
        fixed = TEME(state, obstime=t).transform_to(ITRS(obstime=t)).cartesian
        return fixed.xyz.to_value(u.m), fixed.differentials['s'].d_xyz.to_value(u.m / u.s)

    def look(self, lines, site, t):
        """Returns azimuth deg, elevation deg, range m, range rate m/s."""
        from astropy.coordinates import AltAz
        lat, lon, alt = site
        place = EarthLocation.from_geodetic(lon * u.deg, lat * u.deg, alt * u.m, ellipsoid='WGS84')
        r, v = self.earth_fixed(lines, t)
        origin = np.array([c.to_value(u.m) for c in place.geocentric])[:, None]
        d = r - origin
        local = ITRS(CartesianRepresentation(d * u.m), obstime=t, location=place).transform_to(
            AltAz(obstime=t, location=place))
        rng = np.sqrt((d * d).sum(axis=0))
        return local.az.deg, local.alt.deg, rng, (d * v).sum(axis=0) / rng
