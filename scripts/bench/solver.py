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

# The same loop as reference.c, energies and record by bin included, as plain text of the language.
rows = table.tolist()
mass, me, half, c0, fct, fpeak, ppeak, dt, kp, ki, kaw, target, lag, width, v0, x0 = (float(p) for p in data[:16])
keep_half, keep_full = float(np.exp(-0.5 * dt / lag)), float(np.exp(-dt / lag))
state = [v0, 0.0, 0.0, 0.0, 0.0, 0.0]
x = integral = x0
bins = [[0.0] * 8 for _ in range(int(rows[-1][0] / width) + 2)]
cursor = 0


def derivative(y, x, row, ahead):
    share = (y[1] - row[0]) / (ahead[0] - row[0])
    v = y[0]
    force = -fct + x * (min(fpeak, ppeak / v) + fct)
    air = v + row[3] + share * (ahead[3] - row[3])
    aero = half * air * abs(air)
    roll = mass * c0 * (row[2] + share * (ahead[2] - row[2]))
    climb = mass * (row[1] + share * (ahead[1] - row[1]))
    return [(force - aero - roll - climb) / me, v, force * v, aero * v, roll * v, climb * v]


count = samples * 20
start = time.process_time()
for k in range(count):
    v = state[0]
    e = target - v
    u = kp * e + integral
    limited = min(max(u, 0.0), 1.0)
    integral += dt * (ki * e + kaw * (limited - u))
    while state[1] >= rows[cursor + 1][0]:
        cursor += 1
    row, ahead = rows[cursor], rows[cursor + 1]
    b = bins[int(state[1] / width)]
    b[0] += dt
    b[1] += v * dt
    b[2] += e * dt
    b[3] += e * e * dt
    b[4] = max(b[4], e)
    b[5] = min(b[5], e)
    b[6] += x * dt
    b[7] += dt if limited != u else 0.0
    x_half = limited + (x - limited) * keep_half
    x_full = limited + (x - limited) * keep_full
    k1 = derivative(state, x, row, ahead)
    k2 = derivative([y + 0.5 * dt * d for y, d in zip(state, k1)], x_half, row, ahead)
    k3 = derivative([y + 0.5 * dt * d for y, d in zip(state, k2)], x_half, row, ahead)
    k4 = derivative([y + dt * d for y, d in zip(state, k3)], x_full, row, ahead)
    state = [y + dt / 6 * (p + 2 * q + 2 * r + s) for y, p, q, r, s in zip(state, k1, k2, k3, k4)]
    x = x_full
loop = (time.process_time() - start) / count
print(json.dumps({"solver": solver, "loop": loop, "speed": state[0], "samples": samples}))
