"""The examples run as a user runs them, and leave a picture."""

import os
import pathlib
import subprocess
import sys

import matplotlib.image
import pytest

EXAMPLES = pathlib.Path(__file__).parents[1] / "examples"


@pytest.mark.parametrize(
    "name, says",
    [
        ("first_response", "pump skid on springs"),
        ("four_way_spectrum", "From 0."),
        ("live_stream", "the pump is stopped"),
    ],
)
def test_example(name, says, tmp_path):
    picture = tmp_path / f"{name}.png"
    result = subprocess.run([sys.executable, EXAMPLES / f"{name}.py", picture], capture_output=True, text=True,
                            env={**os.environ, "MPLBACKEND": "Agg"})  # fmt: skip
    assert result.returncode == 0, result.stderr
    assert says in result.stdout and "licensed engineer" in result.stdout
    pixels = matplotlib.image.imread(picture)
    assert pixels.shape[0] > 300 and pixels[..., :3].std() > 0.05
