"""Writes stored/tolerance_factors.csv and stored/student_t.csv: reference values that the tests compare with.

Needs Python 3.11 or later with scipy and mpmath from PyPI (versions are written into the files). Run in this folder:
    python tolerance_factors.py

k is the root of  P(T <= k sqrt n) = c  for the noncentral t with n - 1 degrees of freedom and delta = z_p sqrt n.
Two ways, neither of them the program's:
  mpmath  the integral over u of Phi(t u - delta) times the density of U = sqrt(chi2/nu), with the gamma function, by Gauss-Legendre
          panels at 34 digits; for small n also the series in incomplete beta functions (Guenther / AS 243), which must agree to 1e-20;
  scipy   scipy.stats.nct.ppf, stored beside it as it comes.
"""
import mpmath as mp
import scipy
from scipy import stats

mp.mp.dps = 34
COUNTS = [2, 3, 4, 5, 7, 10, 20, 43, 100, 300, 1000, 10000, 1000000]
SHARES = [
    ("0.5", "0.9"), ("0.75", "0.5"), ("0.9", "0.95"), ("0.95", "0.95"), ("0.99", "0.95"),
    ("0.95", "0.99"), ("0.99", "0.99"), ("0.999", "0.999"), ("0.999999", "0.999999"),
]


def above(x):
    return mp.erfc(x / mp.sqrt(2)) / 2


def tail(t, nu, delta):
    """P(T > t) by quadrature in u."""
    log_front = mp.log(2) + (nu / 2) * mp.log(nu / 2) - mp.loggamma(nu / 2)

    def f(u):
        return mp.exp(log_front + (nu - 1) * mp.log(u) - nu * u * u / 2) * above(t * u - delta)

    width = 1 / mp.sqrt(2 * nu)
    low = max(mp.mpf(0), 1 - 14 * width)
    high = 1 + 14 * width
    cross = (delta / t) if t > 0 else mp.mpf(1)
    cross_width = (1 / t) if t > 0 else mp.mpf(1)
    places = {low, high}
    for step in range(-14, 15):
        places.add(1 + step * width)
        places.add(cross + step * cross_width)
    places = sorted(p for p in places if low <= p <= high)
    return mp.quad(f, places, method="gauss-legendre", maxdegree=5)


def tail_by_series(t, nu, delta):
    x = t * t / (nu + t * t)
    half = delta * delta / 2
    total, j = mp.mpf(0), 0
    while True:
        p = mp.exp(-half + j * mp.log(half) - mp.loggamma(j + 1)) if half > 0 else mp.mpf(j == 0)
        q = delta / mp.sqrt(2) * (mp.exp(-half + j * mp.log(half) - mp.loggamma(j + mp.mpf(3) / 2)) if half > 0 else 0)
        term = p * mp.betainc(j + mp.mpf(1) / 2, nu / 2, 0, x, regularized=True) + q * mp.betainc(j + 1, nu / 2, 0, x, regularized=True)
        total += term
        if j > half and term < mp.mpf(10) ** -32:
            return above(-delta) - total / 2
        j += 1


def solve(function, start):
    return mp.findroot(function, (start, start * mp.mpf("1.0001")), solver="secant", tol=mp.mpf(10) ** -50, maxsteps=60, verify=False)


def quantile_of_normal(p):
    return mp.sqrt(2) * mp.erfinv(2 * mp.mpf(p) - 1)


def main():
    head = f"scipy {scipy.__version__}, mpmath {mp.__version__ if hasattr(mp, '__version__') else ''}"
    with open("stored/tolerance_factors.csv", "w") as out:
        out.write(f"# one-sided normal tolerance factor k; {head}; written by tolerance_factors.py\n")
        out.write("n,coverage,confidence,k_mpmath,k_scipy\n")
        for n in COUNTS:
            for p, c in SHARES:
                nu, root = mp.mpf(n - 1), mp.sqrt(n)
                delta = quantile_of_normal(p) * root
                missing = 1 - mp.mpf(c)
                by_scipy = stats.nct.ppf(float(c), n - 1, float(delta)) / float(root)
                start = by_scipy if by_scipy == by_scipy and 0 < by_scipy < 1e9 else float(delta / root) + 1
                k = solve(lambda k: mp.log(tail(k * root, nu, delta) / missing), mp.mpf(start))
                assert abs(tail(k * root, nu, delta) / missing - 1) < mp.mpf(10) ** -20, (n, p, c)
                if n <= 20:
                    series = tail_by_series(k * root, nu, delta)
                    assert abs(series / missing - 1) < mp.mpf(10) ** -18, (n, p, c, series)
                out.write(f"{n},{p},{c},{mp.nstr(k, 20)},{by_scipy!r}\n".replace("np.float64(", "").replace(")", ""))
                out.flush()
    with open("stored/student_t.csv", "w") as out:
        out.write(f"# Student t exceeded with probability tail; {head}; written by tolerance_factors.py\n")
        out.write("degrees_of_freedom,tail,t_mpmath\n")
        for nu in [1, 2, 3, 4, 9, 34, 118, 1000, 100000]:
            for q in ["0.25", "0.05", "0.025", "0.005", "0.000001"]:
                def over(t):
                    return mp.betainc(mp.mpf(nu) / 2, mp.mpf(1) / 2, 0, nu / (nu + t * t), regularized=True) / 2
                start = mp.mpf(float(stats.t.isf(float(q), nu)))
                t = solve(lambda t: mp.log(over(t) / mp.mpf(q)), start)
                out.write(f"{nu},{q},{mp.nstr(t, 20)}\n")


main()
