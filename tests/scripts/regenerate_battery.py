"""Makes the battery reference figures anew with PyBaMM, and compares them.

    python -m venv venv && venv/bin/pip install pybamm
    venv/bin/python tests/scripts/regenerate_battery.py compare     # figures against the stored ones
    venv/bin/python tests/scripts/regenerate_battery.py write DIR   # writes them into DIR

The plain tests do not need this: they read the stored files. Stored files were
made with PyBaMM 26.10.1.1: `lead_acid.Full`, its own parameter set (Sulzer2019),
six cells in series, 21.7 °C. Neither kinetics nor conductivity of that set
depend on temperature, and it has no end of charge: only its discharges and
rests are used.

battery_label.json      C20 (Ah): 20 h to 10.5 V; reserve minutes: 25 A to 10.5 V;
                        the current that leaves 7.2 V after 30 s
battery_ocv.csv         rest volts at each state of charge, from a C20/400 discharge
battery_discharge.csv   constant currents from full to 10.5 V
battery_shift.csv       discharges, charges and rests in turn, twice over
"""

import csv
import json
import sys
import warnings
from pathlib import Path

import numpy as np
import pybamm

STORED = Path(__file__).resolve().parent.parent / "reference"
END_VOLTS = 10.5
RATES = (0.05, 0.1, 0.2, 0.5, 1.0)
SOCS = np.arange(100, 1, -2) / 100
# One round of the shift: current over C20 (1/h, charging above zero), minutes.
ROUND = ((-0.5, 15), (0.1, 30), (-1.0, 10), (0, 20), (0.15, 20), (-0.25, 30))


def simulation(**keywords):
    """The battery, with its own voltage limits out of the way."""
    model = pybamm.lead_acid.Full()
    values = model.default_parameter_values
    values["Lower voltage cut-off [V]"] = 0.1
    values["Upper voltage cut-off [V]"] = 5.0
    if "amps" in keywords:
        values["Current function [A]"] = keywords.pop("amps")
    return pybamm.Simulation(model, parameter_values=values, **keywords)


def follow(steps, period_s):
    """An experiment's hours, amperes (charging above zero) and volts."""
    experiment = pybamm.Experiment(steps, period=f"{period_s:.6g} seconds")
    solution = simulation(experiment=experiment).solve()
    read = lambda name: np.asarray(solution[name].entries)
    return read("Time [h]"), -read("Current [A]"), read("Battery voltage [V]")


def discharge(amps, points):
    """Hours and volts of a constant discharge from full to 10.5 V."""
    longest = 26.0 / amps
    step = f"Discharge at {amps:.8g} A for {longest:.8g} hours or until {END_VOLTS} V"
    hours, _, volts = follow([step], max(1.0, longest * 3600 / points))
    return hours, volts


def capacity_20h():
    """The capacity whose twentieth lasts 20 h: repeated until it stands still."""
    amps = 1.0
    for _ in range(12):
        after = amps * discharge(amps, 60)[0][-1] / 20
        if abs(after / amps - 1) < 1e-6:
            break
        amps = after
    return 20 * after


def holds_30s(amps):
    """Whether this current leaves 7.2 V after 30 s."""
    try:
        solution = simulation(amps=amps).solve(np.linspace(0, 30, 31))
    except pybamm.SolverError:
        return False
    ends = solution["Time [s]"].entries[-1]
    return ends > 29.9 and solution["Battery voltage [V]"].entries[-1] >= 7.2


def cranking_amps():
    """The greatest current that leaves 7.2 V after 30 s, by halving."""
    least, most = 50.0, 800.0
    while most - least > 0.05:
        middle = (least + most) / 2
        if holds_30s(middle):
            least = middle
        else:
            most = middle
    return least


def label():
    """What the battery's label would say."""
    return {
        "C20": capacity_20h(),
        "RC_min": discharge(25.0, 60)[0][-1] * 60,
        "I30s_7V2_22C": cranking_amps(),
        "T_C": 21.7,
        "cells": 6,
    }


def rest_volts(c20):
    """Rest volts at each state of charge."""
    solution = simulation(amps=c20 / 400).solve(np.linspace(0, 395 * 3600, 400))
    taken = solution["Discharge capacity [A.h]"].entries
    volts = solution["Battery open-circuit voltage [V]"].entries
    return [(soc, np.interp((1 - soc) * c20, taken, volts)) for soc in SOCS]


def discharges(c20):
    """Rows of every rate: rate, hours, volts, ampere-hours."""
    rows = []
    for rate in RATES:
        hours, volts = discharge(rate * c20, 120)
        rows += [(rate, t, v, rate * c20 * t) for t, v in zip(hours, volts)]
    return rows


def shift(c20):
    """Rows of the shift: hours, current over C20, state of charge, volts."""
    words = {-1: "Discharge at {:.8g} A", 0: "Rest", 1: "Charge at {:.8g} A"}
    steps = [
        (words[int(np.sign(rate))] + " for {} minutes").format(*([abs(rate) * c20] if rate else []), minutes)
        for rate, minutes in ROUND * 2
    ]
    hours, amps, volts = follow(steps, 30)
    moved = np.concatenate([[0], np.cumsum(np.diff(hours) * (amps[1:] + amps[:-1]) / 2)])
    return list(zip(hours, amps / c20, 1 + moved / c20, volts))


def all_figures():
    """Every file's figures, by name."""
    stated = label()
    c20 = stated["C20"]
    return {
        "battery_label.json": stated,
        "battery_ocv.csv": (("soc", "ocv_V"), rest_volts(c20)),
        "battery_discharge.csv": (("rate_C20", "t_h", "V", "Ah"), discharges(c20)),
        "battery_shift.csv": (("t_h", "I_over_C20", "soc", "V"), shift(c20)),
    }


def write(folder):
    """Writes the files into a folder."""
    folder.mkdir(parents=True, exist_ok=True)
    for name, figures in all_figures().items():
        with open(folder / name, "w", newline="") as out:
            if name.endswith(".json"):
                json.dump(figures, out, indent=1)
            else:
                header, rows = figures
                csv.writer(out).writerow(header)
                csv.writer(out).writerows([f"{x:.6g}" for x in row] for row in rows)
        print("wrote", folder / name)


def stored(name):
    """Rows of a stored CSV file."""
    with open(STORED / name, newline="") as text:
        return np.array([[float(x) for x in row] for row in list(csv.reader(text))[1:]])


def shared_ends(old, new):
    """Greatest difference of volts where both runs have points; at a jump of
    current the two may sample either side, so those points are left out."""
    steady = np.ones(len(old), bool)
    jump = np.abs(np.diff(old[:, 1])) > 1e-3
    steady[1:] &= ~jump
    steady[:-1] &= ~jump
    return np.max(np.abs(np.interp(old[steady, 0], new[:, 0], new[:, 3]) - old[steady, 3]))


def compare():
    """Prints how far the figures made anew lie from the stored ones."""
    figures = all_figures()
    with open(STORED / "battery_label.json") as text:
        old = json.load(text)
    for name, value in figures["battery_label.json"].items():
        print(f"label {name}: {value:.6g}, stored {old[name]:.6g} ({100 * (value / old[name] - 1):+.3f} %)")
    before, after = stored("battery_ocv.csv"), np.array(figures["battery_ocv.csv"][1])
    print(f"rest volts: apart by at most {1e3 * np.max(np.abs(after[:, 1] - before[:, 1])):.2f} mV")
    before, after = stored("battery_discharge.csv"), np.array(figures["battery_discharge.csv"][1])
    for rate in RATES:
        a, b = before[before[:, 0] == rate], after[after[:, 0] == rate]
        inside = a[:, 3] < 0.98 * a[-1, 3]
        apart = np.max(np.abs(np.interp(a[inside, 3], b[:, 3], b[:, 2]) - a[inside, 2]))
        print(f"discharge {rate}: {b[-1, 3]:.4f} Ah, stored {a[-1, 3]:.4f} ({100 * (b[-1, 3] / a[-1, 3] - 1):+.3f} %), volts apart by at most {1e3 * apart:.2f} mV")
    before, after = stored("battery_shift.csv"), np.array(figures["battery_shift.csv"][1])
    print(f"shift: {len(after)} rows, stored {len(before)}; volts apart by at most {1e3 * shared_ends(before, after):.2f} mV")


if __name__ == "__main__":
    warnings.filterwarnings("ignore")
    pybamm.set_logging_level("ERROR")
    if sys.argv[1:] == ["compare"]:
        compare()
    elif len(sys.argv) == 3 and sys.argv[1] == "write":
        write(Path(sys.argv[2]))
    else:
        sys.exit(__doc__)
