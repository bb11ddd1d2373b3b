"""The pump skid on live data: samples come in blocks, some are lost, and the pump is stopped when the skid moves too far.

    python3 live_stream.py [PICTURE]
"""

import sys

import numpy as np
import pump_hall

import rampwise

dt, ground = pump_hall.shake()
names, mass, frequency, damping = pump_hall.gear()
skid = rampwise.System.natural(frequency=frequency[0], damping=damping[0], mass=mass[0])
LIMIT = 0.035  # m, of the pipe's bellows


def sensor():
    """Blocks of a quarter of a second; a loose plug loses 5 samples in one of them."""
    for block in np.split(ground, len(ground) // 50):
        if np.abs(block).max() > 2.4:
            block = block.copy()
            block[20:25] = np.nan
        yield block


trips = []


def stop_pump(event):
    if not trips:
        print(f"{event.time:.4f} s: the skid passes {1000 * event.value:.1f} mm; the pump is stopped")
    trips.append(event)


stream = rampwise.Stream(skid, dt, input="base acceleration", outputs=["displacement", "total_acceleration"])
trip = stream.watch("displacement", [rampwise.Level(LIMIT, latch=True)], on_trip=stop_pump)

blocks = list(stream.follow(sensor()))
peak, counts = trip.peak(), stream.counts
print(f"{counts['good']} samples, {counts['missing']} lost and bridged; largest displacement {1000 * peak.size:.1f} mm "
      f"at {peak.time:.4f} s; beyond the limit {trip.level().passed} times")  # fmt: skip
print("Results support, and never replace, the governing code and a licensed engineer's judgement.")

from matplotlib import pyplot  # noqa: E402  a monitor needs no pictures

picture = sys.argv[1] if len(sys.argv) > 1 else "live_stream.png"
values = 1000 * np.concatenate([block.values[:, 0] for block in blocks])
flags = np.concatenate([block.flags for block in blocks])
time = np.arange(values.size) * dt
figure, axes = pyplot.subplots(figsize=(8, 3.6), layout="constrained")
axes.plot(time, values, color="#1f4e79", linewidth=1.1, label="displacement of the skid")
axes.plot(time[flags == rampwise.WAITING], values[flags == rampwise.WAITING], "x", color="#7a3b73", label="samples lost")
axes.axhline(1000 * LIMIT, color="#b3541e", linewidth=0.9, label="limit")
for event in trips[:1]:
    axes.plot(event.time, 1000 * event.value, "o", color="#b3541e", label=f"trip at {event.time:.3f} s")
axes.set(xlabel="time (s)", ylabel="displacement (mm)", xlim=(0, time[-1]))
axes.grid(True, color="#d5d5d5", linewidth=0.6)
axes.legend(frameon=False, loc="lower right")
figure.savefig(picture, dpi=120)
