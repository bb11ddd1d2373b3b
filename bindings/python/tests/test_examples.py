"""The examples run as a user runs them, and leave a picture."""

import os
import pathlib
import runpy
import subprocess
import sys

import matplotlib.image
import pytest
from matplotlib import pyplot

EXAMPLES = pathlib.Path(__file__).parents[1] / "examples"


def check(said, picture, says):
    assert says in said and "licensed engineer" in said
    pixels = matplotlib.image.imread(picture)
    assert pixels.shape[0] > 300 and pixels[..., :3].std() > 0.05


def test_first_example_by_itself(tmp_path):
    picture = tmp_path / "first_response.png"
    result = subprocess.run([sys.executable, EXAMPLES / "first_response.py", picture], capture_output=True, text=True,
                            env={**os.environ, "MPLBACKEND": "Agg"})  # fmt: skip
    assert result.returncode == 0, result.stderr
    check(result.stdout, picture, "pump skid on springs")


@pytest.mark.parametrize(
    "name, says",
    [
        ("four_way_spectrum", "From 0."),
        ("live_stream", "the pump is stopped"),
        ("floor_spectra", "Instrument cabinet, 7.5 Hz"),
    ],
)
def test_example(name, says, tmp_path, monkeypatch, capsys):
    """In this process, which has loaded matplotlib already."""
    picture = tmp_path / f"{name}.png"
    monkeypatch.setattr(sys, "argv", [f"{name}.py", str(picture)])
    monkeypatch.syspath_prepend(str(EXAMPLES))
    runpy.run_path(str(EXAMPLES / f"{name}.py"), run_name="__main__")
    pyplot.close("all")
    check(capsys.readouterr().out, picture, says)
