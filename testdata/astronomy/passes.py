"""Writes pass_cases.csv and passes.csv: the passes of element sets over sites above a
minimum elevation, from the altitude that skyfield gives.

The library's own event finder is not used. The altitude is scanned at a fixed step,
every local maximum and minimum of the scan is refined by golden section and a fit of
the top, and each change of sign is bisected to 1e-6 s. A maximum or minimum between two samples thus
cannot hide a short pass or a short interruption.
"""
import datetime

import numpy as np

import common

DAYS = 3
# element set, site, minimum elevation in deg, step of the scan in s
CASES = [
    ('Polar low', 'High north', 0.0, 5),
    ('Polar low', 'Near the pole', 10.0, 5),
    ('Sun synchronous', 'Far south', 5.0, 5),
    ('Middle inclination', 'Middle north', 10.0, 5),
    ('Retrograde', 'Dateline west', 5.0, 5),
    ('Equatorial low', 'Equator on a mountain', -1.0, 5),
    ('High circular', 'Middle north', 5.0, 5),
    ('Verification 06251', 'Far south', 0.0, 5),
    ('Verification 29238', 'Dateline east', 0.0, 5),
    ('Highly eccentric', 'Middle north', 10.0, 10),
    ('Verification 08195', 'Dateline west', 20.0, 10),
    ('Transfer orbit', 'Equator on a mountain', 5.0, 10),
    ('Verification 23599', 'Middle south', 3.0, 5),
    ('Verification 28129', 'Middle south', 10.0, 10),
    ('Stationary', 'Equator on a mountain', 5.0, 60),
    ('Stationary', 'Middle north', 0.0, 60),
    ('Stationary', 'Dateline east', 0.0, 60),
    ('Inclined synchronous', 'Dateline west', 0.0, 60),
    ('Inclined synchronous', 'Far south', 0.0, 60),
    ('Verification 24208', 'Far south', 2.0, 60),
]
# For these the minimum elevation is set from a maximum that the scan found: number of
# the maximum by height in the window, and by how much the mask stays below it, in deg.
GRAZING = [
    ('Sun synchronous', 'Middle south', 3, 0.0005, 5),
    ('Sun synchronous', 'Middle south', 3, -0.0005, 5),
    ('Retrograde', 'Middle south', 8, 0.001, 5),
    ('Verification 29238', 'Middle north', 0, 0.0005, 5),
    ('Highly eccentric', 'Middle south', 1, 0.0005, 10),
    ('Verification 28057', 'Near the pole', 20, 0.0002, 5),
    ('Stationary', 'Equator on a mountain', 0, 0.00001, 60),
]


class Sky:
    """The altitude of one satellite over one site, in s from the window's start."""

    def __init__(self, name, place):
        lines = common.element_sets()[name]
        self.sky = common.Skyfield(*common.orientation(name))
        self.satellite = self.sky.satellite(lines)
        self.site = self.sky.site(*common.sites()[place])
        self.start = common.epoch(lines) + datetime.timedelta(hours=1)

    def look(self, seconds):
        seconds = np.atleast_1d(np.asarray(seconds, float))
        parts = [self.sky.look(self.satellite, self.site, self.sky.times(self.start, s))
                 for s in np.array_split(seconds, len(seconds) // 4000 + 1)]
        return [np.concatenate(c) for c in zip(*parts)]

    def altitude(self, seconds):
        return self.look(seconds)[1]

    def slant(self, seconds):
        return self.look(seconds)[2]


def golden(f, low, high):
    """Returns where f is greatest, all brackets at once."""
    g = (np.sqrt(5) - 1) / 2
    low, high = np.array(low, float), np.array(high, float)
    if low.size == 0:
        return low
    half = (high - low) / 4
    while (high - low).max() > 1e-2:
        a, b = high - g * (high - low), low + g * (high - low)
        up = f(a) < f(b)
        low, high = np.where(up, a, low), np.where(up, high, b)
    # The top is flat, and single values do not tell where it is: a polynomial of
    # degree 6 through 25 points over half of the bracket does.
    m = (low + high) / 2
    x = np.linspace(-1, 1, 25)
    y = f((m[:, None] + half[:, None] * x).ravel()).reshape(-1, 25)
    return np.array([c + h * summit(x, v) for c, h, v in zip(m, half, y)])


def summit(x, y):
    slope = np.polynomial.Polynomial.fit(x, y, 6).deriv()
    t = 0.0
    for _ in range(5):
        t -= slope(t) / slope.deriv()(t)
    return t


def bisect(f, low, high):
    low, high = np.array(low, float), np.array(high, float)
    if low.size == 0:
        return low
    sign = np.sign(f(low))
    while (high - low).max() > 1e-6:
        m = (low + high) / 2
        same = np.sign(f(m)) == sign
        low, high = np.where(same, m, low), np.where(same, high, m)
    return (low + high) / 2


def turning_points(f, t, y):
    """Returns the refined maxima and minima of f, scanned as y at t."""
    i = np.flatnonzero((y[1:-1] >= y[:-2]) & (y[1:-1] > y[2:])) + 1
    j = np.flatnonzero((y[1:-1] <= y[:-2]) & (y[1:-1] < y[2:])) + 1
    return golden(f, t[i - 1], t[i + 1]), golden(lambda s: -f(s), t[j - 1], t[j + 1])


class Scan:
    def __init__(self, name, place, step):
        self.sky = Sky(name, place)
        self.end = DAYS * 86400.0
        self.t = np.arange(0, self.end + step / 2, step)
        y = self.sky.altitude(self.t)
        self.tops, bottoms = turning_points(self.sky.altitude, self.t, y)
        inside = [x[(x > 0) & (x < self.end)] for x in (self.tops, bottoms)]
        self.knots = np.unique(np.concatenate([self.t, *inside]))
        self.tops = inside[0]
        self.heights = self.sky.altitude(self.knots)

    def passes(self, least):
        above = self.heights > least
        turn = np.flatnonzero(above[1:] != above[:-1])
        cross = bisect(lambda s: self.sky.altitude(s) - least, self.knots[turn], self.knots[turn + 1])
        up = above[turn + 1] if len(turn) else np.array([], bool)
        aos, los = list(cross[up]), list(cross[~up])
        if above[0]:
            aos.insert(0, 0.0)
        if above[-1]:
            los.append(self.end)
        return [self.describe(a, l) for a, l in zip(aos, los)]

    def describe(self, aos, los):
        candidates = np.array([aos, los, *self.tops[(self.tops > aos) & (self.tops < los)]])
        top = candidates[self.sky.altitude(candidates).argmax()]
        cut = {(True, True): 'both', (True, False): 'aos', (False, True): 'los'}.get(
            (aos == 0.0, los == self.end), '')
        az, el, _, _ = self.sky.look([aos, top, los])
        inner = np.concatenate([[aos], self.t[(self.t > aos) & (self.t < los)], [los]])
        rng = self.sky.slant(inner)
        k = rng.argmin()
        near = golden(lambda s: -self.sky.slant(np.clip(s, aos, los)), inner[[max(k - 1, 0)]], inner[[min(k + 1, len(inner) - 1)]]) \
            if 0 < k < len(inner) - 1 else inner[[k]]
        return (aos, top, los), cut, (*az, el[1], self.sky.slant(near)[0])


def main():
    cases = [(n, p, e, Scan(n, p, s)) for n, p, e, s in CASES]
    for name, place, rank, below, step in GRAZING:
        scan = Scan(name, place, step)
        tops = np.sort(scan.sky.altitude(scan.tops))[::-1]
        cases.append((name, place, round(tops[rank] - below, 8), scan))
    heads, rows = [], []
    for number, (name, place, least, scan) in enumerate(cases, 1):
        found = scan.passes(least)
        start = scan.sky.start
        heads.append([number, name, place, least, common.stamp(start, 0), common.stamp(start, scan.end),
                      *common.orientation(name), len(found)])
        for times, cut, values in found:
            rows.append([number, *(common.stamp(start, s, 4) for s in times), cut,
                         *('%.5f %.5f %.5f %.6f %.1f' % values).split()])
    common.write('pass_cases.csv', ['case', 'element_set', 'site', 'minimum_elevation_deg', 'window_start_utc',
                                    'window_end_utc', 'ut1_minus_utc_s', 'polar_x_arcsec', 'polar_y_arcsec',
                                    'passes'], heads)
    common.write('passes.csv', ['case', 'aos_utc', 'culmination_utc', 'los_utc', 'cut', 'aos_azimuth_deg',
                                'culmination_azimuth_deg', 'los_azimuth_deg', 'max_elevation_deg',
                                'min_range_m'], rows)


if __name__ == '__main__':
    main()
