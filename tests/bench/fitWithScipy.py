"""The same fit with scipy: least_squares over start, T0, amplitude and three terms of damping, solve_ivp inside.

Runs come as JSON on standard input; seconds and T0 of each go to standard output.
"""

import json
import sys
import time

import numpy as np
from scipy.integrate import solve_ivp
from scipy.optimize import least_squares


def predict(amplitude, gamma, beta, dry, marks, swings):
    """Times of passes down through the lowest point, and amplitudes at turning points on the release side."""

    def rates(_, y):
        x, v = y
        return [v, -np.sin(x) - 2 * gamma * v - beta * v * abs(v) - dry * np.tanh(v / 1e-4)]

    def down(_, y):
        return y[0]

    def turn(_, y):
        return y[1]

    down.direction = -1
    turn.direction = -1
    end = 2 * np.pi * (marks + 1) * 1.1
    found = solve_ivp(rates, (0, end), [amplitude, 0.0], method="DOP853", rtol=1e-9, atol=1e-11, events=[down, turn])
    turns = np.concatenate([[amplitude], found.y_events[1][:, 0]])
    turns = turns[turns > 0]
    return found.t_events[0][:marks], np.interp(swings, np.arange(len(turns)), turns)


def fit(run):
    times = np.array(run["times"])
    swings = np.array([r["swing"] for r in run["readings"]])
    read = np.array([r["amplitude"] for r in run["readings"]])
    u = np.array([r["u"] for r in run["readings"]])
    scale = np.array([1e-3, 1e-2, 1e-3])

    def left(p):
        t, a = predict(p[2], *(p[3:] * scale), len(times), swings)
        return np.concatenate([(times - p[0] - p[1] / (2 * np.pi) * t) / run["jitter"], (read - a) / u])

    period = (times[-1] - times[0]) / (len(times) - 1) / 1.05
    first = [-period / 4, period, read[0], 1, 1, 1]
    lower = [-np.inf, 0, 0.01, 0, 0, 0]
    return least_squares(left, first, bounds=(lower, [np.inf, np.inf, 3.1, 100, 100, 100]), x_scale="jac").x[1]


results = []
for run in json.load(sys.stdin):
    start = time.perf_counter()
    period = fit(run)
    results.append({"seconds": time.perf_counter() - start, "period": period})
json.dump(results, sys.stdout)
