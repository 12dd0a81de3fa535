# SPDX-License-Identifier: GPL-3.0-or-later
"""Mie efficiencies and scattering matrix at random points, and Bruggeman mixtures with random components, with mpmath; writes evaluated_mie.csv and
evaluated_bruggeman.csv. Bohren & Huffman 1983, Eqs. 4.47, 4.61, 4.62, 4.74, 4.77, 4.82, 4.88 as they stand, psi_n and chi_n upward, the logarithmic
derivative from twice as high as needed; digits to spare for what cancels. Bruggeman's polynomial is multiplied out, and the root picked with Im e > 0
(without absorption: e > 0), of which there must be one."""
import random
from pathlib import Path

from mpmath import conj, cos, im, mp, mpc, mpf, nstr, polyroots, re, sin, sqrt

POINTS, MIXTURES, DIGITS = 60, 40, 25
HERE = Path(__file__).parent


def coefficients(x, m):
    """a_n and b_n, n = 1, 2 ... until they are below 1e-40."""
    z = m * x
    terms = int(x + 14 * x ** (mpf(1) / 3) + 14)
    start = 2 * int(max(terms, abs(z))) + 60
    derivative = [mpc(0)] * (start + 1)
    for n in range(start, 0, -1):
        derivative[n - 1] = n / z - 1 / (derivative[n] + n / z)
    psi_before, psi, chi_before, chi = cos(x), sin(x), -sin(x), cos(x)
    a, b = [], []
    for n in range(1, terms + 1):
        psi_before, psi = psi, (2 * n - 1) / x * psi - psi_before
        chi_before, chi = chi, (2 * n - 1) / x * chi - chi_before
        xi_before, xi = mpc(psi_before, -chi_before), mpc(psi, -chi)
        electric, magnetic = derivative[n] / m + n / x, derivative[n] * m + n / x
        a.append((electric * psi - psi_before) / (electric * xi - xi_before))
        b.append((magnetic * psi - psi_before) / (magnetic * xi - xi_before))
    return a, b


def efficiencies(x, a, b):
    extinction = scattering = backward = asymmetry = mpf(0)
    for i, (an, bn) in enumerate(zip(a, b)):
        n = i + 1
        extinction += (2 * n + 1) * re(an + bn)
        scattering += (2 * n + 1) * (abs(an) ** 2 + abs(bn) ** 2)
        backward += (2 * n + 1) * (-1) ** n * (an - bn)
        asymmetry += mpf(2 * n + 1) / (n * (n + 1)) * re(an * conj(bn))
        if n < len(a):
            asymmetry += mpf(n * (n + 2)) / (n + 1) * re(an * conj(a[n]) + bn * conj(b[n]))
    scale = 2 / x**2
    return scale * extinction, scale * scattering, scale * (extinction - scattering), abs(backward) ** 2 / x**2, 2 * asymmetry / scattering


def matrix(x, a, b, scattering_efficiency, mu):
    pi_before, pi, s1, s2 = mpf(0), mpf(1), mpc(0), mpc(0)
    for i, (an, bn) in enumerate(zip(a, b)):
        n = i + 1
        tau = n * mu * pi - (n + 1) * pi_before
        s1 += mpf(2 * n + 1) / (n * (n + 1)) * (an * pi + bn * tau)
        s2 += mpf(2 * n + 1) / (n * (n + 1)) * (an * tau + bn * pi)
        pi_before, pi = pi, ((2 * n + 1) * mu * pi - (n + 1) * pi_before) / n
    s11, s12 = (abs(s2) ** 2 + abs(s1) ** 2) / 2, (abs(s2) ** 2 - abs(s1) ** 2) / 2
    return 4 * s11 / (x**2 * scattering_efficiency), -s12 / s11


def point(chance):
    """x, n, k, cosine: doubles. Every fourth index is near 1, every fifth is without absorption."""
    i = chance.randrange(20)
    while True:
        x = 10 ** chance.uniform(-6, 3.48)
        n = 1 + 10 ** chance.uniform(-4, -1) if i % 4 == 0 else 10 ** chance.uniform(-1, 1.3)
        k = 0.0 if i % 5 == 0 else 10 ** chance.uniform(-10, 1.5)
        if x * abs(complex(n, k)) < 6000:
            return x, n, k, chance.uniform(-1, 1)


def mie(chance):
    lines = ["# Efficiencies of a sphere by evaluate_optics.py; condition_backscatter is |d ln Qback/d ln x|.",
             "x,n,k,Qext,Qsca,Qabs,Qback,asymmetry,condition_backscatter,cosine,phase,polarisation"]
    for _ in range(POINTS):
        x, n, k, mu = point(chance)
        mp.dps = 260 if x < 1 else 100
        a, b = coefficients(mpf(x), mpc(n, k))
        q = list(efficiencies(mpf(x), a, b))
        q[2] = q[2] if k > 0 else mpf(0)
        step = mpf(10) ** -30
        moved = efficiencies(mpf(x) * (1 + step), *coefficients(mpf(x) * (1 + step), mpc(n, k)))
        condition = abs(moved[3] / q[3] - 1) / step
        values = [*q, condition, mu, *matrix(mpf(x), a, b, q[1], mpf(mu))]
        lines.append(",".join([repr(x), repr(n), repr(k)] + [nstr(v, DIGITS) if isinstance(v, mpf) else repr(v) for v in values]))
    (HERE / "evaluated_mie.csv").write_text("\n".join(lines) + "\n")


def times(p, q):
    result = [mpc(0)] * (len(p) + len(q) - 1)
    for i, u in enumerate(p):
        for j, v in enumerate(q):
            result[i + j] += u * v
    return result


def bruggeman(components):
    """The root of sum f_i (e_i - e) prod_j!=i (e_j + 2 e) = 0."""
    total = [mpc(0)] * (len(components) + 1)
    for i, (f, e) in enumerate(components):
        part = [-f, f * e]
        for j, (_, other) in enumerate(components):
            if j != i:
                part = times(part, [mpc(2), other])
        total = [t + p for t, p in zip(total, part)]
    roots = polyroots(total, maxsteps=2000, extraprec=600)
    absorbing = any(im(e) > 0 for _, e in components)
    good = [r for r in roots if (im(r) > mpf(10) ** -60 if absorbing else re(r) > 0)]
    assert len(good) == 1, (components, roots)
    return good[0]


def mixture(chance):
    count = chance.randrange(2, 6)
    weights = [10 ** chance.uniform(-2, 0) for _ in range(count)]
    fractions = [w / sum(weights) for w in weights]
    kind = chance.randrange(4)
    components = []
    for f in fractions:
        n = 10 ** chance.uniform(-0.5, 0.8)
        k = 0.0 if kind == 0 else 10 ** chance.uniform(-9, 0)
        if kind == 2 and chance.random() < 0.4:  # a metal
            n, k = 10 ** chance.uniform(-1, 2.3), 10 ** chance.uniform(0, 2.3)
        components.append((f, n, k))
    return components


def mixtures(chance):
    mp.dps = 80
    lines = ["# Bruggeman mixtures by evaluate_optics.py; five components, fraction n k each, those not there with fraction 0.",
             "n,k," + ",".join(f"f{i},n{i},k{i}" for i in range(1, 6))]
    for _ in range(MIXTURES):
        given = mixture(chance)
        total = sum(mpf(f) for f, _, _ in given)
        root = sqrt(bruggeman([(mpf(f) / total, mpc(n, k) ** 2) for f, n, k in given]))
        given += [(0.0, 1.0, 0.0)] * (5 - len(given))
        lines.append(",".join([nstr(re(root), DIGITS), nstr(im(root), DIGITS)] + [repr(v) for c in given for v in c]))
    (HERE / "evaluated_bruggeman.csv").write_text("\n".join(lines) + "\n")


mie(random.Random(4))
mixtures(random.Random(5))
