"""Reference stops for the stop model, by the public solvers of SciPy.

Written from the equations, in another language than the program under test: the slide's position comes from the triangle of crank and
rod, the torque straight from the pressure over time, the moments of clutch release and brake contact by halving; nothing is shared.

    python reference.py             writes reference-stops.txt (fixed seed)
    python reference.py --bench     times the cases of the Rust benchmark

Needs numpy and scipy. Each case is solved twice, by DOP853 (explicit, order 8) and by Radau or LSODA (implicit / multistep); the file keeps
the DOP853 figures and the script refuses to write a case in which the two differ by more than 2e-8 s.
"""

import math
import sys
import time

import numpy as np
import scipy
from scipy.integrate import solve_ivp
from scipy.interpolate import CubicSpline

G = 9.80665
COLUMNS = [
    "kinematics", "stroke_m", "rod_m", "j_rot", "slide_kg", "die_kg", "f_cb", "t_f",
    "brake", "t_full", "t_d", "t_r", "p0", "p_clutch", "p_touch", "tau_fast", "tau_slow", "p_hi", "p_lo", "tau_dump",
    "path", "speed_per_min", "start_deg", "stop_s", "stop_angle_rad", "travel_m",
]


def crank_position(r, length):
    """Position by the geometry of the triangle; derivatives of the position by hand from x = r cos + sqrt(L^2 - r^2 sin^2)."""
    def x(a):
        return r + length - (r * math.cos(a) + math.sqrt(length**2 - (r * math.sin(a)) ** 2))

    def dx(a):
        root = math.sqrt(length**2 - (r * math.sin(a)) ** 2)
        return r * math.sin(a) + r * r * math.sin(2 * a) / (2 * root)

    def ddx(a):
        root = math.sqrt(length**2 - (r * math.sin(a)) ** 2)
        return r * math.cos(a) + r * r * math.cos(2 * a) / root + (r * r * math.sin(2 * a)) ** 2 / (4 * root**3)

    return x, dx, ddx


def table_travel(angle, r, length):
    """A link drive for the table cases: a crank whose angle is uneven over the turn (slow down, quick back); 0 at angle 0."""
    uneven = angle - 0.25 * (1 - math.cos(angle)) * math.sin(angle) * 0.5
    return r * (1 - math.cos(uneven)) + length * (1 - math.sqrt(1 - (r / length * math.sin(uneven)) ** 2))


def table_position(r, length):
    """36 rows, rounded as they are written to the table in the Rust test (same rule), joined by SciPy's periodic cubic spline."""
    angles = [2 * math.pi * i / 36 for i in range(37)]
    rows = [round(table_travel(a, r, length), 9) for a in angles[:36]]
    spline = CubicSpline(angles, rows + [rows[0]], bc_type="periodic")
    first, second = spline.derivative(1), spline.derivative(2)
    turn = 2 * math.pi
    return (lambda a: float(spline(a % turn)), lambda a: float(first(a % turn)), lambda a: float(second(a % turn)),
            rows, angles[1:36])


def pressure_of(case):
    """Gauge pressure over time, and the moments at which its law changes."""
    p0, t_d = case["p0"], case["t_d"]
    if case["path"] == "emergency":
        return (lambda t: p0 if t < t_d else p0 * math.exp((t_d - t) / case["tau_dump"])), [t_d]
    if case["brake"] == "single":
        return (lambda t: p0 if t < t_d else p0 * math.exp((t_d - t) / case["tau_fast"])), [t_d]
    t1 = t_d + case["tau_fast"] * math.log(p0 / case["p_hi"])
    t2 = t1 + case["tau_slow"] * math.log(case["p_hi"] / case["p_lo"])

    def p(t):
        if t < t_d:
            return p0
        if t < t1:
            return p0 * math.exp((t_d - t) / case["tau_fast"])
        if t < t2:
            return case["p_hi"] * math.exp((t1 - t) / case["tau_slow"])
        return case["p_lo"] * math.exp((t2 - t) / case["tau_fast"])

    return p, [t_d, t1, t2]


def when_below(p, level, start, end=60.0):
    lo, hi = start, end
    for _ in range(200):
        mid = 0.5 * (lo + hi)
        if p(mid) > level:
            lo = mid
        else:
            hi = mid
    return 0.5 * (lo + hi)


def torque_of(case):
    """Torque over time, the moment the clutch lets go, and every moment at which the torque has a corner."""
    full = case["t_full"]
    if case["brake"] == "ramp":
        t_d, t_r = case["t_d"], case["t_r"]
        return (lambda t: full * min(max((t - t_d) / t_r, 0.0), 1.0)), t_d, [t_d, t_d + t_r]
    p, changes = pressure_of(case)
    release = when_below(p, case["p_clutch"], case["t_d"])
    touch = when_below(p, case["p_touch"], case["t_d"])
    return (lambda t: full * min(max(1 - p(t) / case["p_touch"], 0.0), 1.0)), release, changes + [touch]


def solve(case, method, rtol=1e-12, polished=True):
    r, length = case["stroke_m"] / 2, case["rod_m"]
    knots = []
    if case["kinematics"] == "table":
        x, dx, ddx, _, knots = table_position(r, length)
    else:
        x, dx, ddx = crank_position(r, length)
    mass = case["slide_kg"] + case["die_kg"]
    pull = mass * G - case["f_cb"]
    torque, release, corners = torque_of(case)
    w0 = case["speed_per_min"] * 2 * math.pi / 60
    start = math.radians(case["start_deg"])

    def rhs(t, y):
        a, w = y
        d1 = dx(a)
        inertia = case["j_rot"] + mass * d1 * d1
        return [w, (pull * d1 - case["t_f"] - torque(t) - mass * d1 * ddx(a) * w * w) / inertia]

    def standstill(_t, y):
        return y[1]

    standstill.terminal = True
    standstill.direction = -1

    def make_knot(angle):
        def knot(_t, y):
            return math.sin((y[0] - angle) / 2)
        knot.terminal = True
        return knot

    t, y = release, [start + w0 * release, w0]
    ends = sorted({c for c in corners if c > release + 1e-15}) + [10.0]
    for end in ends:
        # Restart at every corner; the torque is evaluated just inside the stretch so that rounding cannot step over the corner.
        knot_angles = [2 * math.pi * i / 36 for i in range(36)] if knots else []
        while t < end - 1e-15:
            # A spline's third derivative jumps at its knots: stop there too and go on.
            ahead = []
            if knot_angles:
                step = 2 * math.pi / 36
                ahead = [make_knot((math.floor(y[0] / step + 1e-9) + 1) * step)]
            found = solve_ivp(rhs, (t, end), y, method=method, rtol=rtol, atol=[1e-14, 1e-13], events=[standstill] + ahead,
                              dense_output=True)
            if not found.success:
                return None
            if len(found.t_events[0]):
                t_stop = found.t_events[0][0]
                a_stop = found.y_events[0][0][0]
                # Polish the event: a short step with the solver itself from a point before it.
                before = found.t[-2] if len(found.t) > 1 else t
                if polished:
                    t_stop, a_stop = polish(rhs, method, before, found.sol(before) if len(found.t) > 2 else np.array(y), t_stop)
                load = abs(pull * dx(a_stop))
                return t_stop, a_stop, x(a_stop) - x(start), torque(t_stop), load
            t, y = found.t[-1], [found.y[0][-1], found.y[1][-1]]
            if y[0] - start > 4 * math.pi:
                return None
    return None


def polish(rhs, method, t0, y0, t_stop):
    """Newton's method on the end time of a solve from t0: the event at solver accuracy rather than at that of its interpolant."""
    for _ in range(6):
        found = solve_ivp(rhs, (t0, t_stop), y0, method=method, rtol=2.3e-14 if method != "LSODA" else 1e-12, atol=1e-15)
        a, w = found.y[0][-1], found.y[1][-1]
        rate = rhs(t_stop, [a, w])[1]
        change = -w / rate
        t_stop += change
        a += 0.5 * w * change
        if abs(change) < 1e-14:
            break
    return t_stop, a


def random_case(rng):
    kinematics = rng.choice(["crank", "crank", "crank", "table"])
    stroke = float(rng.uniform(0.03, 0.5))
    rod = stroke / 2 * float(rng.uniform(1.5, 9.0))
    slide = float(np.exp(rng.uniform(math.log(50), math.log(8000))))
    die = float(rng.choice([0.0, rng.uniform(0, 0.7) * slide]))
    weight = (slide + die) * G
    j_slide = (slide + die) * (stroke / 2) ** 2
    j_rot = float(j_slide * np.exp(rng.uniform(math.log(1.0), math.log(30))))
    f_cb = float(weight * rng.choice([0.0, rng.uniform(0.3, 1.2)]))
    load = abs(weight - f_cb) * stroke / 2
    speed = float(rng.uniform(8, 130))
    w0 = speed * 2 * math.pi / 60
    # A braking time of 20 to 250 ms at full torque, and enough torque to hold.
    t_full = float(max((j_rot + j_slide) * w0 / rng.uniform(0.02, 0.25), rng.choice([0.8, 1.05, 1.6, 1.6]) * load))
    case = dict(
        kinematics=str(kinematics), stroke_m=stroke, rod_m=rod, j_rot=j_rot, slide_kg=slide, die_kg=die, f_cb=f_cb,
        t_f=float(t_full * rng.choice([0.0, rng.uniform(0.005, 0.05)])),
        brake=str(rng.choice(["ramp", "single", "two"])), t_full=t_full, t_d=float(rng.uniform(0.0, 0.08)),
        t_r=float(rng.uniform(0.005, 0.12)),
        p0=float(rng.uniform(45e5, 70e5)), p_clutch=float(rng.uniform(28e5, 40e5)), p_touch=float(rng.uniform(18e5, 44e5)),
        tau_fast=float(rng.uniform(0.005, 0.04)), tau_slow=float(rng.uniform(0.03, 0.15)),
        p_hi=float(rng.uniform(9e5, 15e5)), p_lo=float(rng.uniform(1e5, 6e5)), tau_dump=float(rng.uniform(0.004, 0.03)),
        path=str(rng.choice(["normal", "emergency"])), speed_per_min=speed, start_deg=float(rng.uniform(0, 360)),
    )
    return {k: (float(f"{v:.6g}") if isinstance(v, float) else v) for k, v in case.items()}


def write(count=260, seed=20261201):
    rng = np.random.default_rng(seed)
    lines = [
        "# Stops by an independent solver, written by reference.py beside this file.",
        f"# Python {sys.version.split()[0]}, numpy {np.__version__}, scipy {scipy.__version__}; seed {seed}.",
        "# solve_ivp DOP853, rtol 1e-12, atol 1e-14 rad and 1e-13 rad/s; every case checked against Radau (table cases: LSODA) to 2e-8 s.",
        "# Pressures in Pa, times in s, torques in N m, forces in N. stop 'refused' = the brake torque at standstill is less than the load.",
        "\t".join(COLUMNS),
    ]
    worst = 0.0
    kept = refused = skipped = 0
    while kept < count:
        case = random_case(rng)
        found = solve(case, "DOP853")
        if found is None:
            skipped += 1
            continue
        t_stop, a_stop, travel, held, load = found
        if abs(held - load) < 1e-3 * load:
            skipped += 1
            continue
        other = solve(case, "LSODA" if case["kinematics"] == "table" else "Radau", 1e-12 if case["kinematics"] == "table" else 1e-11)
        gap = abs(other[0] - t_stop) if other else math.inf
        if gap > 2e-8:
            raise SystemExit(f"the two solvers differ by {gap} s: {case}")
        worst = max(worst, gap)
        if held < load:
            refused += 1
            answer = ["refused", "refused", "refused"]
        else:
            answer = [f"{t_stop:.12g}", f"{a_stop - math.radians(case['start_deg']):.12g}", f"{travel:.12g}"]
        lines.append("\t".join([str(case[c]) for c in COLUMNS[:-3]] + answer))
        kept += 1
    lines.insert(4, f"# {kept} cases, {refused} refused; {skipped} draws left out (no standstill in 10 s or two turns, or holding in the "
                    f"balance). Greatest difference of the two solvers {worst:.2g} s.")
    path = __file__.replace("reference.py", "reference-stops.txt")
    with open(path, "w", encoding="ascii") as out:
        out.write("\n".join(lines) + "\n")
    print(lines[1], lines[4], sep="\n")


def bench():
    base = dict(kinematics="crank", stroke_m=0.15, rod_m=0.6, j_rot=22.0, slide_kg=900.0, die_kg=0.0, f_cb=8000.0, t_f=60.0,
                t_full=4200.0, path="normal")
    ramp = dict(base, brake="ramp", t_d=0.045, t_r=0.06)
    two = dict(base, brake="two", t_d=0.03, p0=60e5, p_clutch=36e5, p_touch=24e5, tau_fast=0.02, tau_slow=0.06, p_hi=12e5, p_lo=3e5,
               tau_dump=0.015)
    for name, brake in [("ramp brake", ramp), ("two-stage pressure brake", two)]:
        # Every 12th angle and every 6th speed of the map: 300 stops.
        cases = [dict(brake, speed_per_min=2.0 * s, start_deg=float(a)) for a in range(0, 360, 12) for s in range(6, 61, 6)]
        start = time.perf_counter()
        for case in cases:
            solve(case, "DOP853", 1e-9, polished=False)
        took = time.perf_counter() - start
        print(f"SciPy {scipy.__version__} DOP853, rtol 1e-9, {name}: {len(cases)} stops, {took / len(cases) * 1e6:.0f} us a stop "
              f"({len(cases) / took:.0f} stops/s), one thread")


if __name__ == "__main__":
    bench() if "--bench" in sys.argv else write()
