"""Reference trajectories for tests/core/run: whole scenarios by SciPy at tight tolerance, written from the laws alone.

Writes trajectories.json beside this file. Needs Python 3 with scipy (made with 1.17). Run: python3 trajectories.py
It shares nothing with the program: the unknowns here are sizes, mole numbers of all gases but the first, and the pressures of
cavities and pools above the outer one, so that no root is sought and no difference of near-equal pressures is taken.
Each trajectory is computed by two methods; the script fails where they differ by more than what it states.
"""
import json
import math
import pathlib

import numpy as np
from scipy.integrate import solve_ivp
from scipy.optimize import brentq

R_GAS = 8.314462618


class Model:
    def __init__(self, doc):
        self.doc = doc
        self.RT = R_GAS * doc["temperature"]
        self.P = doc["ambient"]["pressure"]
        self.gases = list(doc["gases"])
        self.S = len(self.gases)
        self.nodes = doc["nodes"]
        self.place = {n["id"]: i for i, n in enumerate(self.nodes)}
        self.alive = [True] * len(self.nodes)
        self.unknowns = []  # (node, what)
        for i, n in enumerate(self.nodes):
            if n["kind"] == "bubble":
                self.unknowns += [(i, "size")] + [(i, k) for k in range(1, self.S)]
                n["a"] = n.get("mouth", 0) / 2
                n["area0"] = self.area(n, self.size0(n))
            elif n["kind"] in ("cavity", "pool"):
                self.unknowns += [(i, "excess")] + [(i, k) for k in range(1, self.S)]
        self.at = {u: q for q, u in enumerate(self.unknowns)}

    # -- laws of one bubble
    def size0(self, n):
        return n["radius"] if n["a"] == 0 else n["radius"] + math.sqrt(n["radius"] ** 2 - n["a"] ** 2)

    def area(self, n, s):
        return 4 * math.pi * s * s if n["a"] == 0 else math.pi * (n["a"] ** 2 + s * s)

    def volume(self, n, s):
        return 4 / 3 * math.pi * s**3 if n["a"] == 0 else math.pi * s * (3 * n["a"] ** 2 + s * s) / 6

    def curvature(self, n, s):
        return s if n["a"] == 0 else (n["a"] ** 2 + s * s) / (2 * s)

    def film(self, n, s):
        recipe = self.doc["recipes"][n["recipe"]]
        law = recipe["tension"]
        if law["law"] == "constant":
            return law["clean"], 0.0
        assert law["law"] == "langmuir" and recipe["supply"]["kind"] == "none"
        theta = recipe["loading"]["coverage"] * n["area0"] / self.area(n, s)
        g = self.RT * law["saturation"]
        return law["clean"] + g * math.log1p(-theta), g * theta / (1 - theta)

    def excess(self, n, s):
        return 2 * n["faces"] * self.film(n, s)[0] / self.curvature(n, s)

    def excess_slope(self, n, s):
        gamma, eps = self.film(n, s)
        a, f = n["a"], n["faces"]
        if a == 0:
            return 2 * f / s**2 * (2 * eps - gamma)
        return 4 * f * (gamma * (a * a - s * s) + 2 * s * s * eps) / (a * a + s * s) ** 2

    def total(self, n, s):
        return (self.P + self.excess(n, s)) * self.volume(n, s) / self.RT

    def total_slope(self, n, s):
        dV = 4 * math.pi * s * s if n["a"] == 0 else math.pi * (n["a"] ** 2 + s * s) / 2
        return ((self.P + self.excess(n, s)) * dV + self.volume(n, s) * self.excess_slope(n, s)) / self.RT

    # -- nodes
    def fractions0(self, n):
        gas = n.get("gas", {self.gases[0]: 1})
        whole = sum(gas.values())
        return [gas.get(g, 0) / whole for g in self.gases]

    def capacity(self, n, k):
        if n["kind"] == "cavity":
            return n["volume"] / self.RT
        return n["volume"] * self.doc["gases"][self.gases[k]]["solubility"]

    def start(self):
        y = []
        for n in self.nodes:
            x = self.fractions0(n)
            if n["kind"] == "bubble":
                s = self.size0(n)
                y += [s] + [x[k] * self.total(n, s) for k in range(1, self.S)]
            elif n["kind"] == "cavity":
                y += [n["pressure"] - self.P] + [x[k] * n["pressure"] * self.capacity(n, k) for k in range(1, self.S)]
            elif n["kind"] == "pool":
                p = n["saturation"] * self.P
                y += [p - self.P] + [x[k] * p * self.capacity(n, k) for k in range(1, self.S)]
        return np.array(y)

    def look(self, t, y):
        """Excess pressure and mole fractions of every node."""
        out = []
        for i, n in enumerate(self.nodes):
            if n["kind"] == "reservoir":
                p = n["pressure"]
                if isinstance(p, dict):
                    assert p["wave"] == "sine"
                    e = (p["mean"] - self.P) + p["amplitude"] * math.sin(2 * math.pi * t / p["period"])
                else:
                    e = p - self.P
                out.append((e, self.fractions0(n)))
                continue
            if not self.alive[i]:
                out.append((math.nan, [math.nan] * self.S))
                continue
            q = y[self.at[(i, "size")]] if n["kind"] == "bubble" else y[self.at[(i, "excess")]]
            e = self.excess(n, q) if n["kind"] == "bubble" else q
            if self.S == 1:
                out.append((e, [1.0]))
                continue
            if n["kind"] == "bubble":
                whole = self.total(n, q)
                x = [y[self.at[(i, k)]] / whole for k in range(1, self.S)]
            else:
                x = [y[self.at[(i, k)]] / self.capacity(n, k) / (self.P + e) for k in range(1, self.S)]
            out.append((e, [1 - sum(x)] + x))
        return out

    def radius(self, i, y):
        n = self.nodes[i]
        return self.curvature(n, y[self.at[(i, "size")]]) if n["kind"] == "bubble" else math.inf

    def flow(self, link, look, y):
        """mol/s of each gas, from -> to."""
        i, j = self.place[link["from"]], self.place[link["to"]]
        (ei, xi), (ej, xj) = look[i], look[j]
        de, sum_p = ei - ej, 2 * self.P + ei + ej
        if link["kind"] == "tube":
            assert self.S == 1
            mu = self.doc["gases"][self.gases[0]]["viscosity"]
            return [math.pi * (link["bore"] / 2) ** 4 * de * sum_p / (16 * mu * link["length"] * self.RT)]
        smaller = min(self.radius(i, y), self.radius(j, y))
        flows = []
        for k, name in enumerate(self.gases):
            gas = self.doc["gases"][name]
            DH = gas["diffusivity"] * gas["solubility"]
            if link["kind"] == "liquid":
                assert self.nodes[j]["kind"] == "pool"
                g = DH * 4 * math.pi * smaller
            else:
                area = link["area"]
                g = DH / link["thickness"] * (area["share"] * math.pi * smaller**2 if isinstance(area, dict) else area)
            # Partial pressures: excess apart from the outer pressure, for digits.
            flows.append(g * (de * xi[k] + (self.P + ej) * (xi[k] - xj[k])))
        return flows

    def open(self, link):
        return self.alive[self.place[link["from"]]] and self.alive[self.place[link["to"]]]

    def rates(self, t, y):
        look = self.look(t, y)
        change = np.zeros((len(self.nodes), self.S))
        for link in self.doc["links"]:
            if not self.open(link):
                continue
            q = self.flow(link, look, y)
            change[self.place[link["from"]]] -= q
            change[self.place[link["to"]]] += q
        out = np.zeros(len(y))
        for q, (i, what) in enumerate(self.unknowns):
            n = self.nodes[i]
            if not self.alive[i]:
                continue
            if what == "size":
                out[q] = change[i].sum() / self.total_slope(n, y[q])
            elif what == "excess":
                out[q] = sum(change[i][k] / self.capacity(n, k) for k in range(self.S))
            else:
                out[q] = change[i][what]
        return out

    def vanish(self, i, y):
        """The last gas of bubble i goes in equal parts to what its links lead to."""
        links = [link for link in self.doc["links"] if self.open(link) and i in (self.place[link["from"]], self.place[link["to"]])]
        assert self.S == 1
        rest = self.total(self.nodes[i], y[self.at[(i, "size")]])
        self.alive[i] = False
        for link in links:
            j = self.place[link["to"]] if self.place[link["from"]] == i else self.place[link["from"]]
            n = self.nodes[j]
            if n["kind"] == "bubble":
                q = self.at[(j, "size")]
                wanted = self.total(n, y[q]) + rest / len(links)
                y[q] = brentq(lambda s: self.total(n, s) - wanted, y[q] * (1 - 1e-12), 1.5 * y[q], xtol=1e-18, rtol=1e-15)
            elif n["kind"] != "reservoir":
                y[self.at[(j, "excess")]] += rest / len(links) / self.capacity(n, 0)
        return y


def carry_through(doc, method, rtol):
    model = Model(json.loads(json.dumps(doc)))
    until, frames = doc["run"]["until"], doc["run"]["frames"]
    times = [until * k / frames for k in range(frames + 1)]
    y, t = model.start(), 0.0
    bubbles = [i for i, n in enumerate(model.nodes) if n["kind"] == "bubble"]
    radii, gone = [], []

    def put(y):
        radii.append([model.radius(i, y) if model.alive[i] else 0.0 for i in bubbles])

    left = list(times)
    while left:
        living = [i for i in bubbles if model.alive[i] and model.nodes[i]["a"] == 0]
        events = []
        for i in living:
            def event(t, y, q=model.at[(i, "size")]):
                return y[q] / doc["run"]["vanishRadius"] - 1
            event.terminal = True
            events.append(event)
        atol = np.array([1e-13 * (model.size0(model.nodes[i]) if what == "size" else 1.0 if what == "excess" else max(abs(y[q]), 1e-30))
                         for q, (i, what) in enumerate(model.unknowns)])
        run = solve_ivp(model.rates, (t, until), y, method=method, rtol=rtol, atol=atol, t_eval=left, events=events or None)
        assert run.success, run.message
        for column in run.y.T:
            put(column)
        left = left[run.y.shape[1]:]
        if run.status == 1:
            which = next(k for k, found in enumerate(run.t_events) if len(found))
            t, y = run.t_events[which][0], run.y_events[which][0].copy()
            gone.append({"bubble": model.nodes[living[which]]["id"], "time": float(t)})
            y = model.vanish(living[which], y)
    return times, np.array(radii), gone


def reference(name, doc, methods, agree, what):
    (times, one, gone), (_, two, gone2) = (carry_through(doc, m, 1e-12) for m in methods)
    scale = np.maximum(np.abs(one), 1e-300)
    difference = float(np.max(np.abs(one - two) / scale))
    for a, b in zip(gone, gone2, strict=True):
        difference = max(difference, abs(a["time"] - b["time"]) / a["time"])
    print(name, "difference", difference, "gone", gone)
    assert difference < agree, (name, difference)
    return {"what": what, "document": doc, "methods": methods, "difference": difference, "times": times,
            "radii": one.tolist(), "gone": gone}


AIR = {"molarMass": 0.02896, "viscosity": 1.85e-5, "diffusivity": 2e-9, "solubility": 8e-6}
BARE = {"tension": {"law": "constant", "clean": 0.03}}
LANGMUIR = lambda coverage: {
    "tension": {"law": "langmuir", "clean": 0.072, "saturation": 5e-6, "szyszkowski": 1.0},
    "loading": {"coverage": coverage}, "supply": {"kind": "none"}}


def document(gases, recipes, nodes, links, until, frames, vanish=1e-6):
    return {"format": "frothwright", "version": 1, "temperature": 298.15, "ambient": {"pressure": 101325},
            "gases": gases, "recipes": recipes, "nodes": nodes, "links": links,
            "run": {"until": until, "frames": frames, "vanishRadius": vanish}}


def bubble(id, radius, faces, recipe, **rest):
    return {"id": id, "kind": "bubble", "radius": radius, "faces": faces, "recipe": recipe, **rest}


def two_on_a_tube(recipe, until, vanish):
    return document({"air": AIR}, {"film": recipe}, [bubble("A", 5e-3, 2, "film"), bubble("B", 4.8e-3, 2, "film")],
                    [{"id": "t", "kind": "tube", "from": "A", "to": "B", "bore": 1e-3, "length": 0.05}], until, 16, vanish)


SLOW = {"molarMass": 0.138, "viscosity": 1.4e-5, "diffusivity": 1e-9, "solubility": 1e-7}
FAST = {"molarMass": 0.044, "viscosity": 1.49e-5, "diffusivity": 2e-9, "solubility": 3.3e-4}
held = document({"fast": FAST, "slow": SLOW}, {"film": BARE},
                [bubble("A", 120e-6, 1, "film", gas={"fast": 0.99, "slow": 0.01}),
                 bubble("B", 100e-6, 1, "film", gas={"fast": 0.99, "slow": 0.01})],
                [{"id": "f", "kind": "film", "from": "A", "to": "B", "area": 1e-8, "thickness": 1e-5}], 1600.0, 16)

rest = 101325 + 4 * 0.0379 / 3e-3
manifold = document({"air": AIR}, {"film": LANGMUIR(0.9362)},
                    [bubble(id, R, 2, "film", mouth=2e-3) for id, R in (("A", 2.8e-3), ("B", 3e-3), ("C", 3.3e-3))]
                    + [{"id": "M", "kind": "cavity", "volume": 2e-6, "pressure": rest},
                       {"id": "S", "kind": "reservoir", "pressure": {"wave": "sine", "mean": rest, "amplitude": 4.0, "period": 2.0}}],
                    [{"id": "t" + id, "kind": "tube", "from": id, "to": "M", "bore": 2e-3, "length": 0.02} for id in "ABC"]
                    + [{"id": "d", "kind": "tube", "from": "S", "to": "M", "bore": 1e-3, "length": 0.05}], 6.0, 24)

sizes = [40e-6, 55e-6, 70e-6, 90e-6, 120e-6]
pool = document({"air": AIR}, {"film": BARE},
                [bubble("b%d" % i, R, 1, "film") for i, R in enumerate(sizes)]
                + [{"id": "W", "kind": "pool", "volume": 2e-10, "saturation": 1 + 2 * 0.03 / 80e-6 / 101325}],
                [{"id": "l%d" % i, "kind": "liquid", "from": "b%d" % i, "to": "W"} for i in range(3)]
                + [{"id": "l%d" % i, "kind": "film", "from": "b%d" % i, "to": "W", "area": {"share": 0.4}, "thickness": 2e-5} for i in (3, 4)],
                9000.0, 20, 2e-6)

if __name__ == "__main__":
    results = {
        "runs-away": reference("runs-away", two_on_a_tube(BARE, 4.0, 1e-4), ["Radau", "DOP853"], 1e-8,
                               "two free thin-film bubbles of pure liquid on a tube: the small one empties"),
        "held-by-film": reference("held-by-film", two_on_a_tube(LANGMUIR(0.93), 2.0, 1e-4), ["Radau", "DOP853"], 1e-9,
                                  "the same with an insoluble Langmuir film: both come to rest"),
        "slow-gas": reference("slow-gas", held, ["Radau", "LSODA"], 1e-8,
                              "two bubbles that share a film, a hundredth of their gas too slow to pass"),
        "manifold": reference("manifold", manifold, ["Radau", "LSODA"], 1e-8,
                              "three mounted thin-film bubbles on a cavity that a sine drives through a tube"),
        "pool": reference("pool", pool, ["Radau", "DOP853"], 1e-8,
                          "five bubbles on one pool, by liquid paths and by films, the smallest of which vanish"),
    }
    out = pathlib.Path(__file__).with_name("trajectories.json")
    out.write_text(json.dumps(results, indent=1) + "\n", encoding="utf-8")
