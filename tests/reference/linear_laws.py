"""Temperature laws with NumPy, SciPy and statsmodels, for the checks in tests/published/linear_laws.rs.

Works out, without any code of the core, what the findings of a few invented studies must hold, and
writes studies and numbers to linear_laws.json beside this file:

    python3 -m venv /some/where && /some/where/bin/pip install \
        numpy==2.4.6 scipy==1.17.1 statsmodels==0.15.0
    /some/where/bin/python tests/reference/linear_laws.py

Every law is fitted in the form that textbooks give it (ln A and E, not the core's ln k(T0) and
Ea(T0)), ordinary and weighted least squares by statsmodels, quantiles and roots by SciPy.
Sources: see the functions.
"""

import json
import math
import pathlib

import numpy
import scipy
import statsmodels
import statsmodels.api as sm
from scipy import constants, optimize, stats
from statsmodels.stats.outliers_influence import OLSInfluence

R = constants.R
HERE = pathlib.Path(__file__).parent
LEVEL = 0.95

# Two invented data sets: six runs of first order with unequal stated errors, which scatter more
# than these; five runs of second order without errors, the last of them off.
STATED = {
    "text": "T/°C\tk, 1/h\ts(k)\n"
    "40\t0.0021\t0.0001\n50\t0.0066\t0.0002\n55\t0.0097\t0.0006\n"
    "60\t0.0179\t0.0005\n70\t0.0470\t0.0031\n80\t0.1240\t0.0040\n",
    "celsius": [40.0, 50.0, 55.0, 60.0, 70.0, 80.0],
    "k": [0.0021, 0.0066, 0.0097, 0.0179, 0.0470, 0.1240],
    "sd": [0.0001, 0.0002, 0.0006, 0.0005, 0.0031, 0.0040],
    "per_second": 1.0 / 3600.0,
    "order": 1,
}
BARE = {
    "text": "T/°C\tk / L mol⁻¹ s⁻¹\n"
    "15\t3.1e-4\n25\t7.6e-4\n35\t1.82e-3\n45\t3.95e-3\n65\t2.6e-2\n",
    "celsius": [15.0, 25.0, 35.0, 45.0, 65.0],
    "k": [3.1e-4, 7.6e-4, 1.82e-3, 3.95e-3, 2.6e-2],
    "sd": None,
    "per_second": 1.0,
    "order": 2,
    "initial": 0.8,
}


class Law:
    """ln k(T) = offset(T) + row(T)·b, b the textbook's parameters."""

    def __init__(self, code, power=0.0):
        self.code, self.power = code, power

    def offset(self, t):
        """What no parameter enters: ln T for Eyring, m ln T with a power."""
        return {"eyring": 1.0, "arrhenius-with-power": self.power}.get(self.code, 0.0) * numpy.log(t)

    def row(self, t):
        x = 1000.0 / t
        if self.code == "log-linear":
            return math.log(10.0) * numpy.array([1.0, t - 273.15])
        if self.code == "curved":
            return numpy.array([1.0, x - 3.1, (x - 3.1) ** 2])
        return numpy.array([1.0, -x])

    def energy(self, t):
        """Ea(T) = R T² d ln k/dT as (constant, row)."""
        if self.code == "log-linear":
            return 0.0, math.log(10.0) * R * t * t * numpy.array([0.0, 1.0])
        if self.code == "curved":
            return 0.0, -1000.0 * R * numpy.array([0.0, 1.0, 2.0 * (1000.0 / t - 3.1)])
        power = {"eyring": 1.0, "arrhenius-with-power": self.power}.get(self.code, 0.0)
        return power * R * t, 1000.0 * R * numpy.array([0.0, 1.0])


class Fit:
    """A law fitted under a scatter: the estimate, and the mixture that gives its intervals."""

    def __init__(self, law, data, scatter):
        self.law, self.scatter = law, scatter
        self.t = numpy.array(data["celsius"]) + 273.15
        self.y = numpy.log(data["k"]) + math.log(data["per_second"])
        if data["sd"] is not None:
            self.s = numpy.sqrt(numpy.log1p((numpy.array(data["sd"]) / data["k"]) ** 2))
        self.design = numpy.array([law.row(t) for t in self.t])
        self.observed = self.y - law.offset(self.t)
        self.nu = len(self.t) - self.design.shape[1]
        self.distribution = stats.norm
        self.tau = None
        if scatter == "from-residuals":
            self.model = sm.OLS(self.observed, self.design).fit()
            self.weights = numpy.ones(len(self.t))
            self.covariance = self.model.cov_params()
            self.distribution = stats.t(self.nu)
            self.components = [(1.0, self.model.params, self.covariance, self.model.scale)]
        elif scatter == "as-stated":
            self.model, self.covariance = self.weighted(0.0)
            self.weights = 1.0 / self.s**2
            self.components = [(1.0, self.model.params, self.covariance, 0.0)]
        else:
            self.average()
        self.params = self.model.params
        self.reference = self.weights.sum() / (self.weights / self.t).sum()

    def weighted(self, tau):
        """Known variances s² + τ²: covariance (XᵀWX)⁻¹, not scaled by the residuals."""
        model = sm.WLS(self.observed, self.design, weights=1.0 / (self.s**2 + tau**2)).fit()
        return model, model.normalized_cov_params

    def misfit(self, tau):
        """Q(τ), chi-squared at the true τ."""
        model, _ = self.weighted(tau)
        return float((model.resid**2 / (self.s**2 + tau**2)).sum())

    def average(self, step=0.003, last=1e-9):
        """Masses from F(Q(τ)) on a fine ladder of τ (Iyer, Wang & Mathew 2004; Viechtbauer 2007);
        what is left for no τ lies evenly over τ² up to its moment estimate's standard error at 0
        (DerSimonian & Laird 1986)."""
        nodes = [0.0]
        larger = [stats.chi2.cdf(self.misfit(0.0), self.nu)]
        while larger[-1] >= last:
            nodes.append(0.01 * self.s.min() * math.exp(step * (len(nodes) - 1)))
            larger.append(stats.chi2.cdf(self.misfit(nodes[-1]), self.nu))
        between = -numpy.diff(larger)
        masses = numpy.zeros(len(nodes))
        masses[:-1] += 0.5 * between
        masses[1:] += 0.5 * between
        masses[-1] += larger[-1]
        weights, (_, covariance) = numpy.diag(1.0 / self.s**2), self.weighted(0.0)
        weighted = weights @ self.design
        spread = weights - weighted @ covariance @ weighted.T
        error = math.sqrt(2.0 * self.nu) / numpy.trace(spread)
        rungs = 1000
        nodes += [math.sqrt(error * (i + 0.5) / rungs) for i in range(rungs)]
        masses = numpy.append(masses, numpy.full(rungs, (1.0 - larger[0]) / rungs))
        self.components = []
        for tau, mass in zip(nodes, masses):
            model, covariance = self.weighted(tau)
            self.components.append((mass, model.params, covariance, tau**2))
        if self.misfit(0.0) <= self.nu:
            self.tau = 0.0
        else:
            self.tau = optimize.brentq(lambda tau: self.misfit(tau) - self.nu, 0.0, 100.0, xtol=1e-15)
        self.model, self.covariance = self.weighted(self.tau)
        self.weights = 1.0 / (self.s**2 + self.tau**2)

    def quantile(self, target, probability, runs=0.0):
        """A target's quantile; `runs` future runs add their own variance."""
        constant, row = target
        mass, params, covariances, own = map(numpy.array, zip(*self.components))
        at = constant + params @ row
        scale = numpy.sqrt(numpy.einsum("i,nij,j->n", row, covariances, row) + runs * own)
        if len(mass) == 1:
            return float(at[0] + scale[0] * self.distribution.ppf(probability))
        ends = at + scale * stats.norm.ppf(probability)
        below = lambda v: mass @ stats.norm.cdf((v - at) / scale) - probability
        return optimize.brentq(below, ends.min() - 1e-9, ends.max() + 1e-9, xtol=1e-15, rtol=1e-14)

    def interval(self, target, runs=0.0):
        return [self.quantile(target, p, runs) for p in (0.5 - LEVEL / 2, 0.5 + LEVEL / 2)]

    def value(self, target):
        return float(target[0] + target[1] @ self.params)

    def error(self, target):
        return math.sqrt(target[1] @ self.covariance @ target[1])

    def ln_rate(self, t):
        return self.law.offset(t), self.law.row(t)

    def temperature(self, edge, ln_rate):
        """Where ln k, or an edge of its band, reaches a value (Fieller 1954)."""
        # Far out the band may turn back: widen the bracket from the middle of the runs.
        middle = self.reference
        for wide in numpy.arange(0.02, 0.6, 0.02):
            low, high = middle * (1 - wide), middle * (1 + wide)
            if (edge(low) - ln_rate) * (edge(high) - ln_rate) < 0:
                return optimize.brentq(lambda t: edge(t) - ln_rate, low, high, xtol=1e-11)
        return None

    def deviance(self):
        """−2 ln L at its maximum, and how many variances were estimated."""
        n = len(self.t)
        if self.scatter == "from-residuals":
            return -2.0 * self.model.llf, 1

        def at(tau):
            v = self.s**2 + tau**2
            return numpy.log(2 * math.pi * v).sum() + self.misfit(tau)

        if self.scatter == "as-stated":
            return at(0.0), 0
        grid = numpy.linspace(-9.0, 1.0, 400)
        best = grid[numpy.argmin([at(math.exp(g)) for g in grid])]
        least = optimize.minimize_scalar(
            lambda g: at(math.exp(g)), bounds=(best - 0.1, best + 0.1), method="bounded",
            options={"xatol": 1e-9},
        )
        return min(at(0.0), least.fun), 1

    def aicc(self):
        """Hurvich & Tsai 1989, K counting every estimated variance."""
        deviance, variances = self.deviance()
        k, n = self.design.shape[1] + variances, len(self.t)
        return deviance + 2 * k + 2 * k * (k + 1) / (n - k - 1) if n > k + 1 else None


def law_findings(fit):
    """Numbers of the law: pointers below /law."""
    t0 = fit.reference
    energy = fit.law.energy(t0)
    ln_rate = fit.ln_rate(t0)
    plus = lambda a, b, factor, constant=0.0: (a[0] + factor * b[0] + constant, a[1] + factor * b[1])
    enthalpy = (energy[0] - R * t0, energy[1])
    planck = math.log(constants.k / constants.h * t0)
    entropy = ((ln_rate[0] - planck) * R + enthalpy[0] / t0, R * ln_rate[1] + enthalpy[1] / t0)
    exact, quantiles = {"/reference_temperature_kelvin": t0}, {}
    for name, target in {
        "ln_rate_at_reference": ln_rate,
        "activation_energy": energy,
        "ln_pre_exponential_factor": plus(ln_rate, energy, 1.0 / (R * t0)),
        "enthalpy_of_activation": enthalpy,
        "entropy_of_activation": entropy,
    }.items():
        exact[f"/{name}/value"] = fit.value(target)
        exact[f"/{name}/standard_error"] = fit.error(target)
        quantiles[f"/{name}/low"], quantiles[f"/{name}/high"] = fit.interval(target)
    rows = [ln_rate[1], energy[1]]
    for i in range(2):
        exact[f"/covariance/{i}/{i}"] = float(rows[i] @ fit.covariance @ rows[i])
    if fit.tau:
        exact["/run_to_run_sd"] = fit.tau
    if fit.scatter != "from-residuals":
        exact["/chi_squared"] = fit.misfit(0.0)
        exact["/chi_squared_p"] = float(stats.chi2.sf(fit.misfit(0.0), fit.nu))
    return {f"/law{p}": v for p, v in exact.items()}, {f"/law{p}": v for p, v in quantiles.items()}


def theta(data, gone):
    """∫k dt at which a fraction is gone."""
    if data["order"] == 1:
        return -math.log1p(-gone)
    return gone / (1.0 - gone) / data["initial"]


def gone_after(data, reached):
    if data["order"] == 1:
        return -math.expm1(-reached)
    return data["initial"] * reached / (1.0 + data["initial"] * reached)


def celsius(value):
    return {"value": value, "unit": "°C"}


def percent(value):
    return {"value": value, "unit": "%"}


def hours(value):
    return {"value": value, "unit": "h"}


ASKED = [
    {"question": "rate-at", "temperature": celsius(25)},
    {"question": "time-to-extent", "temperature": celsius(25), "gone": percent(5)},
    {"question": "longest-stand", "temperature": celsius(25), "keep": percent(98)},
    {"question": "longest-stand", "temperature": celsius(25), "keep": percent(98), "bound": "mean"},
    {"question": "completion-time", "temperature": celsius(75), "gone": percent(99)},
    {"question": "temperature-for", "gone": percent(90), "time": hours(24)},
    {"question": "warmest-storage", "keep": percent(95), "time": hours(100)},
    {"question": "extent-after", "temperature": celsius(35), "time": hours(48)},
    {"question": "speed-up", "to": celsius(60), "from": celsius(25)},
    {"question": "equivalent-time", "temperature": celsius(55), "time": hours(1000), "other_temperature": celsius(25)},
]


def answers(fit, data):
    """One dictionary a question of ASKED; keys are pointers below the answer."""
    at = lambda c: fit.ln_rate(c + 273.15)
    room, warm, hot = at(25.0), at(35.0), at(75.0)
    minus = lambda a, b: (a[0] - b[0], a[1] - b[1])
    found = []

    def two_sided(target, runs, of):
        mean, one = [sorted(map(of, fit.interval(target, r))) for r in (0.0, runs)]
        found.append({
            "/value": of(fit.value(target)), "/low": mean[0], "/high": mean[1],
            "/detail/prediction_low": one[0], "/detail/prediction_high": one[1],
        })

    two_sided(room, 1, math.exp)
    k = math.exp(fit.value(room))
    energy = fit.value(fit.law.energy(298.15))
    found[-1]["/detail/z_value"] = math.log(10) * R * 298.15**2 / energy
    found[-1]["/detail/q10"] = math.exp(fit.value(minus(warm, room)))
    found[-1]["/detail/half_life"] = theta(data, 0.5) / k
    if data["order"] == 1:
        found[-1]["/detail/d_value"] = math.log(10) / k
    five = theta(data, 0.05)
    two_sided(room, 1, lambda ln_k: five / math.exp(ln_k))

    two = theta(data, 0.02)
    stand = {r: two / math.exp(fit.quantile(room, LEVEL, r)) for r in (0, 1)}
    best = two / math.exp(fit.value(room))
    sides = {"/detail/mean_low": stand[0], "/detail/prediction_low": stand[1]}
    found.append({"/value": best, "/low": stand[1]} | sides)
    found.append({"/value": best, "/low": stand[0]} | sides)
    done = {r: theta(data, 0.99) / math.exp(fit.quantile(hot, 1 - LEVEL, r)) for r in (0, 1)}
    found.append({
        "/value": theta(data, 0.99) / math.exp(fit.value(hot)), "/high": done[1],
        "/detail/mean_high": done[0], "/detail/prediction_high": done[1],
    })

    edge = lambda p, runs: lambda t: fit.quantile(fit.ln_rate(t), p, runs)
    middle = lambda t: fit.value(fit.ln_rate(t))
    needed = math.log(theta(data, 0.9) / 86400.0)
    low, high = 0.5 - LEVEL / 2, 0.5 + LEVEL / 2
    found.append({
        "/value": fit.temperature(middle, needed),
        "/low": fit.temperature(edge(high, 0), needed), "/high": fit.temperature(edge(low, 0), needed),
        "/detail/prediction_low": fit.temperature(edge(high, 1), needed),
        "/detail/prediction_high": fit.temperature(edge(low, 1), needed),
        "/detail/to_be_sure": fit.temperature(edge(1 - LEVEL, 1), needed),
    })
    needed = math.log(five / 360000.0)
    found.append({
        "/value": fit.temperature(middle, needed), "/low": fit.temperature(edge(LEVEL, 1), needed),
        "/detail/mean_low": fit.temperature(edge(LEVEL, 0), needed),
        "/detail/prediction_low": fit.temperature(edge(LEVEL, 1), needed),
    })
    two_sided(warm, 1, lambda ln_k: gone_after(data, math.exp(ln_k) * 172800.0))
    two_sided(minus(at(60.0), room), 2, math.exp)
    two_sided(minus(room, at(55.0)), 2, lambda ln_ratio: 3.6e6 * math.exp(ln_ratio))
    # What a bent law does not reach near the data stays out.
    return [{p: v for p, v in answer.items() if v is not None} for answer in found]


RIVALS = [Law("arrhenius"), Law("eyring"), Law("log-linear"), Law("curved")]


def key_number(asked, answer):
    one_sided = {"longest-stand": "/low", "warmest-storage": "/low", "completion-time": "/high"}
    return answer.get(one_sided.get(asked["question"], "/value"))


def rivals(fit, data):
    """ΔAICc and Akaike weights among all laws that have an AICc, and what the others answer."""
    others = [Fit(law, data, fit.scatter) for law in RIVALS if law.code != fit.law.code]
    scores = {f.law.code: f.aicc() for f in [fit, *others] if f.aicc() is not None}
    best = min(scores.values())
    total = sum(math.exp((best - s) / 2) for s in scores.values())
    ranked = {
        code: {"delta_aicc": s - best, "weight": math.exp((best - s) / 2) / total}
        for code, s in scores.items() if code != fit.law.code
    }
    kept = [f for f in others if f.law.code in ranked and ranked[f.law.code]["delta_aicc"] <= 7.0]
    given = [answers(f, data) for f in kept]
    span = [[key_number(asked, g[i]) for g in given] for i, asked in enumerate(ASKED)]
    span = [[v for v in numbers if v is not None] for numbers in span]
    return ranked, [{"/rival_low": min(v), "/rival_high": max(v)} if v else {} for v in span]


def document(data, assumed):
    measured = {"form": "rates", "text": data["text"]}
    if "initial" in data:
        measured["initial_concentration"] = {"value": data["initial"], "unit": "mol/L"}
    return {"measured": measured, "assumed": assumed}


def study(name, law, data, scatter, diagnose=False):
    fit = Fit(law, data, scatter)
    assumed = {"temperature_law": law.code, "scatter": scatter}
    if law.power:
        assumed["power"] = law.power
    exact, quantiles = law_findings(fit)
    ranked, spans = rivals(fit, data)
    replies = answers(fit, data)
    found = {
        "name": name, "study": document(data, assumed), "exact": exact, "quantiles": quantiles,
        # Without an answer of its own a question is refused, whatever the rivals say.
        "answers": [r | s if "/value" in r else r for r, s in zip(replies, spans)], "rivals": ranked,
    }
    if diagnose:
        found["diagnostics"] = diagnostics(fit, data)
    return found


def without(fit, data, run):
    """The activation energy in kJ/mol at the whole fit's T0, one run left out."""
    less = {
        key: value[:run] + value[run + 1:] if isinstance(value, list) else value
        for key, value in data.items()
    }
    other = Fit(fit.law, less, fit.scatter)
    return other.value(other.law.energy(fit.reference)) / 1000.0


def diagnostics(fit, data):
    """Cook's distance and external studentised residuals; F test of a further (1/T)² term."""
    # Weighted least squares are ordinary ones of rows times the root of their weight.
    root = numpy.sqrt(fit.weights)
    bent = numpy.column_stack([fit.design, (1000.0 / fit.t - 3.1) ** 2])
    model, larger = [
        sm.OLS(fit.observed * root, design * root[:, None]).fit() for design in (fit.design, bent)
    ]
    influence = OLSInfluence(model)
    f, p, _ = larger.compare_f_test(model)
    return {
        "cooks_distances": influence.cooks_distance[0].tolist(),
        "studentised_residuals": numpy.abs(influence.resid_studentized_external).tolist(),
        "curvature_f": float(f), "curvature_p": float(p),
        "kilojoules_without": [without(fit, data, run) for run in range(len(fit.t))],
    }


def thermometer(name, data, u):
    """Errors in T and ln k by minimising the likelihood's misfit, standard errors from the adjusted
    points (York et al. 2004); u is the thermometer's standard deviation in K."""
    fit = Fit(Law("arrhenius"), data, "as-stated")
    x, y = 1000.0 / fit.t, fit.y
    vx, vy = (1000.0 * u / fit.t**2) ** 2, fit.s**2

    def at(slope):
        w = 1.0 / (vy + slope**2 * vx)
        intercept = (w @ (y - slope * x)) / w.sum()
        return w, intercept, w @ (y - intercept - slope * x) ** 2

    start = -fit.params[1]
    # The derivative's root is sharper than the flat minimum itself.
    h = 1e-4 * abs(start)
    wide = optimize.minimize_scalar(lambda b: at(b)[2], bracket=(start - h, start + h)).x

    def derivative(b):
        w, a, _ = at(b)
        r = y - a - b * x
        return -2 * (w * r) @ x - 2 * b * ((w * r) ** 2) @ vx

    slope = optimize.brentq(derivative, wide - 0.05, wide + 0.05, xtol=1e-15)
    w, intercept, misfit = at(slope)
    adjusted = x + w * slope * vx * (y - intercept - slope * x)
    design = numpy.column_stack([numpy.ones(len(x)), -adjusted])
    covariance = numpy.linalg.inv(design.T @ (w[:, None] * design))
    fit.weights, fit.reference = w, w.sum() / (w / fit.t).sum()
    fit.params, fit.covariance = numpy.array([intercept, -slope]), covariance
    fit.components = [(1.0, fit.params, covariance, 0.0)]
    fit.misfit = lambda tau: float(misfit)
    exact, quantiles = law_findings(fit)
    assumed = {"temperature_law": "arrhenius", "scatter": "as-stated"}
    asked = document(data, assumed)
    asked["measured"]["thermometer"] = {"sd": {"value": u, "unit": "K"}}
    return {"name": name, "study": asked, "exact": exact, "quantiles": quantiles,
            "answers": answers(fit, data)}


def main():
    averaged, power = "as-stated-plus-run-to-run", Law("arrhenius-with-power", -1.5)
    studies = [
        study("averaged", Law("arrhenius"), STATED, averaged, diagnose=True),
        study("as stated", Law("arrhenius"), STATED, "as-stated", diagnose=True),
        study("residuals of stated", Law("arrhenius"), STATED, "from-residuals", diagnose=True),
        study("residuals", Law("arrhenius"), BARE, "from-residuals", diagnose=True),
    ]
    for law in [Law("eyring"), Law("log-linear"), power, Law("curved")]:
        studies.append(study(f"averaged, {law.code}", law, STATED, averaged))
        studies.append(study(f"residuals, {law.code}", law, BARE, "from-residuals"))
    studies.append(thermometer("thermometer", STATED, 0.4))
    versions = {m.__name__: m.__version__ for m in (numpy, scipy, statsmodels)}
    text = written({"made_by": versions, "asked": ASKED, "studies": studies}, 4)
    (HERE / "linear_laws.json").write_text(text + "\n", encoding="utf-8")
    print(versions)


def written(value, levels):
    """JSON with its outer levels spread over lines, but for the innermost dictionaries."""
    if levels == 0 or not isinstance(value, (dict, list)) or (levels == 1 and isinstance(value, dict)):
        return json.dumps(value, ensure_ascii=False)
    if isinstance(value, list):
        return "[\n" + ",\n".join(written(v, levels - 1) for v in value) + "\n]"
    return "{\n" + ",\n".join(f"{json.dumps(k)}: {written(v, levels - 1)}" for k, v in value.items()) + "\n}"


main()
