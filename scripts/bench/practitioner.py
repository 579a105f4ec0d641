"""The same work as scripts/bench.ts, written as a practitioner would with numpy, scipy and emcee.

Prints one JSON object a line: {"name": ..., "ms": ...}. Times are the best of a few runs.
"""

import json
import sys
import time

import numpy as np
from scipy.integrate import quad
from scipy.interpolate import RectBivariateSpline
from scipy.special import log_ndtr

FILE = json.load(open(sys.argv[1]))
NORMAL_K = {0.682689492137: 1.0, 0.68: 0.9944578832097535, 0.95: 1.959963984540054}
C = FILE["cosmology"]
CONST = FILE["meta"]["constants"]


def best_of(name, work, runs=3, per=1):
    times = []
    for _ in range(runs):
        start = time.perf_counter()
        work()
        times.append(time.perf_counter() - start)
    print(json.dumps({"name": name, "ms": 1e3 * min(times) / per}), flush=True)


def cosmology():
    h0 = C["H0"] * 1e3 / CONST["Mpc_m"]
    h = C["H0"] / 100
    crit = 3 * h0**2 / (8 * np.pi * CONST["G"])
    om = (C["ombh2"] + C["omch2"]) / h**2
    rho_g = (
        8 * np.pi**5 * (CONST["k_B_J_K"] * 2.7255) ** 4
        / (15 * (CONST["h_J_s"] * CONST["c_m_s"]) ** 3) / CONST["c_m_s"] ** 2
    )
    og = rho_g / crit
    y = 0.06 * CONST["eV_J"] / (CONST["k_B_J_K"] * 2.7255 * (4 / 11) ** (1 / 3))

    def nu(z):
        massive = (1 + (0.3173 * y / (1 + z)) ** 1.83) ** (1 / 1.83)
        return 0.22710731766 * (3.046 / 3) * (2 + massive)

    ol = 1 - om - og * (1 + nu(0.0))
    nh = (1 - C["Y"]) * (C["ombh2"] / h**2) * crit / CONST["m_H_kg"]
    fhe = C["Y"] / (3.9715 * (1 - C["Y"]))
    pre = CONST["c_m_s"] * CONST["sigma_T_m2"] * nh / h0
    efunc = lambda z: np.sqrt((om + og * (1 + nu(z)) * (1 + z)) * (1 + z) ** 3 + ol)
    return efunc, fhe, pre


EFUNC, FHE, PRE = cosmology()


def x_tanh(z, zre, dz):
    return 1 / (1 + np.exp(2 * ((1 + zre) ** 1.5 - (1 + z) ** 1.5) / (1.5 * np.sqrt(1 + zre) * dz)))


def tau_quad(zre, dz):
    def integrand(z):
        fe = (1 + FHE) * (1 - x_tanh(z, zre, dz)) + FHE * 0.5 * (1 + np.tanh((3.5 - z) / 0.5))
        return fe * (1 + z) ** 2 / EFUNC(z)

    return PRE * quad(integrand, 0, 50, points=[3.5, zre], epsrel=1e-8, limit=200)[0]


# A grid in z, Simpson: what a fast private script uses.
ZS = np.linspace(0, 50, 2001)
SIMPSON = np.ones(2001)
SIMPSON[1:-1:2] = 4
SIMPSON[2:-1:2] = 2
SIMPSON *= (ZS[1] - ZS[0]) / 3
WEIGHT = SIMPSON * PRE * (1 + ZS) ** 2 / EFUNC(ZS)
HELIUM = np.sum(WEIGHT * FHE * 0.5 * (1 + np.tanh((3.5 - ZS) / 0.5)))


def tau_simpson(zre, dz):
    return (1 + FHE) * np.sum(WEIGHT * (1 - x_tanh(ZS, zre, dz))) + HELIUM


def m2lnl_row(s, x):
    form = s.get("form", s["type"])
    k = NORMAL_K.get(s.get("CL"), 1.0)
    if form == "split_normal":
        return ((x - s["m"]) / np.where(x < s["m"], s["minus"] / k, s["plus"] / k)) ** 2
    if form == "variable_width":
        v = s["minus"] * s["plus"] / k**2 + (s["plus"] - s["minus"]) / k**2 * (x - s["m"])
        return np.where(v > 0, (x - s["m"]) ** 2 / np.where(v > 0, v, 1), np.inf)
    if form == "half_gaussian":
        if "u" in s:
            return (x / (s["u"] / k)) ** 2
        return ((1 - x) / ((1 - s["l"]) / k)) ** 2
    if form == "flat_tail":
        d = x - s["u"] if "u" in s else s["l"] - x
        return np.where(d > 0, (d / s["s"]) ** 2, 0)
    if form == "smoothed_step":
        d = x - s["u"] if "u" in s else s["l"] - x
        return -2 * log_ndtr(-d / s["s"])
    if form == "interval":
        w = (s["hi"] - s["lo"]) / 2 / k
        d = np.maximum(np.maximum(s["lo"] - x, x - s["hi"]), 0)
        return (d / w) ** 2
    if form == "tabulated":
        lp = np.log(np.array(s["p"]) / max(s["p"]))
        return -2 * np.interp(x, s["x"], lp)
    return ((x - s["m"]) / s["sigma"]) ** 2


NODES, WEIGHTS = np.polynomial.legendre.leggauss(8)


def rows_m2lnl(zre, dz, rows):
    total = 0.0
    for row in rows:
        if "z" in row:
            x = x_tanh(row["z"], zre, dz)
        else:
            half = 0.5 * (row["z_hi"] - row["z_lo"])
            z = row["z_lo"] + half * (NODES + 1)
            x = sum(0.5 * w * x_tanh(zz, zre, dz) for w, zz in zip(WEIGHTS, z))
        total = total + m2lnl_row(row["statement"], x)
    return total


ROWS = FILE["rows"]
TAU = FILE["tau_row"]
ZRE = np.linspace(5, 12, 200)
DZ = np.linspace(0.1, 3, 200)
GZ, GD = np.meshgrid(ZRE, DZ, indexing="ij")


def grid_integrating():
    tau = np.empty_like(GZ)
    for i in range(200):
        # One vectorised Simpson sum for each z_re: 200 × 2001 values at a time.
        x = x_tanh(ZS[None, :], ZRE[i], DZ[:, None])
        tau[i] = (1 + FHE) * ((1 - x) @ WEIGHT) + HELIUM
    return rows_m2lnl(GZ, GD, ROWS) + m2lnl_row(TAU, tau)


def spline():
    a = np.linspace(5, 12, 25)
    b = np.linspace(0.1, 3, 25)
    return RectBivariateSpline(a, b, [[tau_simpson(p, q) for q in b] for p in a])


SPLINE = spline()


def grid_spline():
    return rows_m2lnl(GZ, GD, ROWS) + m2lnl_row(TAU, SPLINE(ZRE, DZ))


def grid_spline_with_build():
    s = spline()
    return rows_m2lnl(GZ, GD, ROWS) + m2lnl_row(TAU, s(ZRE, DZ))


def log_prob(theta):
    zre, dz = theta
    if not (5 <= zre <= 12 and 0.1 <= dz <= 3):
        return -np.inf
    return -0.5 * float(rows_m2lnl(zre, dz, ROWS) + m2lnl_row(TAU, SPLINE.ev(zre, dz)))


def log_prob_vectorised(theta):
    zre, dz = theta[:, 0], theta[:, 1]
    inside = (zre >= 5) & (zre <= 12) & (dz >= 0.1) & (dz <= 3)
    zre, dz = np.clip(zre, 5, 12), np.clip(dz, 0.1, 3)
    value = -0.5 * (rows_m2lnl(zre, dz, ROWS) + m2lnl_row(TAU, SPLINE.ev(zre, dz)))
    return np.where(inside, value, -np.inf)


def sampler(function, vectorize):
    import emcee

    start = np.array([7.3, 0.9]) + 0.05 * np.random.default_rng(1).normal(size=(32, 2))
    emcee.EnsembleSampler(32, 2, function, vectorize=vectorize).run_mcmc(start, 2000)


best_of("tau", lambda: [tau_quad(7.67, 0.5) for _ in range(20)], per=20)
best_of("tauSimpson", lambda: [tau_simpson(7.67, 0.5) for _ in range(200)], per=200)
best_of("x", lambda: [float(x_tanh(7.0, 7.67, 0.5)) for _ in range(2000)], per=2000)
best_of("rows15", lambda: [log_prob((7.3, 0.9)) for _ in range(100)], per=100)
MANY = (ROWS * 15)[:199]
best_of(
    "rows200",
    lambda: [rows_m2lnl(7.3, 0.9, MANY) + m2lnl_row(TAU, SPLINE.ev(7.3, 0.9)) for _ in range(10)],
    per=10,
)
best_of("gridIntegrating", grid_integrating, runs=2)
best_of("gridSpline", grid_spline, runs=25)
best_of("gridSplineWithBuild", grid_spline_with_build, runs=25)
try:
    best_of("samplerVectorised", lambda: sampler(log_prob_vectorised, True), runs=3)
    best_of("samplerPlain", lambda: sampler(log_prob, False), runs=1)
except ImportError:
    print(json.dumps({"name": "emcee", "missing": True}), flush=True)
