"""The plain scripted way to what bench_refresh times: numpy and scipy, one solve per frequency, for comparison.

Equations come from tests/outside/nodal.py. Prints the median in milliseconds of processor time per design, and, given
the output of bench_refresh, how many times longer the script takes.
Use: bench_script.py BENCH_REFRESH_OUTPUT DESIGN…
"""
import json
import os
import pathlib
import statistics
import sys
import time

os.environ["OMP_NUM_THREADS"] = os.environ["OPENBLAS_NUM_THREADS"] = "1"
sys.path.insert(0, str(pathlib.Path(__file__).parent.parent / "outside"))

import numpy as np  # noqa: E402  (after the number of threads is set)
import scipy.linalg  # noqa: E402
import scipy.optimize  # noqa: E402

from nodal import Circuit  # noqa: E402

SWEEP_POINTS = 600


def rest(circuit):
    x = np.array(circuit.start, dtype=float)
    for _ in range(100):
        f, _, _ = circuit.linearise(x)
        step = np.linalg.lstsq(circuit.matrices(x)[0], -f, rcond=None)[0]
        x += step
        if np.all(np.abs(step) <= 1e-12 * np.abs(x) + 1e-15):
            return x
    return x


def loop_gain(G, C, side_x, side_y, w):
    n = G.shape[0]
    m = np.zeros((n + 2, n + 2), dtype=complex)
    m[:n, :n] = G + 1j * w * C
    for k, side in enumerate((side_x, side_y)):
        m[side, n + k], m[n + k, side], m[n + k, n + k] = -1, 1, 1e3
    states = np.linalg.solve(m, np.eye(n + 2)[:, n:])
    v, i = states[[side_x, side_y]], states[n:]
    y = i @ np.array([[v[1, 1], -v[0, 1]], [-v[1, 0], v[0, 0]]])
    return -(y[0, 1] + y[1, 0]) / (y[0, 0] + y[1, 1])


def refresh(design):
    cut = design["cut"]
    circuit, opened = Circuit(design), Circuit(design, (cut["part"], cut["terminal"]))
    x = rest(circuit)
    G, C = circuit.matrices(x)
    roots = scipy.linalg.eig(G, -C, right=False)
    roots = roots[np.isfinite(roots) & (np.abs(roots) < 1e12)]
    upper = roots[roots.imag > 0]
    w0 = max(upper, key=lambda s: s.real).imag if len(upper) else 2 * np.pi * 1000
    G, C = opened.matrices(rest(opened))
    frequencies = w0 * np.logspace(-2, 2, SWEEP_POINTS)
    gains = [loop_gain(G, C, opened.side_x, opened.side_y, w) for w in frequencies]
    phase = np.angle(gains)
    for k in np.nonzero((phase[:-1] * phase[1:] < 0) & (np.abs(np.diff(phase)) < np.pi))[0]:
        scipy.optimize.brentq(lambda w: np.angle(loop_gain(G, C, opened.side_x, opened.side_y, w)),
                              frequencies[k], frequencies[k + 1], xtol=1e-12 * w0)


def median_ms(design, repeats=5):
    times = []
    for _ in range(repeats):
        begin = time.process_time()
        refresh(design)
        times.append(1e3 * (time.process_time() - begin))
    return statistics.median(times)


def main():
    program_ms = {}
    for line in pathlib.Path(sys.argv[1]).read_text().splitlines()[1:]:
        words = line.split()
        program_ms[words[0]] = float(words[2])
    print(f"{'median, ms':32} {'script':>9} {'program':>9} {'ratio':>7}")
    for path in map(pathlib.Path, sys.argv[2:]):
        script = median_ms(json.loads(path.read_text()))
        program = program_ms[path.stem]
        print(f"{path.stem:32} {script:9.1f} {program:9.3f} {script / program:7.0f}", flush=True)


np.seterr(all="ignore")
main()
