"""Writes stored/sets.csv and stored/results.csv: data sets, and what general-purpose libraries make of them.

Needs Python 3.11 or later with numpy, scipy, statsmodels, pandas, pymannkendall and detecta from PyPI. Run in this folder:
    python reference_values.py

sets.csv     set,x,y,weight        the points; weights are used only by the quantities whose name begins with wls_
results.csv  set,quantity,argument,value,library
The drawn sets come from numpy's generator with the seed below; they are ordinary drifting readings, rounded as a stop watch rounds.
"""
import importlib.metadata
import math
import os

import numpy as np
import pandas as pd
import pymannkendall
import scipy.optimize
import scipy.stats
import statsmodels.api as sm
from detecta import detect_cusum


def named(*packages):
    return " ".join(f"{p} {importlib.metadata.version(p)}" for p in packages)


rng = np.random.default_rng(20260917)


def norris():
    folder = os.path.join(os.path.dirname(scipy.stats.__file__), "tests", "data", "nist_linregress", "Norris.dat")
    lines = open(folder).read().splitlines()
    start = max(i for i, line in enumerate(lines) if line.startswith("Data:"))
    pairs = [tuple(map(float, line.split())) for line in lines[start + 1:] if line.strip()]
    assert len(pairs) == 36
    return [x for y, x in pairs], [y for y, x in pairs]


def drawn(count, slope, scatter, decimals, spacing=(26, 35), level=180.0):
    days = np.cumsum(rng.integers(spacing[0], spacing[1], count)).astype(float)
    values = np.round(level + slope * days + rng.normal(0, scatter, count), decimals)
    return days.tolist(), values.tolist()


SETS = {
    "norris": norris(),
    "five_textbook": ([1.0, 2.0, 3.0, 4.0, 5.0], [1.26, 1.27, 1.12, 1.16, 1.03]),
    "four_textbook": ([1.0, 2.0, 3.0, 4.0], [10.0, 15.0, 14.0, 20.0]),
    "small_7": drawn(7, 0.02, 1.5, 3),
    "small_10": drawn(10, 0.03, 1.0, 4),
    "exact_16": drawn(16, 0.004, 1.0, 5),
    "monthly_12": drawn(12, 0.027, 1.2, 2),
    "ties_24": drawn(24, 0.006, 1.6, 0),
    "many_120": drawn(120, 0.003, 1.8, 1),
    "falling_9": drawn(9, -0.05, 1.0, 2),
    "level_15": drawn(15, 0.0, 1.5, 1),
}
wild = drawn(15, 0.02, 0.8, 1)
wild[1][6] = 260.0
SETS["wild_15"] = wild
pairs = drawn(8, 0.02, 1.0, 0)
SETS["two_a_day_16"] = (sorted(pairs[0] * 2), np.round(180 + 0.02 * np.array(sorted(pairs[0] * 2)) + rng.normal(0, 1, 16), 0).tolist())

WEIGHTS = {name: np.round(rng.uniform(0.5, 6.0, len(points[0])), 2).tolist() for name, points in SETS.items()}
results = []


def put(name, quantity, argument, value, library):
    results.append((name, quantity, argument, float(value), library))


def lines():
    library = named("statsmodels")
    for name, (x, y) in SETS.items():
        x, y, w = np.array(x), np.array(y), np.array(WEIGHTS[name])
        for kind, fit in [("ols", sm.OLS(y, sm.add_constant(x)).fit()), ("wls", sm.WLS(y, sm.add_constant(x), weights=w).fit())]:
            put(name, f"{kind}_intercept", "", fit.params[0], library)
            put(name, f"{kind}_slope", "", fit.params[1], library)
            put(name, f"{kind}_intercept_sd", "", fit.bse[0], library)
            put(name, f"{kind}_slope_sd", "", fit.bse[1], library)
            put(name, f"{kind}_residual_sd", "", math.sqrt(fit.scale), library)
            put(name, f"{kind}_r_squared", "", fit.rsquared, library)
            if fit.pvalues[1] > 1e-12:
                put(name, f"{kind}_slope_probability", "", fit.pvalues[1], library)
            low, high = fit.conf_int(0.05)[1]
            put(name, f"{kind}_slope_low", 0.95, low, library)
            put(name, f"{kind}_slope_high", 0.95, high, library)
            for place in [x.min() - 10, float(np.median(x)), x.max() + 200]:
                # In statsmodels the weight of a new observation is 1 unless told otherwise.
                at = fit.get_prediction(np.array([[1.0, place]]))
                mean = at.conf_int(obs=False, alpha=0.05)[0]
                single = at.conf_int(obs=True, alpha=0.05)[0]
                upper = at.conf_int(obs=True, alpha=0.10)[0][1]
                put(name, f"{kind}_line_low", place, mean[0], library)
                put(name, f"{kind}_line_high", place, mean[1], library)
                put(name, f"{kind}_reading_low", place, single[0], library)
                put(name, f"{kind}_reading_high", place, single[1], library)
                put(name, f"{kind}_upper_bound_95", place, upper, library)


def trends():
    for name, (x, y) in SETS.items():
        x, y = np.array(x), np.array(y)
        one_x_each = len(set(x)) == len(x)
        if one_x_each:
            order = np.argsort(x)
            test = pymannkendall.original_test(y[order])
            library = named("pymannkendall")
            put(name, "mk_sum", "", test.s, library)
            put(name, "mk_tau", "", test.Tau, library)
            put(name, "mk_variance", "", test.var_s, library)
            put(name, "mk_z", "", test.z, library)
            # p is printed as 2 (1 - cdf |z|): small ones have no digits left.
            if test.p > 1e-6:
                put(name, "mk_normal_two_sided", "", test.p, library)
        library = named("scipy")
        tied = not one_x_each or len(set(y)) < len(y)
        if not tied and len(x) <= 20:
            put(name, "mk_exact_two_sided", "", scipy.stats.kendalltau(x, y, method="exact").pvalue, library)
            put(name, "mk_exact_rising", "", scipy.stats.kendalltau(x, y, method="exact", alternative="greater").pvalue, library)
        if tied:
            # Without continuity correction, so it gives the variance for ties in x and y by p -> z = S / sqrt(var).
            p = scipy.stats.kendalltau(x, y, method="asymptotic").pvalue
            put(name, "kendall_uncorrected_z", "", scipy.stats.norm.isf(p / 2), library)
        joint = scipy.stats.theilslopes(y, x, 0.95, method="joint")
        put(name, "ts_slope", "", joint.slope, library)
        put(name, "ts_intercept", "", joint.intercept, library)
        put(name, "ts_low", 0.95, joint.low_slope, library)
        put(name, "ts_high", 0.95, joint.high_slope, library)


def charts():
    for name, (x, y) in SETS.items():
        y = np.array(y)
        # 1.47, so that no sum is exactly zero: detecta does not count such a sum as a new beginning, the textbooks do.
        target, sigma = round(float(np.median(y[: max(4, len(y) // 2)])), 1), 1.47
        for weight in [0.2, 0.3]:
            series = pd.Series([target] + y.tolist()).ewm(alpha=weight, adjust=False).mean()
            put(name, "ewma_last", f"{target} {sigma} {weight}", series.iloc[-1], named("pandas"))
            put(name, "ewma_greatest", f"{target} {sigma} {weight}", series.iloc[1:].max(), named("pandas"))
        # detecta sums the differences of its input, so the running total of (reading - target) makes it the tabular CUSUM.
        total = np.concatenate([[0.0], np.cumsum(y - target)])
        alarm, began, _, _ = detect_cusum(total, 4 * sigma, 0.5 * sigma, ending=False, show=False)
        first = alarm[0] - 1 if len(alarm) else -1
        put(name, "cusum_first", f"{target} {sigma}", first, named("detecta"))
        if len(alarm):
            put(name, "cusum_began", f"{target} {sigma}", began[0], named("detecta"))


def forecasts():
    library = named("statsmodels", "scipy")
    for name in ["small_10", "monthly_12", "wild_15", "many_120", "ties_24", "two_a_day_16"]:
        x, y = map(np.array, SETS[name])
        fit = sm.OLS(y, sm.add_constant(x)).fit()
        low, high = fit.conf_int(0.05)[1]
        latest = x.max()
        def bound(day):
            return fit.get_prediction(np.array([[1.0, day]])).conf_int(obs=True, alpha=0.10)[0][1]
        def line(day):
            return fit.params[0] + fit.params[1] * day
        for above in [1.0, 5.0, 20.0]:
            limit = round(max(y.max(), bound(latest)) + above, 1)
            end = latest + 3652.5
            if low <= 0:
                put(name, "forecast_none", limit, 0, library)
            elif bound(end) < limit:
                put(name, "forecast_beyond", limit, 0, library)
            else:
                put(name, "forecast_bound", limit, scipy.optimize.brentq(lambda d: bound(d) - limit, latest, end, xtol=1e-11, rtol=1e-14), library)
                if line(end) >= limit:
                    put(name, "forecast_line", limit, (limit - fit.params[0]) / fit.params[1], library)


def splits():
    """Two dates by one model with dummy variables; a series by a line over time through the split of each date."""
    library = named("statsmodels")
    with open("stored/splits.csv", "w") as out:
        out.write(f"# stops of several dates; {named('numpy')}; written by reference_values.py\n")
        out.write("case,day,speed,time\n")
        for case, delays, brakings in [
            ("steady", [40, 40, 40, 40, 40], [1.5, 1.5, 1.5, 1.5, 1.5]),
            ("delay", [40, 46, 51, 55, 62], [1.5, 1.5, 1.5, 1.5, 1.5]),
            ("braking", [40, 40, 40, 40, 40], [1.5, 1.62, 1.71, 1.8, 1.93]),
            ("both", [40, 47, 52, 58, 66], [1.5, 1.63, 1.75, 1.9, 2.0]),
        ]:
            days, speeds, times = [], [], []
            for index, (delay, braking) in enumerate(zip(delays, brakings)):
                for speed in [20.0, 20.0, 20.0, 45.0, 45.0, 60.0]:
                    days.append(30.0 * index + (index % 2))
                    speeds.append(speed)
                    times.append(round(delay + braking * speed + rng.normal(0, 0.8), 1))
            for row in zip(days, speeds, times):
                out.write(",".join([case, *map(repr, row)]) + "\n")
            days, speeds, times = map(np.array, (days, speeds, times))
            dates = sorted(set(days.tolist()))
            for date in dates:
                on = days == date
                fit = sm.OLS(times[on], sm.add_constant(speeds[on])).fit()
                for quantity, value in [("delay", fit.params[0]), ("braking", fit.params[1]), ("delay_error", fit.bse[0]), ("braking_error", fit.bse[1]), ("scatter", math.sqrt(fit.scale))]:
                    put(case, f"split_{quantity}", date, value, library)
            on = (days == dates[0]) | (days == dates[-1])
            late = (days[on] == dates[-1]).astype(float)
            middle = speeds[on].mean()
            for centre, word in [(0.0, "delay"), (middle, "stopping")]:
                v = speeds[on] - centre
                fit = sm.OLS(times[on], np.column_stack([np.ones(len(v)), v, late, late * v])).fit()
                interval = fit.conf_int(0.05)
                for quantity, row in [(word, 2), ("braking", 3)]:
                    put(case, f"two_{quantity}", "", fit.params[row], library)
                    put(case, f"two_{quantity}_low", "", interval[row][0], library)
                    put(case, f"two_{quantity}_high", "", interval[row][1], library)
            middle = speeds.mean()
            fits = [sm.OLS(times[days == d], sm.add_constant(speeds[days == d])).fit().params for d in dates]
            for word, values in [("delay", [f[0] for f in fits]), ("braking", [f[1] for f in fits]), ("stopping", [f[0] + f[1] * middle for f in fits])]:
                fit = sm.OLS(np.array(values), sm.add_constant(np.array(dates))).fit()
                interval = fit.conf_int(0.05)[1]
                put(case, f"series_{word}", "", fit.params[1], library)
                put(case, f"series_{word}_low", "", interval[0], library)
                put(case, f"series_{word}_high", "", interval[1], library)


lines()
trends()
charts()
forecasts()
splits()
with open("stored/sets.csv", "w") as out:
    out.write(f"# data sets; {named('numpy')}; norris from the data files of {named('scipy')}; written by reference_values.py\n")
    out.write("set,x,y,weight\n")
    for name, (x, y) in SETS.items():
        for row in zip(x, y, WEIGHTS[name]):
            out.write(",".join([name, *map(repr, row)]) + "\n")
with open("stored/results.csv", "w") as out:
    out.write("# what the libraries named make of the data sets; written by reference_values.py\n")
    out.write("set,quantity,argument,value,library\n")
    for name, quantity, argument, value, library in results:
        out.write(f"{name},{quantity},{argument},{value!r},{library}\n")
print(len(results), "results")
