"""Writes sun_moon.csv: Earth-fixed positions of the Sun and the Moon's centres as seen
from the Earth's centre (light time and aberration in them), by astropy.

UT1-UTC is set on each time by hand and the pole is the reference pole, so that no table
of Earth orientation takes part. Run in this folder with astropy 5.2.1 and erfa.
"""
import csv

import numpy as np
from astropy import units as u
from astropy.coordinates import CIRS, get_body, get_sun
from astropy.time import Time
from astropy.utils import iers
import erfa

iers.conf.auto_download = False
iers.conf.iers_degraded_accuracy = 'ignore'


def earth_fixed(body, t, ut1):
    """Turns a position by the Earth rotation angle alone: from CIRS, polar motion zero."""
    c = body.transform_to(CIRS(obstime=t)).cartesian.xyz.to_value(u.km)
    era = erfa.era00(t.utc.jd1, t.utc.jd2 + ut1 / 86400)
    x, y, z = c
    return np.cos(era) * x + np.sin(era) * y, np.cos(era) * y - np.sin(era) * x, z


def main():
    rng = np.random.default_rng(20260310)
    with open('sun_moon.csv', 'w', newline='') as f:
        w = csv.writer(f, lineterminator='\n')
        w.writerow(['utc', 'ut1_minus_utc_s', 'sun_x_km', 'sun_y_km', 'sun_z_km', 'moon_x_km', 'moon_y_km', 'moon_z_km'])
        for year in np.linspace(1975, 2050, 121):
            ut1 = float(np.round(rng.uniform(-0.5, 0.5), 3))
            text = Time(float(year) + rng.uniform(0, 0.6), format='decimalyear', scale='utc').isot
            t = Time(text, scale='utc')
            t.delta_ut1_utc = ut1
            sun = earth_fixed(get_sun(t), t, ut1)
            moon = earth_fixed(get_body('moon', t, ephemeris='builtin'), t, ut1)
            w.writerow([text + 'Z', ut1] + [f'{v:.0f}' for v in sun] + [f'{v:.1f}' for v in moon])


if __name__ == '__main__':
    main()
