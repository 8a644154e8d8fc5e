"""Times a pass list of 10 satellites over 5 stations for 7 days with general-purpose
libraries, one core, in processor time: a yardstick for slantwise's own benchmark, part of no test.

1. sgp4's bulk propagator (SatrecArray) with numpy: states every 60 s, the elevation of
   each station, and the crossings bisected on cubic interpolation;
2. the same, each bisection step propagated afresh;
3. skyfield: altitude every 60 s, crossings bisected, and skyfield's own find_events.

Where sgp4 came without its compiled part it says so: the first line of the output. The
propagation's share is then the interpreter's, and the rest of run 1 is numpy's.

Run with the thread counts of numpy's libraries set to 1:
OMP_NUM_THREADS=1 OPENBLAS_NUM_THREADS=1 /usr/bin/python3 timing.py
"""
import datetime
import time

import numpy as np
from sgp4.api import WGS72, Satrec, SatrecArray, accelerated
from skyfield.api import EarthSatellite, load, wgs84

DAYS, STEP, LEAST = 7, 60.0, np.radians(5.0)
START = datetime.datetime(2026, 3, 10, tzinfo=datetime.timezone.utc)
JD = 2461109.5  # of START
SITES = [(69.7, 18.9, 50), (47.3, 11.4, 610), (0.1, -78.4, 2900), (-34.6, -58.4, 25), (-72.0, 2.5, 1300)]


def satellites():
    out = []
    for k in range(10):
        s = Satrec()
        s.sgp4init(WGS72, 'i', 99200 + k, JD - 2433281.5, 3e-5, 0.0, 0.0, 0.001 + 0.0005 * k,
                   np.radians(60 * k % 360), np.radians(97.5 - 4.5 * k), np.radians(36 * k),
                   (15.3 - 0.09 * k) * 2 * np.pi / 1440, np.radians(25 * k))
        out.append(s)
    return out


def sidereal(jd, fraction):
    t = (jd - 2451545.0 + fraction) / 36525.0
    seconds = 67310.54841 + (8640184.812866 + (0.093104 - 6.2e-6 * t) * t) * t
    return ((jd % 1.0 + fraction + seconds / 86400 % 1.0) % 1.0) * 2 * np.pi


def earth_fixed(r, v, seconds):
    g = sidereal(JD, seconds / 86400)
    c, s = np.cos(g), np.sin(g)
    w = 7.292115e-5
    x, y = c * r[..., 0] + s * r[..., 1], -s * r[..., 0] + c * r[..., 1]
    p = np.stack([x, y, r[..., 2]], -1)
    q = np.stack([c * v[..., 0] + s * v[..., 1] + w * y, -s * v[..., 0] + c * v[..., 1] - w * x, v[..., 2]], -1)
    return p, q


def frames():
    a, f = 6378.137, 1 / 298.257223563
    e2 = f * (2 - f)
    for lat, lon, alt in SITES:
        lat, lon = np.radians(lat), np.radians(lon)
        n = a / np.sqrt(1 - e2 * np.sin(lat)**2)
        up = np.array([np.cos(lat) * np.cos(lon), np.cos(lat) * np.sin(lon), np.sin(lat)])
        yield up, up * (n + alt / 1000) - np.array([0, 0, n * e2 * np.sin(lat)])


def sine(p, up, origin):
    d = p - origin
    return (d @ up) / np.sqrt((d * d).sum(-1))


def states():
    t = np.arange(0, DAYS * 86400 + STEP, STEP)
    _, r, v = SatrecArray(satellites()).sgp4(np.full(len(t), JD), t / 86400)
    return t, r, v


def propagate():
    states()
    return 0


def bulk(afresh):
    sats = satellites()
    t, r, v = states()
    p, q = earth_fixed(r, v, t)
    total = 0
    for k, sat in enumerate(sats):
        for up, origin in frames():
            total += len(crossings(sat, p[k], q[k], t, up, origin, afresh))
    return total // 2


def crossings(sat, p, q, t, up, origin, afresh):
    y = sine(p, up, origin) - np.sin(LEAST)
    i = np.flatnonzero((y[1:] > 0) != (y[:-1] > 0))
    # A maximum between two samples under the mask is looked at once, by parabola.
    j = np.flatnonzero((y[1:-1] < 0) & (y[1:-1] > y[:-2]) & (y[1:-1] >= y[2:]) & (y[1:-1] > -0.02)) + 1

    def value(k, s):
        if afresh:
            _, r, v = sat.sgp4_array(np.full(len(s), JD), s / 86400)
            return sine(earth_fixed(r, v, s)[0], up, origin) - np.sin(LEAST)
        u = ((s - t[k]) / STEP)[:, None]
        h = (p[k] * (1 + 2 * u) * (1 - u)**2 + p[k + 1] * u * u * (3 - 2 * u)
             + STEP * (q[k] * u * (1 - u)**2 + q[k + 1] * u * u * (u - 1)))
        return sine(h, up, origin) - np.sin(LEAST)

    d = (y[j - 1] - y[j + 1]) / 2 / (y[j - 1] - 2 * y[j] + y[j + 1])
    top = t[j] + d * STEP
    knot = np.where(d < 0, j - 1, j)
    hidden = value(knot, top) > 0 if len(j) else np.array([], bool)
    low = np.concatenate([t[i], t[knot[hidden]], top[hidden]])
    high = np.concatenate([t[i + 1], top[hidden], t[knot[hidden] + 1]])
    k = np.concatenate([i, knot[hidden], knot[hidden]])
    if not len(k):
        return low
    sign = value(k, low) > 0
    for _ in range(16):  # 60 s / 2^16 < 1 ms
        m = (low + high) / 2
        same = (value(k, m) > 0) == sign
        low, high = np.where(same, m, low), np.where(same, high, m)
    return low


def sky(finder):
    ts = load.timescale(builtin=True)
    t0, t1 = ts.from_datetime(START), ts.from_datetime(START + datetime.timedelta(days=DAYS))
    grid = ts.utc(2026, 3, 10, 0, 0, np.arange(0, DAYS * 86400 + STEP, STEP))
    places = [wgs84.latlon(a, b, elevation_m=c) for a, b, c in SITES]
    total = 0
    for s in satellites():
        satellite = EarthSatellite.from_satrec(s, ts)
        for place in places:
            if finder:
                total += (satellite.find_events(place, t0, t1, np.degrees(LEAST))[1] == 1).sum()
                continue
            y = (satellite - place).at(grid).altaz()[0].radians - LEAST
            i = np.flatnonzero((y[1:] > 0) != (y[:-1] > 0))
            low, high = i * STEP, (i + 1) * STEP
            sign = y[i] > 0
            for _ in range(16):
                m = (low + high) / 2
                same = ((satellite - place).at(ts.utc(2026, 3, 10, 0, 0, m)).altaz()[0].radians > LEAST) == sign
                low, high = np.where(same, m, low), np.where(same, high, m)
            total += len(i) // 2
    return total


def main():
    print('sgp4 compiled:', accelerated)
    runs = [('bulk propagator alone', propagate, 5),
            ('bulk propagator, interpolated bisection', lambda: bulk(False), 5),
            ('bulk propagator, bisection afresh', lambda: bulk(True), 5),
            ('skyfield altitude, bisection', lambda: sky(False), 1),
            ('skyfield find_events', lambda: sky(True), 1)]
    for name, f, repeats in runs:
        best, count = float('inf'), 0
        for _ in range(repeats):
            start = time.process_time()
            count = f()
            best = min(best, time.process_time() - start)
        print(f'{name:42s} {best * 1000:9.1f} ms  {count} passes')


if __name__ == '__main__':
    main()
