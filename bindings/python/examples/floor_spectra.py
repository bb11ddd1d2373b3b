"""The pump hall as a small frame: its modes, floor spectra at two floors, and what the instrument cabinet has to bear.

    python3 floor_spectra.py [PICTURE]
"""

import sys

import numpy as np
import pump_hall

import rampwise

MASS = np.array([42e3, 38e3, 21e3])  # kg, of storeys from the ground up
SPRING = np.array([62e6, 48e6, 29e6])  # N/m, of the columns below each
STIFFNESS = np.diag(SPRING + np.append(SPRING[1:], 0)) - np.diag(SPRING[1:], 1) - np.diag(SPRING[1:], -1)
CABINET = {"frequency": 7.5, "damping": 0.04}

dt, ground = pump_hall.shake()
frame = rampwise.Structure(MASS, STIFFNESS, damping=0.04, direction=np.ones(3))
points = {"first floor": frame.total_acceleration(0), "roof": frame.total_acceleration(2)}

print("Modes of the frame, 4 % damped\n    frequency    period    mass taken so far")
for j, omega in enumerate(frame.omega):
    print(f"{omega / (2 * np.pi):10.3f} Hz{2 * np.pi / omega:8.4f} s{100 * frame.mass_share(j + 1)[0]:12.1f} %")

roof = frame.displacement(2)
true = frame.respond(ground, dt, {"roof": roof}).peaks["roof"].size
modal = frame.modal_peaks(roof, rampwise.response_spectrum(ground, dt, omega=frame.omega, damping=0.04).SD)
by_rule = {"square root of the sum of squares": rampwise.root_of_squares(modal),
           "complete quadratic combination": rampwise.complete_quadratic(modal, frame.omega, frame.damping),
           "absolute sum": rampwise.absolute_sum(modal)}  # fmt: skip
print(f"\nLargest displacement of the roof: {1000 * true:.2f} mm, all modes together")
for rule, value in by_rule.items():
    print(f"    {rule:36}{1000 * value:7.2f} mm, from the spectrum of the ground alone")

cabinet = rampwise.floor_spectrum(frame, ground, dt, points, **CABINET)
print("\nInstrument cabinet, 7.5 Hz, 4 % damped: largest total acceleration and stretch of its feet")
for i, floor in enumerate(points):
    print(f"    on the {floor:12} {cabinet.SA[i]:6.2f} m/s² (the floor: {cabinet.floor.size[i]:.2f})"
          f"{1000 * cabinet.SD[i]:8.2f} mm")  # fmt: skip

floors = rampwise.floor_spectrum(frame, ground, dt, points, period=rampwise.equal_ratios(240, 0.03, 2.0), damping=0.04)
worst = np.abs(floors.sampled_error).argmax()
print(f"\nSpectra of the floors' sampled histories are off by up to {100 * np.abs(floors.sampled_error).max():.2f} % "
      f"(at {floors.period[worst % floors.period.size]:.3f} s).")  # fmt: skip
print("Results support, and never replace, the governing code and a licensed engineer's judgement.")

from matplotlib import pyplot  # noqa: E402  a table needs no pictures

picture = sys.argv[1] if len(sys.argv) > 1 else "floor_spectra.png"
base = rampwise.response_spectrum(ground, dt, period=floors.period, damping=0.04)
figure, axes = pyplot.subplots(figsize=(8, 4.4), layout="constrained")
axes.semilogx(floors.period, base.SA, color="#8a8a8a", linewidth=1.0, label="on the ground")
for i, (floor, colour) in enumerate(zip(points, ("#1f4e79", "#b3541e"))):
    axes.semilogx(floors.period, floors.SA[i], color=colour, linewidth=1.3, label=f"on the {floor}")
    axes.plot(1 / CABINET["frequency"], cabinet.SA[i], "o", color=colour, markersize=5,
              label=f"the cabinet there: {cabinet.SA[i]:.1f} m/s²")  # fmt: skip
for j, omega in enumerate(frame.omega):
    axes.axvline(2 * np.pi / omega, color="#4b7f3a", linewidth=0.8, linestyle=":",
                 label=None if j else "natural periods of the frame")  # fmt: skip
axes.set(xlabel="natural period of the equipment (s)", ylabel="largest total acceleration (m/s²)", ylim=(0, None),
         xlim=(floors.period[0], floors.period[-1]), title="Light equipment in the pump hall, 4 % damped")  # fmt: skip
axes.grid(True, which="both", color="#d5d5d5", linewidth=0.6)
ticks = [0.03, 0.05, 0.1, 0.2, 0.5, 1, 2]
axes.set_xticks(ticks, [f"{tick:g}" for tick in ticks])
axes.minorticks_off()
axes.legend(frameon=False)
figure.savefig(picture, dpi=120)
