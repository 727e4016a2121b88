"""Blankenbach et al. (1989), case 3: the period and the extrema of a cycle of two beats, on three grids.

Called by ctest with the path of the program.
"""

import os
import sys
import tempfile

sys.dont_write_bytecode = True  # no litter in the source tree
try:
    from support.cycle import Beats
    from support.published import Benchmark, columns, finish
except ImportError as error:
    print(f"skipped: {error} (package python3-numpy)")
    sys.exit(77)

GRIDS = [(32, 48), (48, 72), (64, 96)]
TIME_ON_EACH = 1.0  # twenty cycles; the last nine of each are judged
CYCLES = 9


def read(folder):
    history = columns(os.path.join(folder, "history.csv"))
    heat = Beats(history["time"], history["nusselt_outer"], CYCLES)
    flow = Beats(history["time"], history["velocity_rms"], CYCLES)
    ours = {"period": heat.period}
    for name in ("maximum_1", "minimum_1", "maximum_2", "minimum_2"):
        ours[f"nusselt_{name}"] = getattr(heat, name)
    ours["velocity_maximum_1"], ours["velocity_maximum_2"] = flow.maximum_1, flow.maximum_2
    # The source lists minima by size, not by what they follow.
    ours["velocity_minimum_2"], ours["velocity_minimum_1"] = sorted((flow.minimum_1, flow.minimum_2))
    beat = heat.maximum_1 - heat.maximum_2
    return ours, beat, max(heat.wander)


def main():
    benchmark = Benchmark(sys.argv[1], "blankenbach_1989_3")
    failed, start = [], None
    with tempfile.TemporaryDirectory() as into:
        for radial, lateral in GRIDS:
            start = benchmark.march(radial, lateral, into, start, [f"march.end_time={TIME_ON_EACH}"])
            ours, beat, wander = read(start)
            print(f"{radial} x {lateral}: beats differ by {beat:.3f}, extrema wander by {wander:.3f} from cycle to cycle")
            print("  " + "  ".join(f"{name} {value:.5g}" for name, value in ours.items()), flush=True)
        failed += benchmark.failures(ours)
        if not (beat > 0.1 and wander < beat / 5):
            failed.append("  two beats do not make a cycle")
    finish(failed)


main()
