"""Writes look_angles.csv: azimuth, elevation, range and range rate by skyfield and by
astropy, and earth_fixed.csv: Earth-fixed position and velocity by astropy.

Half of the instants of a pair are in view of the site wherever the orbit allows it.
"""
import random

import numpy as np

import common

SETS = ['Polar low', 'Sun synchronous', 'Middle inclination', 'Retrograde', 'Verification 08195',
        'Verification 23599', 'Verification 28057', 'Verification 28626', 'Verification 28129']
SITES = ['High north', 'Near the pole', 'Equator on a mountain', 'Dateline east', 'Dateline west', 'Far south']
SPAN_S = 4 * 86400
PER_PAIR = 8
STATES_PER_SET = 12


def instants(look, rng):
    candidates = np.array(sorted(rng.randrange(SPAN_S * 1000) for _ in range(400))) / 1000
    elevation = look(candidates)[1]
    high = list(candidates[elevation > 0])
    seen = rng.sample(high, min(len(high), PER_PAIR // 2))
    rest = [c for c in candidates if c not in seen]
    return np.array(sorted(seen + rng.sample(rest, PER_PAIR - len(seen))))


def main():
    rng = random.Random(20260310)
    sets, places = common.element_sets(), common.sites()
    looks, states = [], []
    for name in SETS:
        lines, earth = sets[name], common.orientation(name)
        sky, ast = common.Skyfield(*earth), common.Astropy(*earth)
        start = common.epoch(lines)
        for place in SITES:
            def look(s):
                return sky.look(sky.satellite(lines), sky.site(*places[place]), sky.times(start, s))
            seconds = instants(look, rng)
            one = look(seconds)
            two = ast.look(lines, places[place], ast.times(start, seconds))
            for i, s in enumerate(seconds):
                looks.append([name, place, common.stamp(start, s), *earth,
                              *('%.7f %.7f %.3f %.5f' % tuple(x[i] for x in one)).split(),
                              *('%.7f %.7f %.3f %.5f' % tuple(x[i] for x in two)).split()])
        seconds = np.array(sorted(rng.randrange(SPAN_S * 1000) for _ in range(STATES_PER_SET))) / 1000
        r, v = ast.earth_fixed(lines, ast.times(start, seconds))
        for i, s in enumerate(seconds):
            states.append([name, common.stamp(start, s), *earth,
                           *('%.3f' % x for x in r[:, i]), *('%.5f' % x for x in v[:, i])])
    earth = ['ut1_minus_utc_s', 'polar_x_arcsec', 'polar_y_arcsec']
    quantities = ['azimuth_deg', 'elevation_deg', 'range_m', 'range_rate_m_s']
    common.write('look_angles.csv', ['element_set', 'site', 'utc', *earth,
                                     *('skyfield_' + q for q in quantities),
                                     *('astropy_' + q for q in quantities)], looks)
    common.write('earth_fixed.csv', ['element_set', 'utc', *earth, 'x_m', 'y_m', 'z_m',
                                     'vx_m_s', 'vy_m_s', 'vz_m_s'], states)


if __name__ == '__main__':
    main()
