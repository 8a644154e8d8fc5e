"""Writes frames.csv: one state in the frames that slantwise converts, by erfa (as astropy
carries it) and, for GCRF and the true equator and equinox of date, by skyfield; and
nutation.csv: the nutation of the IAU 1980 theory by erfa.

The Earth-fixed states are drawn at random. Inertial velocities: the rotation of the Earth
is 7.292115146706979e-5 rad/s about the pole of date, before polar motion.
"""
import datetime
import random

import erfa
import numpy as np
from skyfield.framelib import itrs, true_equator_and_equinox_of_date

import common

RATE = 7.292115146706979e-5
ARCSEC = np.pi / 180 / 3600


def erfa_turns(when, dut1, x, y):
    """Returns the matrices from GCRF, and the polar motion."""
    utc = erfa.dtf2d('UTC', when.year, when.month, when.day, when.hour, when.minute, when.second + when.microsecond / 1e6)
    tt = erfa.taitt(*erfa.utctai(*utc))
    ut1 = erfa.utcut1(*utc, dut1)
    rb, rp, rbp, rn, rbpn = erfa.pn06a(*tt)[3:]
    c2i = erfa.c2i06a(*tt)
    pseudo = erfa.rz(erfa.era00(*ut1), c2i)
    pole = erfa.pom00(x * ARCSEC, y * ARCSEC, 0.0)
    teme = erfa.rz(-erfa.gmst82(*ut1), pseudo)
    return {'pseudo': pseudo, 'teme': teme, 'true_of_date': rbpn, 'mean_of_date': rbp, 'j2000': rb, 'gcrf': np.eye(3)}, pole


def main():
    rng = random.Random(20260915)
    rows = []
    for k in range(48):
        day = rng.randrange(int((datetime.date(2055, 1, 1) - datetime.date(1973, 1, 1)).days))
        when = datetime.datetime(1973, 1, 1, tzinfo=common.UTC) + datetime.timedelta(days=day, milliseconds=rng.randrange(86400000))
        dut1, x, y = [(0.0, 0.0, 0.0), (-0.4217, 0.0, 0.0), (0.3311, 0.1714, 0.4302)][k % 3]
        radius = [6.8e6, 7.2e6, 42.164e6][(k // 3) % 3]
        p = np.array([rng.gauss(0, 1) for _ in range(3)])
        p *= radius / np.linalg.norm(p)
        v = np.array([rng.gauss(0, 4000) for _ in range(3)])
        p, v = np.round(p, 3), np.round(v, 5)
        turns, pole = erfa_turns(when, dut1, x, y)
        # pom00 turns the pseudo Earth-fixed frame into the Earth-fixed one.
        pp, pv = pole.T @ p, pole.T @ v
        still = pv + RATE * np.array([-pp[1], pp[0], 0])
        to_gcrf = turns['pseudo'].T
        g, gv = to_gcrf @ pp, to_gcrf @ still
        sky = common.Skyfield(dut1, x, y)
        start = when.replace(microsecond=0)
        t = sky.times(start, [when.microsecond / 1e6])  # one element: slicing would drop its delta T
        sg = itrs.rotation_at(t)[:, :, 0].T @ p
        st = true_equator_and_equinox_of_date.rotation_at(t)[:, :, 0] @ sg
        row = [common.stamp(when.replace(microsecond=0), when.microsecond / 1e6), dut1, x, y,
               *('%.3f' % c for c in p), *('%.5f' % c for c in v),
               *('%.4f' % c for c in pp), *('%.6f' % c for c in pv)]
        for name in ['teme', 'true_of_date', 'mean_of_date', 'j2000', 'gcrf']:
            row += ['%.4f' % c for c in turns[name] @ g] + ['%.6f' % c for c in turns[name] @ gv]
        row += ['%.4f' % c for c in sg] + ['%.4f' % c for c in st]
        rows.append(row)
    header = ['utc', 'ut1_minus_utc_s', 'polar_x_arcsec', 'polar_y_arcsec']
    for name in ['fixed', 'pseudo', 'teme', 'true_of_date', 'mean_of_date', 'j2000', 'gcrf']:
        header += [f'{name}_{c}_m' for c in 'xyz'] + [f'{name}_v{c}_m_s' for c in 'xyz']
    header += [f'skyfield_gcrf_{c}_m' for c in 'xyz'] + [f'skyfield_true_of_date_{c}_m' for c in 'xyz']
    common.write('frames.csv', header, rows)
    nut = []
    for k in range(200):
        c = round(rng.uniform(-0.43, 0.57), 9)
        psi, eps = erfa.nut80(2451545.0, c * 36525)
        nut.append(['%.9f' % c, '%.7f' % (psi / ARCSEC), '%.7f' % (eps / ARCSEC)])
    common.write('nutation.csv', ['julian_centuries_tt', 'psi_arcsec', 'eps_arcsec'], nut)


main()
