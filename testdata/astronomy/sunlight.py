"""Writes sunlight.csv: the instants at which a spacecraft's light changes between sun,
penumbra and umbra, from astropy's Sun and straight rays past the WGS-84 ellipsoid.

Rays go from the spacecraft to 720 points of the Sun's rim. With z stretched by
1/(1 - f) the ellipsoid is a sphere and the rays stay straight: sun when all of them
pass it, umbra when none does. No air.
"""
import numpy as np
from astropy import units as u
from astropy.coordinates import ITRS, get_sun

import common

SETS = ['Sun synchronous', 'Middle inclination', 'Retrograde', 'Highly eccentric', 'Transfer orbit', 'Stationary']
SPAN_S, STEP_S = 86400.0, 10.0
SUN_RADIUS = 695700e3  # nominal solar radius, IAU 2015 resolution B3
EQUATOR, FLATTENING = 6378137.0, 1 / 298.257223563
RIM = np.linspace(0, 2 * np.pi, 720, endpoint=False)


class Light:
    def __init__(self, name):
        self.ast = common.Astropy(*common.orientation(name))
        self.lines = common.element_sets()[name]
        self.start = common.epoch(self.lines)

    def clearances(self, seconds):
        """Returns the least and the greatest clearance of the rays, in Earth radii."""
        t = self.ast.times(self.start, seconds)
        craft = self.ast.earth_fixed(self.lines, t)[0].T
        sun = get_sun(t).transform_to(ITRS(obstime=t)).cartesian.xyz.to_value(u.m).T
        out = np.array([self.rays(p, s) for p, s in zip(craft, sun)])
        return out[:, 0], out[:, 1]

    @staticmethod
    def rays(p, s):
        axis = (s - p) / np.linalg.norm(s - p)
        a = np.cross(axis, [0.0, 0.0, 1.0])
        a /= np.linalg.norm(a)
        b = np.cross(axis, a)
        rim = s + SUN_RADIUS * (np.cos(RIM)[:, None] * a + np.sin(RIM)[:, None] * b)
        scale = np.array([1, 1, 1 / (1 - FLATTENING)]) / EQUATOR
        p, d = p * scale, (rim - p) * scale
        d /= np.linalg.norm(d, axis=1)[:, None]
        along = -d @ p
        near = p + np.maximum(along, 0)[:, None] * d
        gap = np.linalg.norm(near, axis=1) - 1
        return gap.min(), gap.max()


def crossings(light, which):
    t = np.arange(0, SPAN_S + STEP_S, STEP_S)
    y = light.clearances(t)[which]
    i = np.flatnonzero((y[1:] > 0) != (y[:-1] > 0))
    low, high, up = t[i], t[i + 1], y[i + 1] > 0
    while len(low) and (high - low).max() > 1e-5:
        m = (low + high) / 2
        same = (light.clearances(m)[which] > 0) != up
        low, high = np.where(same, m, low), np.where(same, high, m)
    names = ('sun', 'penumbra') if which == 0 else ('penumbra', 'umbra')
    return [(s, *(names[::-1] if r else names)) for s, r in zip((low + high) / 2, up)]


def main():
    rows = []
    for name in SETS:
        light = Light(name)
        found = sorted(crossings(light, 0) + crossings(light, 1))
        rows += [[name, common.stamp(light.start, s, 4), *common.orientation(name), before, after]
                 for s, before, after in found]
    common.write('sunlight.csv', ['element_set', 'utc', 'ut1_minus_utc_s', 'polar_x_arcsec', 'polar_y_arcsec',
                                  'before', 'after'], rows)


if __name__ == '__main__':
    main()
