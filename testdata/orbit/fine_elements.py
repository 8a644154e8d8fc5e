"""Writes fine_elements.csv: states by sgp4 2.15 (in pure Python, WGS-72) of invented
element sets with more digits than the two-line format holds, some with epochs at the
edges of a second, a day, a year and of the format's century. Rows: elements in deg,
rev/day and 1/Earth radii, then whole seconds after the epoch and TEME km, km/s.
"""
import csv
import datetime as dt
import math

import numpy as np
from sgp4.api import WGS72, Satrec

EPOCHS = ['1957-01-01T00:00:00.250', '1957-10-05T11:59:59.999', '1987-12-31T23:59:59.700', '2000-02-29T12:00:00.000',
          '2024-12-31T23:59:59.999', '2026-03-10T04:05:06.789', '2026-06-30T23:59:59.501', '2056-12-31T23:59:58.900']
ORBITS = [(15.55, 0.0004, 51.6, 2e-4), (14.9, 0.02, 98, 1e-4), (16.2, 0.003, 65, 1e-4), (13, 0.1, 30, -3e-5),
          (16.35, 0.0013, 70, 1e-4), (2.006, 0.69, 63.4, 1e-4), (2.26, 0.73, 7, 3e-4), (1.0027, 0.0003, 0.03, 0.0)]


def main():
    rng = np.random.default_rng(7)
    with open('fine_elements.csv', 'w', newline='') as f:
        w = csv.writer(f, lineterminator='\n')
        w.writerow(['epoch_utc', 'mean_motion_rev_day', 'eccentricity', 'inclination_deg', 'raan_deg', 'arg_perigee_deg',
                    'mean_anomaly_deg', 'bstar', 'after_s', 'x_km', 'y_km', 'z_km', 'vx_km_s', 'vy_km_s', 'vz_km_s'])
        for i, (motion, ecc, incl, drag) in enumerate(ORBITS * 2):
            epoch = EPOCHS[(i + i // 8) % 8]
            el = [motion + rng.uniform(0, 1e-3), ecc + rng.uniform(0, 1e-5), incl + rng.uniform(0, 1e-2),
                  rng.uniform(0, 360), rng.uniform(0, 360), rng.uniform(0, 360), drag * rng.uniform(1, 1.1)]
            el = [float(f'{v:.12g}') for v in el]
            days = (dt.datetime.fromisoformat(epoch) - dt.datetime(1949, 12, 31)) / dt.timedelta(days=1)
            rad = math.radians
            s = Satrec()
            s.sgp4init(WGS72, 'i', 1, days, el[6], 0.0, 0.0, el[1], rad(el[4]), rad(el[2]), rad(el[5]),
                       el[0] * 2 * math.pi / 1440, rad(el[3]))
            for after in (-86399, 0, 7, 12345, 259201):
                e, r, v = s.sgp4_tsince(after / 60)
                if e == 0:
                    w.writerow([epoch + 'Z', *el, after] + [f'{x:.7f}' for x in r] + [f'{x:.9f}' for x in v])


if __name__ == '__main__':
    main()
