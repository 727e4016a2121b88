"""Under a stagnant lid heat flow and lid follow the published law of drips, at three Rayleigh numbers.

    q = C k (alpha rho g/(kappa eta_i))^(1/3) DT_rh^(4/3),    or  Nu = C theta^(-4/3) Ra_i^(1/3)

for the heat flux q into the lid's base, eta_i the viscosity at the temperature T_i of the interior, DT_rh = |eta/(d eta/dT)| there, theta = DT/DT_rh,
Ra_i with eta_i and the drop DT over the layer. The lid ends at T_i - a DT_rh. Published, from memory:
    C = 0.47 +- 0.03  laboratory, cooled from above       Davaille & Jaupart 1993, JFM 253, 141 (the error is doubtful)
    C = 0.53          two dimensions, time dependent      Solomatov & Moresi 2000, JGR 105, 21795
    C = 0.52          two dimensions, heated from below   Dumoulin, Doin & Fleitout 1999, JGR 104, 12759 (doubtful)
    a = 2.23          Grasset & Parmentier 1998, JGR 103, 18171;   others 2.21 (Breuer & Spohn 2006) to 2.54 (Thiriet et al. 2019, doubtful)
so that the law's own scatter is 0.44 <= C <= 0.56 and 2.21 <= a <= 2.54. What was seen: docs/decisions/stagnant-lid-laws.md.

T_i is the highest of the mean temperatures of depths, where drips come from: it is not that of the column temperature_internal, a mean, which is lower.
Called by ctest with the path of the program.
"""

import csv
import math
import os
import sys

HERE = os.path.dirname(os.path.abspath(__file__))
sys.path.insert(0, os.path.join(HERE, "..", "support", "python"))
import runs  # noqa: E402

FACTORS, DROPS = (0.44, 0.56), (2.21, 2.54)  # C and a of the law, above
GAMMA, WIDTH = math.log(1e6), 4.0  # of stagnant_lid_law.toml; viscosity exp(-GAMMA (T - 1)), so that DT_rh = 1/GAMMA


class Run:
    """Means over the last half of a march. Heat flows are by width, depths z from the surface."""

    def __init__(self, folder, rayleigh, heating):
        self.rayleigh, self.heating = rayleigh, heating
        history = runs.columns(folder)
        begin = len(history["time"]) // 2
        self.history = {name: values[begin:] for name, values in history.items()}
        self.surface_flux = self.mean("heat_flow_outer") / WIDTH
        where = os.path.join(folder, "profiles")
        profiles = [profile(os.path.join(where, name)) for name in sorted(os.listdir(where))]
        profiles = profiles[(len(profiles) + 1) // 2 :]
        rows = [[sum(values) / len(profiles) for values in zip(*level)] for level in zip(*profiles)]
        self.depth, self.temperature, self.flux = ([row[k] for row in rows] for k in range(3))
        self.interior = max(self.temperature)

    def mean(self, name):
        time, values = self.history["time"], self.history[name]
        steps = [(t1 - t0, (v0 + v1) / 2) for t0, t1, v0, v1 in zip(time, time[1:], values, values[1:])]
        return sum(dt * v for dt, v in steps) / (time[-1] - time[0])

    def at_isotherm(self, temperature):
        """Depth and heat flux where the mean temperature, from the interior outwards, falls to this one."""
        k = max(k for k, value in enumerate(self.temperature) if value > temperature)
        share = (self.temperature[k] - temperature) / (self.temperature[k] - self.temperature[k + 1])
        return tuple(values[k] + share * (values[k + 1] - values[k]) for values in (self.depth, self.flux))

    def rayleigh_internal(self):
        return internal(self.rayleigh, self.interior)


def profile(path):
    with open(path) as file:
        rows = csv.DictReader(line for line in file if not line.startswith("#"))
        flow = lambda row: (float(row["heat_conducted"]) + float(row["heat_advected"])) / WIDTH  # noqa: E731
        return [(1 - float(row["radius"]), float(row["temperature"]), flow(row)) for row in rows]


def internal(rayleigh, temperature):
    return rayleigh * math.exp(-GAMMA * (1 - temperature))


def flux_by_law(factor, rayleigh_internal):
    return factor * (rayleigh_internal / GAMMA**4) ** (1 / 3)


def lid_of_conduction(base, heating):
    """In balance: the heat that leaves is produced, so that T = heating z (1 - z/2) down to the lid's base."""
    return 1 - math.sqrt(max(0, 1 - 2 * base / heating))


def predicted(rayleigh, heating, factor, drop):
    """Temperature of the interior, lid and Nusselt number by the law alone."""
    low, high = drop / GAMMA, 1.5
    for _ in range(60):
        middle = (low + high) / 2
        lid = lid_of_conduction(middle - drop / GAMMA, heating)
        if flux_by_law(factor, internal(rayleigh, middle)) < heating * (1 - lid):
            low = middle
        else:
            high = middle
    return middle, lid, heating / middle


def march(scratch, rayleigh, heating, cells, start, end_time):
    folder = scratch.path(f"{rayleigh:g}")
    settings = {"numbers__rayleigh": rayleigh, "heat__uniform": heating, "grid__radial": cells, "grid__lateral": 4 * cells}
    settings |= {"initial__layer_thickness": start, "march__end_time": end_time, "output__snapshot_every": end_time / 40}
    case = os.path.join(HERE, "stagnant_lid_law.toml")
    runs.expect(runs.run("march", case, "--into", folder, *runs.settings(**settings), timeout=3000), runs.DONE)
    return Run(folder, rayleigh, heating)


def within(value, bounds, error=0.0):
    return min(bounds) * (1 - error) <= value <= max(bounds) * (1 + error)


def check(run):
    """C from the flux at the lid's base; lid and Nusselt number against what the law alone says of this case."""
    lid, flux = run.at_isotherm(run.interior - 2.23 / GAMMA)
    factor = flux / flux_by_law(1, run.rayleigh_internal())
    nusselt = run.surface_flux / run.interior
    unbalanced = abs(run.surface_flux / run.heating - 1)  # what the march has not yet settled
    band = [predicted(run.rayleigh, run.heating, c, a) for c in FACTORS for a in DROPS]
    lids, nusselts = [b[1] for b in band], [b[2] for b in band]
    print(f"Ra {run.rayleigh:.3g}, H {run.heating}: v_rms {run.mean('velocity_rms'):.3g}, Ra_i {run.rayleigh_internal():.3g}, T_i {run.interior:.4f}"
          f" (column {run.mean('temperature_internal'):.4f}), unbalanced {unbalanced:.1%}")
    print(f"  C = {factor:.3f} ({FACTORS[0]} to {FACTORS[1]})")
    print(f"  Nu = {nusselt:.3f} ({min(nusselts):.3f} to {max(nusselts):.3f})")
    print(f"  lid = {lid:.4f} ({min(lids):.4f} to {max(lids):.4f}); by velocity {run.mean('lid_thickness_velocity'):.4f}, by advection"
          f" {run.mean('lid_thickness_advection'):.4f}")
    assert unbalanced < 0.03, "too far from balance to be compared"
    assert within(factor, FACTORS) and within(nusselt, nusselts, unbalanced) and within(lid, lids, unbalanced)
    return math.log(run.rayleigh_internal()), math.log(flux)


def check_law(cases):
    with runs.Scratch() as scratch:
        points = [check(march(scratch, *case)) for case in cases]
    (x0, y0), (x1, y1) = points[0], points[-1]
    slope, scatter = (y1 - y0) / (x1 - x0), math.log(0.53 / 0.47) / (x1 - x0)
    print(f"exponent over a factor of {math.exp(x1 - x0):.3g} in Ra_i: {slope:.3f}; law 1/3, within {scatter:.3f} by its two prefactors")
    assert abs(slope - 1 / 3) < scatter


# Ra, H, cells, thickness scale of the start's layer, end
check_law([(1e7, 2.5, 28, 0.35, 0.3), (1.7e7, 3.0, 28, 0.28, 0.25), (3e7, 3.5, 32, 0.25, 0.2)])
