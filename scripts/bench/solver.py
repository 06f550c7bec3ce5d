# The bench's loop by a general adaptive solver, restarted at every controller sample: how many seconds a sample.
# usage: python3 solver.py ROAD.bin SAMPLES
import json
import struct
import sys
import time

import numpy as np
from scipy.integrate import solve_ivp

data = np.fromfile(sys.argv[1])
(mass, me, half, c0, fct, fpeak, ppeak, dt, kp, ki, kaw, target, lag, _bin, v0, x0) = data[:16]
table = data[16:].reshape(-1, 4)
samples = int(sys.argv[2])


def slope(_t, y, u):
    v, s, x = y
    gs = np.interp(s, table[:, 0], table[:, 1])
    gc = np.interp(s, table[:, 0], table[:, 2])
    w = np.interp(s, table[:, 0], table[:, 3])
    force = -fct + x * (min(fpeak, ppeak / v) + fct)
    air = v + w
    return [(force - half * air * abs(air) - mass * (c0 * gc + gs)) / me, v, (u - x) / lag]


y = [v0, 0.0, x0]
integral = x0
start = time.process_time()
for k in range(samples):
    e = target - y[0]
    u = kp * e + integral
    limited = min(max(u, 0.0), 1.0)
    integral += dt * (ki * e + kaw * (limited - u))
    y = solve_ivp(slope, (0, dt), y, args=(limited,), rtol=1e-6, atol=1e-9).y[:, -1]
solver = (time.process_time() - start) / samples

# the same loop as plain text of the language: one Euler-like RK4 step a sample, no library
rows = table.tolist()
v, s, x = float(v0), 0.0, float(x0)
integral = float(x0)
cursor = 0
keep_half, keep_full = float(np.exp(-0.5 * dt / lag)), float(np.exp(-dt / lag))
P = [float(p) for p in data[:16]]
mass, me, half, c0, fct, fpeak, ppeak, dt, kp, ki, kaw, target, lag = P[:13]


def plain(v, s, x, row, nxt):
    share = (s - row[0]) / (nxt[0] - row[0])
    gs = row[1] + share * (nxt[1] - row[1])
    gc = row[2] + share * (nxt[2] - row[2])
    w = row[3] + share * (nxt[3] - row[3])
    force = -fct + x * (min(fpeak, ppeak / v) + fct)
    air = v + w
    return (force - half * air * abs(air) - mass * (c0 * gc + gs)) / me


count = samples * 20
start = time.process_time()
for k in range(count):
    e = target - v
    u = kp * e + integral
    limited = min(max(u, 0.0), 1.0)
    integral += dt * (ki * e + kaw * (limited - u))
    while s >= rows[cursor + 1][0]:
        cursor += 1
    row, nxt = rows[cursor], rows[cursor + 1]
    hx = limited + (x - limited) * keep_half
    fx = limited + (x - limited) * keep_full
    a1 = plain(v, s, x, row, nxt)
    v2 = v + 0.5 * dt * a1
    a2 = plain(v2, s + 0.5 * dt * v, hx, row, nxt)
    v3 = v + 0.5 * dt * a2
    a3 = plain(v3, s + 0.5 * dt * v2, hx, row, nxt)
    v4 = v + dt * a3
    a4 = plain(v4, s + dt * v3, fx, row, nxt)
    s += dt / 6 * (v + 2 * v2 + 2 * v3 + v4)
    v += dt / 6 * (a1 + 2 * a2 + 2 * a3 + a4)
    x = fx
loop = (time.process_time() - start) / count
print(json.dumps({"solver": solver, "loop": loop, "speed": float(y[0]), "samples": samples}))
