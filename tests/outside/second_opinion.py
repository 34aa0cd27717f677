"""A second opinion on operating point, natural frequencies and loop gain of every design in samples/ and in the folders
beside this file: nodal.py's equations solved with scipy, against `sinewright-batch check --json` and `curves --json`.

Loop gain is taken from its definition: the admittance parameters of the opened circuit, L = −(y12 + y21)/(y11 + y22).
"""
import json
import math
import os
import pathlib
import subprocess
import unittest

import numpy as np
import scipy.linalg

from nodal import Circuit

BATCH = os.environ["SINEWRIGHT_BATCH"]
HERE = pathlib.Path(__file__).parent
DESIGNS = sorted([*(HERE.parent.parent / "samples").glob("*.sinewright"), *HERE.glob("*/*.sinewright")])
AGREEMENT = 1e-7  # relative; what outsiders are promised
SMALLEST_V = 1e-9  # net voltages are compared with no less than this
CURVE_POINTS = 50


def batch(*arguments):
    done = subprocess.run([BATCH, *map(str, arguments)], capture_output=True, timeout=60)
    if done.returncode > 1:
        raise AssertionError(done.stderr.decode())
    return json.loads(done.stdout)


def balanced(*matrices):
    """Rows and columns scaled by powers of two until the largest entries over all matrices are near one."""
    size = np.sum([np.abs(m) for m in matrices], axis=0)
    rows, columns = np.ones(size.shape[0]), np.ones(size.shape[1])
    for _ in range(20):
        for axis, scale in ((1, rows), (0, columns)):
            largest = (size * rows[:, None] * columns).max(axis=axis)
            scale *= np.exp2(-np.rint(np.log2(np.where(largest > 0, largest, 1)) / 2))
    return rows, columns, [m * rows[:, None] * columns for m in matrices]


def operating_point(circuit, nets):
    """Newton from the program's net voltages, first with those held and only the parts' own unknowns free."""
    x = np.array(circuit.start, dtype=float)
    for net, k in circuit.nets.items():
        x[k] = nets[net]
    own = [k for k in range(circuit.size) if k not in circuit.nets.values()]
    for free in (own, list(range(circuit.size))):
        for _ in range(100):
            f, _, _ = circuit.linearise(x)
            rows, columns, (G,) = balanced(circuit.matrices(x)[0][np.ix_(free, free)])
            step = columns * scipy.linalg.lstsq(G, -rows * f[free])[0]  # held nets leave some of a part's own open
            x[free] += step
            if np.all(np.abs(step) <= 1e-12 * np.abs(x[free]) + 1e-15):
                break
        else:
            raise AssertionError("the operating point was not found from the program's net voltages")
    return x


PRIME = 2**61 - 1


def finite_roots(stamps, size):
    """How many finite roots det(G + sC) has: its degree, with every stamp an exact rational number modulo a prime."""
    def residue(value):
        top, bottom = float(value).as_integer_ratio()
        return top * pow(bottom, -1, PRIME) % PRIME

    G, C = ([[0] * size for _ in range(size)] for _ in range(2))
    for row, column, g, c in stamps:
        G[row][column] = (G[row][column] + residue(g)) % PRIME
        C[row][column] = (C[row][column] + residue(c)) % PRIME

    def determinant(s):
        m = [[(g + s * c) % PRIME for g, c in zip(*rows)] for rows in zip(G, C)]
        product = 1
        for k in range(size):
            pivot = next((r for r in range(k, size) if m[r][k]), None)
            if pivot is None:
                return 0
            if pivot != k:
                m[k], m[pivot], product = m[pivot], m[k], -product
            product = product * m[k][k] % PRIME
            inverse = pow(m[k][k], -1, PRIME)
            for r in range(k + 1, size):
                if factor := m[r][k] * inverse % PRIME:
                    m[r] = [(a - factor * b) % PRIME for a, b in zip(m[r], m[k])]
        return product % PRIME

    differences, degree = [determinant(s) for s in range(size + 1)], -1
    for order in range(size + 1):  # Newton's form: the last difference that does not vanish gives the degree
        if differences[0]:
            degree = order
        differences = [(b - a) % PRIME for a, b in zip(differences, differences[1:])]
    return degree


def natural_frequencies(circuit, x):
    """Generalised eigenvalues (scipy.linalg.eig), each polished by Newton on ln det(G + sC)."""
    G, C = circuit.matrices(x)
    scale = 2 * math.pi * 1000  # any frequency of the trade will do: it keeps both matrices of one size
    _, _, (g, c) = balanced(G, scale * C)
    alpha, beta = scipy.linalg.eig(g, -c, right=False, homogeneous_eigvals=True)
    order = np.argsort(np.abs(alpha) / np.maximum(np.abs(beta), 1e-300))
    roots = [alpha[k] / beta[k] for k in order[:finite_roots(circuit.linearise(x)[2], circuit.size)]]
    polished = []
    for s in roots:
        for _ in range(3):
            try:
                trace = np.trace(np.linalg.solve(g + s * c, c))
            except np.linalg.LinAlgError:  # on the root already, to the last digit
                break
            s -= 1 / trace
        polished.append(scale * s)
    return polished


def loop_gain(G, C, side_x, side_y, frequency_hz):
    """Both sides of the opened circuit are driven in turn through a resistor; from the voltages V and currents I that
    result, Y = I·V⁻¹. V's determinant drops out of L, so that a side held by an ideal source does no harm."""
    n, ohm = G.shape[0], 1e3
    m = np.zeros((n + 2, n + 2), dtype=complex)
    m[:n, :n] = G + 2j * math.pi * frequency_hz * C
    for k, side in enumerate((side_x, side_y)):
        m[side, n + k], m[n + k, side], m[n + k, n + k] = -1, 1, ohm
    rows, columns, (scaled,) = balanced(m)
    lu = scipy.linalg.lu_factor(scaled)
    drive = np.eye(n + 2)[:, n:] * rows[:, None]
    states = scipy.linalg.lu_solve(lu, drive)
    states += scipy.linalg.lu_solve(lu, drive - scaled @ states)
    states *= columns[:, None]
    v = states[[side_x, side_y]]
    adjugate = np.array([[v[1, 1], -v[0, 1]], [-v[1, 0], v[0, 0]]])
    y = states[n:] @ adjugate
    return -(y[0, 1] + y[1, 0]) / (y[0, 0] + y[1, 1])


class SecondOpinion(unittest.TestCase):
    def agree(self, program, here, what, floor=0.0):
        self.assertLessEqual(abs(program - here), AGREEMENT * max(abs(here), floor), f"{what}: {program}, here {here}")
        return abs(program - here) / max(abs(here), floor, 1e-300)

    def compare_operating_point(self, found, circuit, x):
        nets = found["operating_point"]["nets"]
        self.assertEqual(set(nets), set(circuit.nets))
        for net, k in circuit.nets.items():
            self.agree(nets[net], x[k], f"net {net}", floor=SMALLEST_V / AGREEMENT)

    def compare_natural_frequencies(self, found, circuit, x):
        here = natural_frequencies(circuit, x)
        program = [complex(r["re"], r["im"]) for r in found["small_signal"]["natural_frequencies"]]
        self.assertEqual(len(program), len(here), "number of natural frequencies")
        worst = 0
        for s in program:
            nearest = min(here, key=lambda root: abs(root - s))
            worst = max(worst, self.agree(s, nearest, "natural frequency"))
            here.remove(nearest)
        return worst

    def compare_loop_gain(self, found, design, path, x):
        cut = found["loop"]["cut"]
        opened = Circuit(design, (cut["part"], cut["terminal"]))
        unopened = Circuit(design)
        places = dict(zip(self.part_order(unopened), x))
        at = [places[name] if name in places else places[self.side_y_name(opened)] for name in self.part_order(opened)]
        G, C = opened.matrices(np.array(at))
        centre = found["small_signal"]["frequency_hz"] or 1000
        curve = batch("curves", path, "--from", centre / 30, "--to", centre * 30, "--points", CURVE_POINTS, "--json")
        self.assertEqual(len(curve["frequency_hz"]), CURVE_POINTS)
        worst = 0
        for f, re, im in zip(curve["frequency_hz"], curve["re"], curve["im"]):
            here = loop_gain(G, C, opened.side_x, opened.side_y, f)
            worst = max(worst, self.agree(complex(re, im), here, f"loop gain at {f} Hz"))
        return worst

    @staticmethod
    def part_order(circuit):
        """Unknowns told apart by name and how often the name came before; the opened circuit has `side x` besides."""
        seen, order = {}, []
        for name in circuit.names:
            seen[name] = seen.get(name, 0) + 1
            order.append((name, seen[name]))
        return order

    @staticmethod
    def side_y_name(opened):
        return opened.names[opened.side_y], 1

    def test_designs(self):
        self.assertGreater(len(DESIGNS), 30)
        for path in DESIGNS:
            with self.subTest(design=path.name):
                design = json.loads(path.read_text())
                found = batch("check", path, "--json")
                circuit = Circuit(design)
                x = operating_point(circuit, found["operating_point"]["nets"])
                self.compare_operating_point(found, circuit, x)
                roots = self.compare_natural_frequencies(found, circuit, x)
                if found["loop"] is None:
                    self.assertTrue(found["loop_reason"])
                    continue
                gains = self.compare_loop_gain(found, design, path, x)
                print(f"{path.parent.name}/{path.name}: natural frequencies to {roots:.1e}, loop gain to {gains:.1e}")


if __name__ == "__main__":
    unittest.main()
