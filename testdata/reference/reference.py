#!/usr/bin/env python3
"""Solves the problems of main.go by other means, compares and times.

Use: reference.py PROGRAM [RUNS]. PROGRAM is main.go built; each run calls it, reads its JSON and
solves the same problems here, so that both sides are timed in turn. Written the way a careful
engineer would with numpy and scipy: general solvers, no tables, no tricks. Prints one line a problem:
the largest relative difference, the median processor times and the median ratio. Exit status 1 where an answer
differs by more than 0.5 %.
"""
import json
import os
import subprocess
import sys
import tempfile
import time
from decimal import Decimal

import numpy as np
from scipy.integrate import solve_ivp
from scipy.optimize import brentq, fsolve

R = 8.314462618
LIMIT = 0.005


def prop(spec, t):
    """One property at t in K, SI."""
    c = spec["c"]
    kind = spec["equation"]
    if kind == "DIPPR101":
        y = np.exp(c[0] + c[1] / t + c[2] * np.log(t) + c[3] * t ** c[4])
    elif kind == "DIPPR106":
        tr = t / c[4]
        y = c[0] * (1 - tr) ** (c[1] + c[2] * tr + c[3] * tr**2 + c[5] * tr**3)
    elif kind == "DIPPR100":
        y = c[0] + c[1] * t + c[2] * t**2 + c[3] * t**3 + c[4] * t**4
    elif kind == "DIPPR105":
        y = c[0] / c[1] ** (1 + (1 - t / c[2]) ** c[3])
    elif kind == "VDI106":
        tau = 1 - t / c[4]
        y = c[5] + c[0] * tau**0.35 + c[1] * tau ** (2 / 3) + c[2] * tau + c[3] * tau ** (4 / 3)
    else:
        raise ValueError(f"equation {kind} is not written down here")
    return spec["scale"] * y


def ln_gamma(p, x, t):
    """NRTL of water (mole fraction x) and solvent; a draw shifts water at dilution."""
    shift = p.get("shift_25", 0.0) + p.get("trend", 0.0) * (1 / 298.15 - 1 / t) / (1 / 298.15 - 1 / 373.15)
    t12, t21 = p["a12"] + p["b12"] / t, p["a21"] + p["b21"] / t
    g12, g21 = np.exp(-p["alpha"] * t12), np.exp(-p["alpha"] * t21)
    y = 1 - x
    a, b = x + y * g21, y + x * g12
    return (y**2 * (t21 * (g21 / a) ** 2 + t12 * g12 / b**2 + shift),
            x**2 * (t12 * (g12 / b) ** 2 + t21 * g21 / a**2 + shift))


def bubble(p, x, pressure, guess):
    def surplus(t):
        gw, gs = ln_gamma(p, x, t)
        return (x * np.exp(gw) * prop(p["water"]["vapour_pressure_pa"], t)
                + (1 - x) * np.exp(gs) * prop(p["solvent"]["vapour_pressure_pa"], t)) / pressure - 1

    t = brentq(surplus, guess - 80, guess + 40, xtol=1e-9)
    gw, _ = ln_gamma(p, x, t)
    return t, x * np.exp(gw) * prop(p["water"]["vapour_pressure_pa"], t) / pressure


def layers(p, t):
    """Water mole fractions of the organic and the aqueous layer."""
    def equal(u):
        x1, x2 = np.exp(u[0]), 1 - np.exp(u[1])
        w1, s1 = ln_gamma(p, x1, t)
        w2, s2 = ln_gamma(p, x2, t)
        return [w1 + u[0] - w2 - np.log(x2), s1 + np.log(1 - x1) - s2 - u[1]]

    u = fsolve(equal, [np.log(1e-3), np.log(1e-4)], xtol=1e-12)
    return np.exp(u[0]), 1 - np.exp(u[1])


def trap(q):
    p = q["pair"]
    mw, ms = p["water"]["molar_mass_kg_per_mol"], p["solvent"]["molar_mass_kg_per_mol"]
    cp = lambda who, t: prop(p[who]["heat_capacity_j_per_mol_k"], t)
    hv = lambda who, t: prop(p[who]["heat_of_vaporization_j_per_mol"], t)
    rho = lambda who, t: prop(p[who]["density_kg_per_m3"], t)
    rec, pressure = q["receiver_k"], q["pressure_pa"]
    x_org, x_aq = layers(p, rec)
    dry = brentq(lambda t: prop(p["solvent"]["vapour_pressure_pa"], t) - pressure, 250, 500)
    floor_x = brentq(lambda x: np.log(bubble(p, x, pressure, dry)[1] / x_org), 1e-9, x_org, xtol=1e-16, rtol=1e-12)

    def vapour(nw, ns):
        return bubble(p, nw / (nw + ns), pressure, dry)

    def warming(nw, ns, dnw, dns):
        """Heat that follows the boiling point of the pot, per mole of vapour."""
        x, n = nw / (nw + ns), nw + ns
        dx = (dnw - x * (dnw + dns)) / n
        h = 1e-4 * x
        slope = (bubble(p, x + h, pressure, dry)[0] - bubble(p, x - h, pressure, dry)[0]) / (2 * h)
        t = bubble(p, x, pressure, dry)[0]
        return (nw * cp("water", t) + ns * cp("solvent", t)) * slope * dx

    start = nw, ns = q["water_kg"] / mw, q["solvent_kg"] / ms
    t0, _ = vapour(nw, ns)
    # The receiver fills: nothing returns.
    def filling(_, s):
        """Per cubic metre of condensate."""
        t, y = vapour(s[0], s[1])
        per_mole = [-y, -(1 - y), y * mw + (1 - y) * ms,
                    y * hv("water", t) + (1 - y) * hv("solvent", t) + warming(s[0], s[1], -y, -(1 - y))]
        return np.array(per_mole) / (y * mw / rho("water", rec) + (1 - y) * ms / rho("solvent", rec))

    s = solve_ivp(filling, [0, q["fill_m3"]], [nw, ns, 0, 0], method="LSODA", rtol=1e-7, atol=1e-10).y[:, -1]

    def water(s):
        return s[0] * mw / (s[0] * mw + s[1] * ms)

    def steady(_, s):
        t, y = vapour(s[0], s[1])
        share = (y - x_org) / (x_aq - x_org)
        eff = q["efficiency"] if water(s) < q["efficiency_below"] else 1.0
        mid = (t + rec) / 2
        reheat = (x_org * cp("water", mid) + (1 - x_org) * cp("solvent", mid)) * (t - rec)
        dw, ds = -share * x_aq * eff, -share * (1 - x_aq) * eff
        return [dw, ds, y * mw + (1 - y) * ms,
                y * hv("water", t) + (1 - y) * hv("solvent", t) + (1 - share) * reheat + warming(s[0], s[1], dw, ds)]

    fw = floor_x * mw / (floor_x * mw + (1 - floor_x) * ms)
    last = max(q["goal"], 1.05 * fw)
    for stop in sorted({max(q["efficiency_below"], last), last}, reverse=True):
        end = lambda _, s, stop=stop: water(s) - stop
        end.terminal = True
        s = solve_ivp(steady, [0, 1e6], s, method="LSODA", rtol=1e-7, atol=1e-10, events=end).y[:, -1]
    heat_up = (start[0] * cp("water", (t0 + q["room_k"]) / 2) + start[1] * cp("solvent", (t0 + q["room_k"]) / 2)) * (t0 - q["room_k"])
    return {"boiled_kg": s[2], "reflux_h": s[3] / q["net_w"] / 3600, "floor": fw,
            "heat_up_h": heat_up / q["net_w"] / 3600, "left_kg": s[1] * ms, "water": water(s)}


def soak(q, loading_factor=1.0):
    p = q["pair"]
    mw, ms = p["water"]["molar_mass_kg_per_mol"], p["solvent"]["molar_mass_kg_per_mol"]
    t = q["temp_k"]
    psat = prop(p["water"]["vapour_pressure_pa"], t)
    w0 = q["water_kg"] / (q["water_kg"] + q["solvent_kg"])
    sites = [(qs, b0 * np.exp(heat / (R * t))) for qs, b0, heat in q["sites"]]

    def loading(w):
        x = w / mw / (w / mw + (1 - w) / ms)
        pa = min(1.0, x * np.exp(ln_gamma(p, x, t)[0])) * psat
        return loading_factor * sum(qs * b * pa / (1 + b * pa) for qs, b in sites)

    residual = q["residual"] + (q.get("lots", 1) - 1) * q["solvent_kg"] / q["dose_kg"] * w0 / (1 - w0)  # earlier lots left theirs

    def balance(ln_w):
        w = np.exp(ln_w)
        return q["solvent_kg"] * (w / (1 - w) - w0 / (1 - w0)) + q["dose_kg"] * (loading(w) - residual)

    if balance(np.log(w0)) < 0:  # the sorbent is wetter than the lot
        return {"equilibrium": w0, "outlet": w0}
    eq = np.exp(brentq(balance, np.log(1e-12), np.log(w0), xtol=1e-12))
    return {"equilibrium": eq, "outlet": eq + (w0 - eq) * np.exp(-q["rate_per_h"] * q["hours"])}


def delivered(q, d):
    """The lot as a draw has it: its pair, kg of water, kg of solvent, densities in kg/m3."""
    t = q["temp_k"]
    rho_w, rho_s = (prop(q["pair"][who]["density_kg_per_m3"], t) for who in ("water", "solvent"))
    kg = q["volume_m3"] / (d["water"] / rho_w + (1 - d["water"]) / rho_s)
    return dict(q["pair"], shift_25=d["shift_25"], trend=d["trend"]), kg * d["water"], kg * (1 - d["water"]), rho_w, rho_s


def draw(q):
    """A planned soak in each draw of what is not known: the water it leaves, the cost of a litre."""
    found = {}
    for i, d in enumerate(q["draws"]):
        pair, water_kg, solvent_kg, rho_w, rho_s = delivered(q, d)
        grown = {"": 1.0} | {fact: d["facts"][fact] / q["planned"][fact] for fact in q["planned"]}
        one = dict(q, pair=pair, residual=d["residual"], water_kg=water_kg, solvent_kg=solvent_kg, rate_per_h=q["rate_per_h"] * d["rate"])
        water = soak(one, d["loading"])["outlet"]
        kept = solvent_kg - q["held_kg"]
        litres = 1e3 * (kept / rho_s + kept * water / (1 - water) / rho_w)
        cost = sum(u["quantity"] * grown[u["grows"]] * d["prices"][u["item"]] for u in q["uses"])
        found[f"water {i}"], found[f"cost {i}"] = water, cost / litres
    return found


def trap_draw(q):
    """A planned trap and the soak after it in each draw: the water they leave, hours from start to finish."""
    found, n = {}, q["trap"]["charges"]
    for i, d in enumerate(q["draws"]):
        pair, water_kg, solvent_kg, _, _ = delivered(q, d)
        more = {fact: (d["facts"][fact] - q["planned"][fact]) / 3600 for fact in q["planned"]}
        net_w = q["trap"]["heater_w"] * d["facts"]["heat-share"]
        boiled = trap(dict(q["trap"], pair=pair, water_kg=water_kg / n, solvent_kg=solvent_kg / n, net_w=net_w, efficiency=d["facts"]["trap-efficiency"]))
        reflux_h = max(boiled["reflux_h"], q["trap"]["least_reflux_h"])
        left_kg = n * boiled["left_kg"] * (1 - d["facts"]["vapour-loss-per-day"] * reflux_h / 24)
        one = dict(q, pair=pair, residual=d["residual"], water_kg=left_kg * boiled["water"] / (1 - boiled["water"]), solvent_kg=left_kg,
                   rate_per_h=q["rate_per_h"] * d["rate"])
        found[f"water {i}"] = soak(one, d["loading"])["outlet"]
        found[f"hours {i}"] = (q["hours_total"] + n * (boiled["heat_up_h"] + reflux_h - q["trap"]["hot_h"] + more["trap-shutdown"]) + more["trap-setup"]
                               + q["soak_attended_h"] * (d["facts"]["soak-attended"] / q["planned"]["soak-attended"] - 1)
                               + q["test_h"] * (d["facts"]["karl-fischer-time"] / q["planned"]["karl-fischer-time"] - 1))
    return found


def bill(q):
    """Lines, heads and total in decimal."""
    heads, batches = {}, Decimal(repr(q["batches"]))
    for line in q["lines"]:
        quantity = Decimal(repr(line["quantity"]))
        if line["per_year"]:
            quantity /= batches
        heads[line["head"]] = heads.get(line["head"], Decimal(0)) + quantity * Decimal(line["price"])
    total = sum(heads.values())
    found = {head: float(amount) for head, amount in heads.items() if amount}
    return dict(found, total=float(total), litre=float(total / Decimal(repr(q["litres"]))))


def cells(path):
    """The cells of a workbook: sheet, row, column, value or formula, format."""
    from openpyxl import load_workbook

    found = []
    for sheet in load_workbook(path).worksheets:
        for row in sheet.iter_rows():
            found += [(sheet.title, c.row, c.column, c.value, c.number_format, c.font.b) for c in row if c.value not in (None, "")]
    return found


# The same cells again, row by row, with a number format and bold type where they have it: by a
# library that writes only, and by one that holds the whole workbook and reads it too.


def by_xlsxwriter(found, path):
    import xlsxwriter

    book = xlsxwriter.Workbook(path)
    sheets, formats = {}, {}
    for title, row, column, value, number_format, bold in found:
        if title not in sheets:
            sheets[title] = book.add_worksheet(title)
        key = (number_format, bold)
        if key not in formats:
            formats[key] = book.add_format({"num_format": number_format, "bold": bool(bold)})
        sheets[title].write(row - 1, column - 1, value, formats[key])
    book.close()


def by_openpyxl(found, path):
    from openpyxl import Workbook
    from openpyxl.styles import Font

    book, sheets, heavy = Workbook(), {}, Font(bold=True)
    book.remove(book.active)
    for title, row, column, value, number_format, bold in found:
        if title not in sheets:
            sheets[title] = book.create_sheet(title)
        cell = sheets[title].cell(row, column, value)
        cell.number_format = number_format
        if bold:
            cell.font = heavy
    book.save(path)


WRITERS = {"xlsxwriter": by_xlsxwriter, "openpyxl": by_openpyxl}


def by_every_writer(p):
    """The problem, a workbook once for each library."""
    if p["name"] != "workbook":
        return [p]
    return [dict(p, name=f"book, {writer}", input=dict(p["input"], writer=writer)) for writer in WRITERS]


def workbook(q):
    """Returns the call to time; what it writes has to hold the same cells."""
    found = cells(q["file"])
    path = os.path.join(tempfile.gettempdir(), "parch-reference-again.xlsx")

    def write():
        WRITERS[q["writer"]](found, path)
        return {}

    write()
    again = cells(path)
    for a, b in zip(found, again, strict=True):
        same = a[3] == b[3] or isinstance(a[3], (int, float)) and isinstance(b[3], (int, float)) and abs(a[3] - b[3]) <= 1e-14 * abs(a[3])
        if a[:3] != b[:3] or not same:
            raise SystemExit(f"workbook: {a[:4]} written again is {b[:4]}")
    return write


SOLVERS = {"trap": trap, "soak": soak, "draw of a soak": draw, "draw made too": draw, "draw of trap+soak": trap_draw, "bill": bill}


def timed(solve):
    """Processor time of a call: the median of as many as fit into about a second, at least three."""
    times = []
    while len(times) < 3 or sum(times) < 1 and len(times) < 200:
        start = time.process_time()
        answer = solve()
        times.append(time.process_time() - start)
    return answer, float(np.median(times))


def call(p):
    if "writer" in p["input"]:
        return workbook(p["input"])
    return lambda: SOLVERS[p["name"]](p["input"])


def main():
    program, runs = sys.argv[1], int(sys.argv[2]) if len(sys.argv) > 2 else 3
    seen = {}
    for _ in range(runs):
        problems = json.loads(subprocess.run([program], check=True, capture_output=True).stdout)
        for p in (each for problem in problems for each in by_every_writer(problem)):
            answer, seconds = timed(call(p))
            seconds /= len(p["input"].get("draws", [None]))  # many at a time
            off, where = max([(abs(answer[k] / p["answer"][k] - 1), k) for k in p["answer"]], default=(0.0, ""))
            if off > LIMIT:
                print(f"{p['name']}: {where} is {p['answer'][where]:.6g} here, {answer[where]:.6g} there")
            seen.setdefault(p["name"], []).append((off, p["seconds_per_op"], seconds))
    worst = 0.0
    for name, rows in seen.items():
        off, ours, theirs = (np.array(column) for column in zip(*rows))
        worst = max(worst, off.max())
        print(f"{name:17} differs by at most {100 * off.max():.4f} %; {1e6 * np.median(ours):10.1f} us here, "
              f"{1e6 * np.median(theirs):12.1f} us there, ratio {np.median(theirs / ours):8.1f}")
    return 1 if worst > LIMIT else 0


if __name__ == "__main__":
    sys.exit(main())
