"""The rate case of the benchmark in plain Python: the same laws and property series, one condenser after another.

Reads {"fluid", "coolant": series as the engine holds them, "points": [...]} on standard input and writes
{"secondsPerPoint", "results"} on standard output. Standard library only.
"""
import json
import sys
import time
from math import exp, expm1, log, log10, pi, sqrt

G = 9.80665
S = 0.16  # row exponent, staggered
CLOSE = 1e-9


def cbrt(x):
    return x ** (1 / 3)


def series(c, i, x):
    y = x + x
    b5 = c[i + 5]
    b4 = y * b5 + c[i + 4]
    b3 = y * b4 + c[i + 3] - b5
    b2 = y * b3 + c[i + 2] - b4
    b1 = y * b2 + c[i + 1] - b3
    return x * b1 + c[i] - b2


class Series:
    def __init__(self, data, stride):
        self.c = data
        self.stride = stride

    def segment(self, T):
        c, at = self.c, 0
        while c[at] is not None and T > c[at]:
            at += self.stride
        return at, (T - c[at + 1]) * c[at + 2]


class Fluid(Series):
    def __init__(self, data):
        super().__init__(data, 78)

    def film(self, T):
        """Density, specific heat, viscosity, conductivity of the liquid."""
        at, x = self.segment(T)
        return [series(self.c, at + 3 + 6 * n, x) for n in range(4)]

    def vapour(self, T):
        """Density, latent heat, viscosity of the vapour."""
        at, x = self.segment(T)
        c = self.c
        return exp(series(c, at + 39, x)), series(c, at + 45, x), series(c, at + 57, x)

    def log_pressure(self, T):
        at, x = self.segment(T)
        return series(self.c, at + 33, x)

    def saturation(self, p, T, kelvin):
        """Saturation temperature at p from T nearby; `kelvin` a unit of ln p."""
        target = log(p)
        for _ in range(20):
            step = (target - self.log_pressure(T)) * kelvin
            T += step
            if abs(step) < 1e-9:
                break
        return T


class Coolant(Series):
    def __init__(self, data):
        super().__init__(data, 27)

    def at(self, T):
        """Density, specific heat, viscosity, conductivity."""
        at, x = self.segment(T)
        return [series(self.c, at + 3 + 6 * n, x) for n in range(4)]


def gnielinski(re, pr, diameter_over_length, factor):
    def turbulent(re):
        f8 = (1.8 * log10(re) - 1.5) ** -2 / 8
        entry = 1 + cbrt(diameter_over_length) ** 2
        return f8 * (re - 1000) * pr / (1 + 12.7 * sqrt(f8) * (cbrt(pr) ** 2 - 1)) * entry * factor

    def laminar(re):
        gz = re * pr * diameter_over_length
        a = 1.615 * cbrt(gz) - 0.7
        b = (2 / (1 + 22 * pr)) ** (1 / 6) * sqrt(gz)
        return cbrt(3.66**3 + 0.7**3 + a**3 + b**3)

    if re >= 4000:
        return turbulent(re)
    if re <= 2300:
        return laminar(re)
    w = (re - 2300) / 1700
    return (1 - w) * laminar(2300) + w * turbulent(4000)


def churchill(re, rough):
    a = (-2.457 * log((7 / re) ** 0.9 + 0.27 * rough)) ** 16
    b = (37530 / re) ** 16
    return 8 * ((8 / re) ** 12 + (a + b) ** -1.5) ** (1 / 12)


def row_loss(re, laminar, turbulent, end):
    if re <= 0:
        return 0.0
    return laminar / re + (turbulent / re**0.25 + end) * (1 - exp(-(re + 200) / 1000))


def share_of_rise(T, rise, star, p):
    """Where along the coolant's rise the flux of the whole tube stands, the flux going as the power p of the difference."""
    if rise <= 0:
        return 0.5
    units = rise / star
    if abs(1 - p) < 1e-9:
        end, integral = exp(-units), units
    else:
        integral = units * (star / T) ** (1 - p)
        left = 1 - (1 - p) * integral
        end = left ** (1 / (1 - p)) if left > 0 else 0.0
    return (1 - ((1 - end) / integral) ** (1 / p)) / (1 - end)


def rate(fluid, coolant, point):
    Ts0, Tin, velocity = point["saturationTemperature"], point["inletTemperature"], point["velocity"]
    Do, wall, k_wall, rough = point["outsideDiameter"], point["wallThickness"], point["conductivity"], point["roughness"]
    rows, per_row, passes = point["rows"], point["tubesPerRow"], point["passes"]
    L, ratio = point["length"], point["pitchRatio"]
    Di = Do - 2 * wall
    tubes = rows * per_row
    bore = pi / 4 * Di * Di
    a, b = ratio, sqrt(3) / 2 * ratio
    void = 1 - pi / (4 * a * b)
    gap = (ratio - 1) / ratio
    width = (per_row + 0.5) * ratio * Do
    flow_area = L * width
    diagonal = b < 0.5 * sqrt(2 * a + 1)
    c = sqrt(a * a / 4 + b * b) if diagonal else a
    laminar = 280 * pi * ((sqrt(b) - 0.6) ** 2 + 0.75) / ((4 * a * b - pi) * c**1.6)
    turbulent = 2.5 + 1.2 / (a - 0.85) ** 1.08 + 0.4 * (b / a - 1) ** 3 - 0.01 * (a / b - 1) ** 3
    end_loss = 0.0
    if rows < 10:
        first = (2 * (c - 1) / (a * (a - 1))) ** 2 if diagonal else 1 / (a * a)
        end_loss = first * (1 / max(5, rows) - 0.1)
    resistance = point["outsideFouling"] + Do * log(Do / Di) / (2 * k_wall) + Do / Di * point["insideFouling"]
    pass_of = [passes - 1 - next(j for j in range(passes) if r < (j + 1) * rows // passes) for r in range(rows)]
    pass_tubes = [per_row * pass_of.count(j) for j in range(passes)]
    flow = coolant.at(Tin)[0] * velocity * bore * tubes / passes
    p_in = exp(fluid.log_pressure(Ts0))
    kelvin = 1e-3 / (fluid.log_pressure(Ts0 + 1e-3) - fluid.log_pressure(Ts0))
    inlet_latent = fluid.vapour(Ts0)[1]

    capacity = flow * coolant.at(Tin)[1]
    vapour = -expm1(-1000 * tubes * pi * Do * L / capacity) * capacity * (Ts0 - Tin) / inlet_latent
    starts, means, walls = [Tin] * passes, [Tin] * passes, [Tin] * passes
    x = [0.35 * (Ts0 - Tin)] * rows
    share = [0.5] * rows
    made = [vapour / rows] * rows
    temperature = [Ts0] * rows
    last = 0.0
    duty = drop = 0.0
    for _ in range(60):
        inner, heats, sides = [], [0.0] * passes, []
        for j in range(passes):
            rho, cp, mu, k = coolant.at(means[j])
            _, cp_w, mu_w, k_w = coolant.at(walls[j])
            v = flow / (rho * bore * pass_tubes[j])
            re, pr = rho * v * Di / mu, mu * cp / k
            h = gnielinski(re, pr, Di / L, (pr / (mu_w * cp_w / k_w)) ** 0.11) * k / Di
            inner.append(resistance + Do / (Di * h))
            sides.append((rho, cp, v, re, h))
        p, remaining, gathered, duty = p_in, vapour, 0.0, 0.0
        weighted = 0.0
        for r in range(rows):
            j = pass_of[r]
            Ts = temperature[r] = fluid.saturation(p, temperature[r], kelvin) if p != p_in else Ts0
            rho_v, latent, mu_v = fluid.vapour(Ts)
            middle = max(0.0, remaining - 0.5 * made[r])
            U_v = middle / (rho_v * flow_area * void)
            rho, cp, mu, k = fluid.film(Ts - x[r] + 0.33 * x[r])
            dh = latent + 0.375 * cp * x[r]
            arriving = gathered / (per_row * L) * dh / (pi * Do)
            T = Ts - starts[j]
            g = pi * Do * L * pass_tubes[j] / (flow * sides[j][1])
            U = 1 / (inner[j] + share[r] * g)
            drive = G * rho * (rho - rho_v) * Do**3 * (latent + 0.68 * cp * x[r]) / (mu * k)
            two_phase = rho * U_v * Do / mu
            y, low, high, e = x[r] if 0 < x[r] < T else 0.5 * T, 0.0, T, 0.75
            for _ in range(60):
                moving = two_phase * y
                root = sqrt(moving * moving + 9.47 * drive * y)
                single = 0.416 * k / Do * sqrt(y * (moving + root))
                e = 0.75 + 0.25 * moving / root
                line = U * (T - y)
                total = line + arriving
                row = single * (line / total) ** S if arriving > 0 else single
                f = row - line
                slope = row * (e / y - (S * arriving * U / (line * total) if arriving > 0 else 0)) + U
                if f > 0:
                    high = y
                else:
                    low = y
                step = f / slope
                if abs(step) <= CLOSE * T:
                    y -= step
                    break
                y = y - step if low < y - step < high else 0.5 * (low + high)
            x[r] = y
            q = U * (T - y)
            dh = latent + 0.375 * cp * y
            e /= 1 - S * arriving / (q + arriving)
            star = inner[j] * q + y
            w = y / star
            share[r] = share_of_rise(T, q * g, star, 1 / (1 - w + w / e))
            heat = q * pi * Do * L * per_row
            made[r] = heat / dh
            heats[j] += heat
            duty += heat
            weighted += y / rows
            throat = middle / (flow_area * rho_v * gap)
            loss = row_loss(rho_v * throat * Do / mu_v, laminar, turbulent, end_loss) * rho_v * throat * throat / 2
            slow = (gathered + 0.5 * made[r]) / (flow_area * rho * gap)
            wet = row_loss(rho * slow * Do / mu, laminar, turbulent, end_loss) * rho * slow * slow / 2
            p = max(0.2 * p_in, p - (loss + 8 * sqrt(loss * wet) + wet))
            gathered += made[r]
            remaining = max(0.0, remaining - made[r])
        drop = p_in - p
        Tc = Tin
        change = 0.0
        for j in range(passes):
            rho, cp, v, re, h = sides[j]
            rise = heats[j] / (flow * cp)
            change = max(change, abs(Tc - starts[j]), abs(Tc + 0.5 * rise - means[j]))
            starts[j] = Tc
            means[j] = Tc + 0.5 * rise
            walls[j] = means[j] + heats[j] / (pi * Di * L * pass_tubes[j] * h)
            Tc += rise
        settled = abs(gathered / vapour - 1) < CLOSE and abs(duty - last) < CLOSE * duty and change < CLOSE * (Ts0 - Tin)
        last = duty
        vapour = gathered
        if settled:
            break
    coolant_drop = 0.0
    for j in range(passes):
        rho, cp, v, re, h = sides[j]
        coolant_drop += (churchill(re, rough / Di) * L / Di + 1.5 + (0.5 if j > 0 else 0)) * rho * v * v / 2
    area = tubes * pi * Do * L
    mean = (Tc - Tin) / log((Ts0 - Tin) / (Ts0 - Tc))
    return {
        "duty": duty,
        "outsideArea": area,
        "overallCoefficient": duty / (area * mean),
        "meanCoefficient": duty / (area * weighted),
        "coolantPressureDrop": coolant_drop,
        "vapourPressureDrop": drop,
        "saturationTemperatureDrop": Ts0 - fluid.saturation(p_in - drop, Ts0, kelvin),
        "coolantMassFlow": flow,
        "coolantOutletTemperature": Tc,
        "meanWallSubcooling": weighted,
    }


def main():
    given = json.load(sys.stdin)
    fluid, coolant = Fluid(given["fluid"]), Coolant(given["coolant"])
    points = given["points"]
    rate(fluid, coolant, points[0])
    start = time.process_time()
    results = [rate(fluid, coolant, point) for point in points]
    spent = time.process_time() - start
    json.dump({"secondsPerPoint": spent / len(points), "results": results}, sys.stdout)


main()
