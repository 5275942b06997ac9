"""Range of k on a clear calm night, for the guide in core/src/air/guide.rs.

Monin-Obukhov similarity, stable side, phi_h = 1 + 5 z/L capped at 6 (Dyer 1974; Webb 1970, from memory), with heat flux
H ~ U(-40, -5) W/m2 and friction velocity u* ~ U(0.05, 0.25) m/s, k = 503 P/T^2 (0.0343 + dT/dz) (Hirt et al. 2010).
Model output, not published data. Prints the 2.5 % and 97.5 % points of k by height of the line. Needs numpy.
"""
import numpy as np

rng = np.random.default_rng(20261201)
N = 2_000_000
P, T, KAPPA, CP, G, RD = 1013.25, 283.15, 0.4, 1005.0, 9.81, 287.05
rho = P * 100 / (RD * T)
H, u = rng.uniform(-40, -5, N), rng.uniform(0.05, 0.25, N)
L = -(u**3) * T * rho * CP / (KAPPA * G * H)
theta = -H / (rho * CP * u)
for z in (0.5, 1, 1.75, 3, 5, 10, 20, 30, 50, 100):
    dTdz = theta / (KAPPA * z) * np.minimum(1 + 5 * z / L, 6) - G / CP
    k = 503 * P / T**2 * (0.0343 + dTdz)
    print(z, *np.percentile(k, [2.5, 50, 97.5]).round(2))
