#!/usr/bin/env python3
"""Reference scattering states to 22 digits for structures without closed form.

Run by hand:  python3 reference.py > reference.json      (mpmath; half an hour)
              python3 reference.py "gauss" "deltas"      (some of the structures)

Method, chosen to share nothing with the package: the system
    u' = m w,  w' = 2 (V - i loss - E) u
is carried from the far face to the near face by Gauss-Legendre collocation
with 12 stages (order 24; J. Kuntzmann 1961, J. C. Butcher 1964), real x, no
closed forms, no series in x, in 40-digit arithmetic. Each step is one linear
system of 24 equations. The step is one over the largest |k| and at
most half the width of a smooth shape, and each
result is computed again with half the step; the digits on which both agree are
printed (at least 22, or the script stops). Energy derivatives of the phases
are five-point differences with h = 1e-9 (error h^4). Dwell times are the
collocation's own quadrature of |u|^2.
"""
import json
import sys
from multiprocessing import Pool

import mpmath
from mpmath import mp, mpf, mpc

mp.dps = 40
STAGES = 12


def gauss(n):
    """Nodes on [0, 1], weights and the collocation matrix of n stages."""
    nodes = []
    for i in range(n):
        x = mpmath.cos(mp.pi * (i + mpf(3) / 4) / (n + mpf(1) / 2))
        for _ in range(8):  # Newton's method
            p = mpmath.legendre(n, x)
            x -= p * (1 - x * x) / (n * (mpmath.legendre(n - 1, x) - x * p))
        nodes.append(x)
    nodes = [(1 + x) / 2 for x in nodes]
    # a[i][j] = integral from 0 to c_i of the Lagrange polynomial j.
    v = mpmath.matrix(n, n)
    for i in range(n):
        for p in range(n):
            v[i, p] = nodes[i] ** p
    inverse = v ** -1
    a = [[sum(nodes[i] ** (p + 1) / (p + 1) * inverse[p, j] for p in range(n)) for j in range(n)] for i in range(n)]
    b = [sum(inverse[p, j] / (p + 1) for p in range(n)) for j in range(n)]
    return nodes, b, a


NODES, WEIGHTS, MATRIX = gauss(STAGES)


def segments(structure):
    """The stretches (from, to, V, m, loss, layer, 1/longest step) and deltas
    (x, strength)."""
    out, deltas, x = [], [], mpf(0)
    for i, l in enumerate(structure["layers"]):
        m, loss = mpf(str(l["mass"])), mpf(str(l.get("loss", 0)))
        const = lambda x, m=m: m
        if l["shape"] == "delta":
            deltas.append((x, mpf(str(l["strength"]))))
            continue
        if l["shape"] == "table":
            xs = [mpf(str(v)) for v in l["x"]]
            hs = [mpf(str(v)) for v in l["heights"]]
            ms = [mpf(str(v)) for v in l["masses"]]
            for n in range(len(xs) - 1):
                a, b = x + xs[n] - xs[0], x + xs[n + 1] - xs[0]
                line = lambda y0, y1, a=a, b=b: (lambda t: y0 + (y1 - y0) * (t - a) / (b - a))
                out.append((a, b, line(hs[n], hs[n + 1]), line(ms[n], ms[n + 1]), loss, i, 0))
            x += xs[-1] - xs[0]
            continue
        d = mpf(str(l["thickness"]))
        h, c = mpf(str(l.get("height", 0))), x + d / 2
        if l["shape"] == "flat":
            f = lambda t, h=h: h
        elif l["shape"] == "ramp":
            f = lambda t, h=h, e=mpf(str(l["height_end"])), a=x, d=d: h + (e - h) * (t - a) / d
        elif l["shape"] == "sech2":
            f = lambda t, h=h, c=c, w=mpf(str(l["width"])): h / mpmath.cosh((t - c) / w) ** 2
        elif l["shape"] == "gauss":
            f = lambda t, h=h, c=c, w=mpf(str(l["width"])): h * mpmath.exp(-((t - c) / w) ** 2 / 2)
        elif l["shape"] == "smooth-step":
            f = lambda t, h=h, c=c, w=mpf(str(l["width"])), e=mpf(str(l["height_end"])): \
                h + (e - h) / (1 + mpmath.exp(-(t - c) / w))
        out.append((x, x + d, f, const, loss, i, 2 / mpf(str(l["width"])) if "width" in l else 0))
        x += d
    drop = mpf(str(structure.get("drop", 0)))
    tilted = [(a, b, (lambda t, f=f: f(t) - drop * t / x), m, loss, i, s) for a, b, f, m, loss, i, s in out]
    return tilted, deltas, x, drop


def mirrored(segs, deltas, width):
    back = [(width - b, width - a, (lambda t, f=f: f(width - t)), (lambda t, m=m: m(width - t)), loss, i, s)
            for a, b, f, m, loss, i, s in reversed(segs)]
    return back, [(width - x, s) for x, s in reversed(deltas)]


def crossing(seg, e, u, w, fraction):
    """Carry (u, w) over a segment from right to left; return also int |u|^2."""
    a, b, f, m, loss, _, widest = seg
    k = max(mpmath.sqrt(abs(2 * m(x) * (f(x) - e))) for x in mpmath.linspace(a, b, 9)) + mpmath.sqrt(loss) + mpf(1) / 2
    n = int(mpmath.ceil((b - a) * max(k, widest) / fraction))
    h, density = (b - a) / n, mpf(0)
    for step in range(n):
        right = b - step * h
        xs = [right - c * h for c in NODES]
        p = [-h * m(x) for x in xs]
        q = [-2 * h * (f(x) - mpc(0, 1) * loss - e) for x in xs]
        # stages U_i = u + sum a_ij p_j W_j, W_i = w + sum a_ij q_j U_j
        big, rhs = mpmath.matrix(2 * STAGES, 2 * STAGES), mpmath.matrix(2 * STAGES, 1)
        for i in range(STAGES):
            big[i, i] = big[STAGES + i, STAGES + i] = 1
            rhs[i], rhs[STAGES + i] = u, w
            for j in range(STAGES):
                big[i, STAGES + j] -= MATRIX[i][j] * p[j]
                big[STAGES + i, j] -= MATRIX[i][j] * q[j]
        s = mpmath.lu_solve(big, rhs)
        density += h * sum(WEIGHTS[i] * abs(s[i]) ** 2 for i in range(STAGES))
        u, w = (u + sum(WEIGHTS[i] * p[i] * s[STAGES + i] for i in range(STAGES)),
                w + sum(WEIGHTS[i] * q[i] * s[i] for i in range(STAGES)))
    return u, w, density


def amplitudes(structure, from_right, e, fraction):
    segs, deltas, width, drop = segments(structure)
    near = [mpf(str(structure["entry"][k])) for k in ("height", "mass")]
    far = [mpf(str(structure["exit"][k])) for k in ("height", "mass")]
    far[0] -= drop
    if from_right:
        segs, deltas = mirrored(segs, deltas, width)
        near, far = far, near
    q = mpmath.sqrt(mpc(2 * far[1] * (e - far[0]), 0))
    u, w = mpc(1), mpc(0, 1) * q / far[1]
    dwell = [mpf(0)] * len(structure["layers"])
    for seg in reversed(segs):
        for x, s in deltas:
            if abs(x - seg[1]) < mpf(10) ** -20:
                w -= 2 * s * u
        u, w, d = crossing(seg, e, u, w, fraction)
        dwell[seg[5]] += d
    for x, s in deltas:
        if abs(x) < mpf(10) ** -20:
            w -= 2 * s * u
    k = mpmath.sqrt(2 * near[1] * (e - near[0]))
    v = k / near[1]
    a, b = (u - mpc(0, 1) * w / v) / 2, (u + mpc(0, 1) * w / v) / 2
    flux = v * abs(a) ** 2
    open_ = e > far[0]
    return {"t": 1 / a, "r": b / a, "transmission": (mpmath.re(q) / far[1] / flux if open_ else mpf(0)),
            "reflection": abs(b / a) ** 2, "dwell": [d / flux for d in dwell],
            "loss": [2 * mpf(str(l.get("loss", 0))) * d / flux for l, d in zip(structure["layers"], dwell)],
            "open": open_}


def case(job):
    name, structure, from_right, energy = job
    e, h = mpf(str(energy)), mpf(10) ** -9
    results = []
    for fraction in (mpf(1), mpf(1) / 2):
        around = {n: amplitudes(structure, from_right, e + n * h, fraction) for n in (-2, -1, 0, 1, 2)}
        delay = lambda key: sum(c * mpmath.arg(around[n][key] / around[0][key])
                                for n, c in ((-2, 1), (-1, -8), (1, 8), (2, -1))) / (12 * h)
        centre = around[0]
        values = [centre["transmission"], centre["reflection"],
                  delay("t") if centre["open"] else mpf(0), delay("r"),
                  mpmath.fsum(centre["dwell"])] + centre["dwell"] + centre["loss"]
        results.append(values)
    for x, y in zip(*results):
        if abs(x - y) > mpf(10) ** -22 * max(abs(x), mpf(10) ** -30):
            raise SystemExit("%s: %s and %s differ" % (name, x, y))
    text = [mpmath.nstr(v, 22) for v in results[1]]
    n = len(structure["layers"])
    return {"id": name, "from_right": from_right, "energy": energy, "structure": structure,
            "transmission": text[0], "reflection": text[1], "group_delay_transmitted": text[2],
            "group_delay_reflected": text[3], "dwell": text[4],
            "layer_dwell": text[5:5 + n], "layer_loss": text[5 + n:]}


def flat(thickness, height, mass=1, loss=0):
    return {"shape": "flat", "thickness": thickness, "height": height, "mass": mass, "loss": loss}


def lead(height=0, mass=1):
    return {"height": height, "mass": mass}


def delta(strength):
    return {"shape": "delta", "strength": strength, "mass": 1}


STRUCTURES = {
    "stack, unequal masses": {"entry": lead(0, 1), "exit": lead(0.3, 1.25), "layers": [
        flat(1.5, 1.2, 0.7), flat(2, -0.75, 1.5), flat(0.5, 2.5, 0.9), flat(3, 0.25, 2)]},
    "stack with loss": {"entry": lead(0, 1), "exit": lead(-0.25, 0.8), "layers": [
        flat(1, 1.5, 1, 0.125), flat(2.5, -0.5, 1.25, 0.0625), flat(0.75, 2, 0.75), flat(6, 0.75, 1, 0.5)]},
    "biased sech2": {"entry": lead(), "exit": lead(), "drop": 0.5, "layers": [
        flat(2, 0), {"shape": "sech2", "thickness": 8, "height": 1.5, "width": 0.75, "mass": 1.25}, flat(1, 0)]},
    "gauss": {"entry": lead(), "exit": lead(0.25, 1.5), "layers": [
        {"shape": "gauss", "thickness": 9, "height": 1.25, "width": 0.75, "mass": 1}]},
    "table of height and mass": {"entry": lead(), "exit": lead(0.5, 1.5), "layers": [
        {"shape": "table", "mass": 1, "x": [0, 1, 2.5, 3, 5], "heights": [0, 1.5, 0.25, 2, 0.5],
         "masses": [1, 0.625, 1.25, 0.875, 1.5]}]},
    "deltas": {"entry": lead(), "exit": lead(), "layers": [
        delta(0.75), flat(1.5, -0.25), delta(-1.25), flat(2, 0.125), delta(2), flat(1, 0), delta(0.5)]},
    "lossy sech2": {"entry": lead(), "exit": lead(), "layers": [
        {"shape": "sech2", "thickness": 8, "height": 1, "width": 1, "mass": 1, "loss": 0.125}]},
    "lossy ramp": {"entry": lead(), "exit": lead(1), "layers": [
        {"shape": "ramp", "thickness": 4, "height": 0.25, "height_end": 1.5, "mass": 0.75, "loss": 0.25}, flat(1, 0.5)]},
    "smooth step": {"entry": lead(), "exit": lead(0.75), "layers": [
        {"shape": "smooth-step", "thickness": 10, "height": 0.125, "height_end": 0.75, "width": 0.5, "mass": 1},
        flat(2, 0.25, 1.5)]},
    "thick gauss": {"entry": lead(), "exit": lead(), "layers": [
        {"shape": "gauss", "thickness": 40, "height": 2, "width": 8, "mass": 1}]},
    "narrow twin barrier": {"entry": lead(), "exit": lead(), "layers": [flat(3, 2), flat(3, 0), flat(3.5, 2)]},
}



def main():
    jobs = [(name, s, right, e) for name, s in STRUCTURES.items() if name in (sys.argv[1:] or STRUCTURES)
            for right, e in ((False, 0.4375), (True, 0.9375), (False, 1.875))
            if e > s["exit" if right else "entry"]["height"]]
    print("[")
    print(json.dumps({"generator": "reference.py", "python": sys.version.split()[0],
                      "mpmath": mpmath.__version__, "digits": 22, "arithmetic": mp.dps}), end="")
    with Pool(2) as pool:
        for result in pool.imap(case, jobs):
            print(",\n" + json.dumps(result), end="", flush=True)
    print("\n]")


if __name__ == "__main__":
    main()
