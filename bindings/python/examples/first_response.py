"""What the pump hall's gear does under the base shake: a table, and a picture.

    python3 first_response.py [PICTURE]
"""

import sys

import numpy as np
import pump_hall

import rampwise
from rampwise import plot

dt, ground = pump_hall.shake()
names, mass, frequency, damping = (column[:3] for column in pump_hall.gear())

response = rampwise.respond(ground, dt, input="base acceleration", frequency=frequency, damping=damping, mass=mass)

print(f"{'':24}{'displacement':>14}{'acceleration':>14}{'spring force':>14}")
for i, name in enumerate(names):
    displacement, total, force = (
        np.abs(history[i]).max()
        for history in (response.displacement, response.total_acceleration, response.spring_force)
    )
    print(f"{name:24}{1000 * displacement:11.1f} mm{total:9.2f} m/s²{force / 1000:11.2f} kN")
print("Results support, and never replace, the governing code and a licensed engineer's judgement.")

picture = sys.argv[1] if len(sys.argv) > 1 else "first_response.png"
axes = plot.histories(response, names=names, units=pump_hall.UNITS)
axes[0].figure.savefig(picture, dpi=120)
