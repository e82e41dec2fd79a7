"""When the bubbles of scenarios/raft-on-pool.froth.json vanish, by the classical Runge-Kutta method in steps of 0.1 s over s = R^2
and the pool's amount. Written apart from the program; scenarios.test.ts holds its last line. Needs numpy; takes half a minute.

    python3 tests/scenarios/raft-reference.py
"""
import json
import pathlib

import numpy as np

SCENARIO = pathlib.Path(__file__).parents[2] / "scenarios" / "raft-on-pool.froth.json"
RT = 8.314462618 * 298.15
AMBIENT = 101325.0
TENSION = 0.045
DIFFUSIVITY, SOLUBILITY = 2.1e-9, 7.8e-6  # of air, core/substances/gases.ts
FILM, SHARE = 1e-6, 0.3
POOL = 50e-6  # m^3
VANISHED = 1e-12  # m^2
STEP, END = 0.1, 28800

bubbles = [node for node in json.loads(SCENARIO.read_text())["nodes"] if node["kind"] == "bubble"]
radii = np.array([float(node["radius"].removesuffix(" um")) for node in bubbles]) * 1e-6


def rates(y):
    s, pool = y[:-1], y[-1] / (SOLUBILITY * POOL)
    lives = s > VANISHED
    R = np.sqrt(np.maximum(s, VANISHED))
    over = 2 * TENSION / R
    up = DIFFUSIVITY * SOLUBILITY / FILM * SHARE * np.pi * R**2 * over
    down = 4 * np.pi * R * DIFFUSIVITY * SOLUBILITY * (AMBIENT + over - pool)
    # n = (P + 2 gamma/R) 4/3 pi R^3/(R_gas T), so dn/dR = 4 pi R^2 (P + 4 gamma/(3 R))/(R_gas T)
    slope = 4 * np.pi * R**2 * (AMBIENT + 2 * over / 3) / RT
    return np.append(np.where(lives, -2 * R * (up + down) / slope, 0), np.sum(np.where(lives, down, 0)))


y = np.append(radii**2, SOLUBILITY * POOL * AMBIENT)
vanished = []
for count in range(int(END / STEP)):
    k1 = rates(y)
    k2 = rates(y + STEP / 2 * k1)
    k3 = rates(y + STEP / 2 * k2)
    k4 = rates(y + STEP * k3)
    after = y + STEP / 6 * (k1 + 2 * k2 + 2 * k3 + k4)
    for i in np.nonzero((after[:-1] <= VANISHED) & (y[:-1] > VANISHED))[0]:
        part = (y[i] - VANISHED) / (y[i] - after[i])
        vanished.append((STEP * (count + part), bubbles[i]["id"]))
    y = after

vanished.sort()
print(len(vanished), [(round(float(time), 3), name) for time, name in (vanished[0], vanished[119], vanished[-1])])
