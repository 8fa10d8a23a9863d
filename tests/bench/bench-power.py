"""Powers, radius, headroom, limiting group and reserves beside numpy and scipy, in one run.  usage: bench-power.py BENCH-POWER

The other side is what one would write with those libraries: HiGHS for the powers (not at 1,000 links), eigvals for the radius, 40 bisections with
solve for the headroom, connected_components for the group, one inv and 20 steps a link for the reserves.  Prints; nothing fails for a time.
"""
import os
import statistics
import subprocess
import sys
import tempfile
import time

import numpy as np
from scipy.optimize import linprog
from scipy.sparse.csgraph import connected_components


def system(n):
    """Random pairs on a square that keeps its density: F, u, limits; spectral radius 0.7."""
    rng = np.random.default_rng(n)
    side = 10 * np.sqrt(n)
    senders = rng.uniform(0, side, (n, 2))
    receivers = senders + rng.uniform(-3, 3, (n, 2))
    distance = np.maximum(np.linalg.norm(receivers[:, None] - senders[None], axis=2), 1)
    gain = distance ** -3.5
    f = gain / np.diag(gain)[:, None]
    np.fill_diagonal(f, 0)
    f *= 0.7 / max(abs(np.linalg.eigvals(f)))
    u = 1e-3 / np.diag(gain) / np.diag(gain).max()
    return f, u, np.full(n, 50 * u.max())


def timed(run, runs):
    times = []
    for _ in range(runs):
        start = time.perf_counter()
        value = run()
        times.append(1e3 * (time.perf_counter() - start))
    return statistics.median(times), value


def by_libraries(f, u, c):
    n = len(u)
    eye = np.eye(n)

    def powers():
        return linprog(np.ones(n), A_ub=f - eye, b_ub=-u, bounds=list(zip(np.zeros(n), c)), method="highs").x

    def headroom():
        low, high = 1e-6, 1e6
        for _ in range(40):
            t = np.sqrt(low * high)
            p = np.linalg.solve(eye - t * f, t * u)
            low, high = (t, high) if (p > 0).all() and (p <= c).all() else (low, t)
        return low

    def reserves():
        a = np.linalg.inv(eye - f)
        p, out = a @ u, np.empty(n)
        for i in range(n):
            d = a[:, i] / a[i, i]
            low, high = 0.0, c[i]
            for _ in range(20):
                middle = 0.5 * (low + high)
                low, high = (middle, high) if (p + (middle - p[i]) * d <= c).all() else (low, middle)
            q = p + (low - p[i]) * d
            out[i] = low / (f[i] @ q + u[i])
        return out

    runs = 3 if n >= 1000 else 7
    return {
        "powers": timed(powers, runs)[0] if n < 1000 else timed(lambda: np.linalg.solve(eye - f, u), runs)[0],
        "radius": timed(lambda: max(abs(np.linalg.eigvals(f))), runs)[0],
        "headroom": timed(headroom, runs)[0],
        "group": timed(lambda: connected_components(f > 0, directed=True, connection="strong"), runs)[0],
        "reserves": timed(reserves, 1 if n >= 1000 else runs)[0],
    }


program = sys.argv[1]
before = None
for n in (50, 200, 1000):
    f, u, c = system(n)
    with tempfile.NamedTemporaryFile(suffix=".bin") as file:
        np.concatenate([[n], f.ravel(), u, c]).astype(float).tofile(file.name)
        text = subprocess.run([program, file.name], capture_output=True, text=True, check=True, env=dict(os.environ)).stdout
    ours = {line.split()[0]: float(line.split()[1]) for line in text.splitlines() if not line.startswith("#")}
    theirs = by_libraries(f, u, c)
    print(f"{n} links" + (" (powers: solve instead of a linear programme)" if n >= 1000 else ""))
    for name in ours:
        print(f"  {name:9s} {ours[name]:10.3f} ms   libraries {theirs[name]:10.3f} ms   {theirs[name] / ours[name]:7.1f} times")
    total, other = sum(ours.values()), sum(theirs.values())
    growth = "" if before is None else f"   grows with the {np.log(total / before[1]) / np.log(n / before[0]):.1f}th power of the number of links"
    print(f"  {'all':9s} {total:10.3f} ms   libraries {other:10.3f} ms   {other / total:7.1f} times{growth}")
    before = (n, total)
