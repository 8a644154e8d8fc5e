"""Writes integrated_orbit.csv: two days of an invented low orbit by numerical integration.

Not SGP4 and none of its series: Newton's equations with the Earth's field to J2, J3, J4 and
the ellipticity of the equator (C22, S22), and drag in an exponential atmosphere that turns
with the Earth, integrated by Runge and Kutta's method of order 4 in steps of 5 s (half the
step moves the end by less than a metre; the script says by how much). The figures of the
field (of the size of EGM96's) and of the air are from memory: the file asks how well SGP4
follows an orbit that is not its own, not where a spacecraft was.
"""
import csv
import datetime as dt

import numpy as np

MU, RE = 398600.4418, 6378.1363  # km³/s², km
J2, J3, J4 = 1.08262668e-3, -2.53265649e-6, -1.61962159e-6
C22, S22 = 1.57446037e-6, -0.90386794e-6
SPIN = 7.292115e-5  # rad/s
EPOCH = dt.datetime(2026, 9, 14)
BALLISTIC = 0.022  # drag coefficient times area over mass, m²/kg
RHO, H0, SCALE = 6.967e-13, 500.0, 63.8  # kg/m³ at km, km


def gmst(seconds):
    days = (EPOCH - dt.datetime(2000, 1, 1, 12)).total_seconds() / 86400
    c = (days + seconds / 86400) / 36525
    s = seconds + 24110.54841 + c * (8640184.812866 + c * (0.093104 - c * 6.2e-6))
    return np.radians(s / 240 % 360)


def zonal(p):
    x, y, z = p
    r = np.linalg.norm(p)
    s = z / r
    a = -MU * p / r**3
    k = MU / r**2
    # Gradient of -mu/r J_n (RE/r)^n P_n(sin latitude): radial and polar parts.
    for n, j, pn, dpn in ((2, J2, (3 * s**2 - 1) / 2, 3 * s), (3, J3, (5 * s**3 - 3 * s) / 2, (15 * s**2 - 3) / 2),
                          (4, J4, (35 * s**4 - 30 * s**2 + 3) / 8, (140 * s**3 - 60 * s) / 8)):
        f = k * j * (RE / r) ** n
        a = a + f * (((n + 1) * pn + s * dpn) * p / r - dpn * np.array([0, 0, 1]))
    return a


def equator(p, t):
    c, s = np.cos(gmst(t)), np.sin(gmst(t))
    x, y, z = c * p[0] + s * p[1], c * p[1] - s * p[0], p[2]
    r2 = x * x + y * y + z * z
    k = 3 * MU * RE**2 / r2**2.5
    v = C22 * (x * x - y * y) + 2 * S22 * x * y  # potential k v
    a = k * np.array([2 * (C22 * x + S22 * y), 2 * (S22 * x - C22 * y), 0]) - 5 * k * v / r2 * np.array([x, y, z])
    return np.array([c * a[0] - s * a[1], s * a[0] + c * a[1], a[2]])


def drag(p, v):
    wind = v - np.array([-SPIN * p[1], SPIN * p[0], 0])
    rho = RHO * np.exp(-(np.linalg.norm(p) - RE - H0) / SCALE)
    return -0.5 * rho * BALLISTIC * 1000 * np.linalg.norm(wind) * wind


def motion(t, s):
    p, v = s[:3], s[3:]
    return np.concatenate([v, zonal(p) + equator(p, t) + drag(p, v)])


def fly(s, h):
    t = 0.0
    while True:
        if t % 300 == 0:
            yield t, s
        if t >= 2 * 86400:
            return
        a = motion(t, s)
        b = motion(t + h / 2, s + h / 2 * a)
        c = motion(t + h / 2, s + h / 2 * b)
        d = motion(t + h, s + h * c)
        s, t = s + h / 6 * (a + 2 * b + 2 * c + d), t + h


def main():
    radius, incl = 6878.0, np.radians(97.45)
    speed = np.sqrt(MU / radius) * 1.0008
    start = [radius * np.cos(0.35), radius * np.sin(0.35), 0,
             -speed * np.sin(0.35) * np.cos(incl), speed * np.cos(0.35) * np.cos(incl), speed * np.sin(incl)]
    rows = list(fly(np.array(start), 5.0))
    finer = list(fly(np.array(start), 2.5))
    print(f"half the step moves the end by {1000 * np.linalg.norm(rows[-1][1][:3] - finer[-1][1][:3]):.3f} m")
    with open("integrated_orbit.csv", "w", newline="") as f:
        f.write("# an invented low orbit, integrated numerically: integrated_orbit.py\n")
        out = csv.writer(f, lineterminator="\n")
        out.writerow("utc frame x_km y_km z_km vx_km_s vy_km_s vz_km_s".split())
        for t, s in rows:
            at = EPOCH + dt.timedelta(seconds=float(t))
            out.writerow([at.strftime("%Y-%m-%dT%H:%M:%SZ"), "teme"] + [f"{x:.4f}" for x in s[:3]] + [f"{x:.7f}" for x in s[3:]])


main()
