"""Pictures: what is drawn lies where it should."""

import matplotlib.pyplot as plt
import numpy as np
import pytest

import rampwise
from rampwise import plot

RECORD = np.random.default_rng(17).uniform(-1, 1, 400)
SPECTRUM = rampwise.response_spectrum(RECORD, 0.01, period=rampwise.equal_ratios(50, 0.05, 5), damping=[0.02, 0.1],
                                      evidence=True)  # fmt: skip
UNITS = {"length": "m", "time": "s"}


@pytest.fixture(autouse=True)
def closed():
    yield
    plt.close("all")


def test_histories():
    response = rampwise.respond(RECORD, 0.01, input="base acceleration", period=[0.5, 1.0], damping=0.05)
    axes = plot.histories(response, names=["skid", "pipe"], units=UNITS)
    assert [place.get_ylabel() for place in axes] == ["input", "displacement (m)", "total acceleration (m/s²)"]
    np.testing.assert_array_equal(axes[1].lines[0].get_ydata(), response.displacement[0])
    marked = axes[1].lines[1].get_ydata()[0]
    assert abs(marked) == np.abs(response.displacement[0]).max()
    axes[0].figure.canvas.draw()


@pytest.mark.parametrize("paper", ["linear", "log", "four-way"])
def test_spectra(paper):
    axes = plot.spectra(SPECTRUM, paper=paper, units=UNITS)
    axes.figure.canvas.draw()
    values = SPECTRUM.PSV if paper == "four-way" else SPECTRUM.PSA
    curves = [line for line in axes.lines if str(line.get_label()).endswith("damping")]
    assert [line.get_label() for line in curves] == ["2 % damping", "10 % damping"]
    for line, expected in zip(curves, values):
        np.testing.assert_array_equal(line.get_ydata(), expected)
    corners = axes.collections[1].get_paths()[0].vertices
    assert np.isclose(corners[:, 1].max(), (values[1] * (1 + SPECTRUM.displacement.share[1])).max())
    (low, high), (left, right) = axes.get_ylim(), axes.get_xlim()
    assert low <= values.min() and values.max() <= high and right == 5 and left <= 0.05


def test_lines_of_four_way_paper():
    """Where lines of equal SD and PSA cross, PSV = omega SD = PSA / omega."""
    axes = plot.spectra(SPECTRUM, paper="four-way")
    lines = [np.array(line.get_xydata()) for line in axes.lines if len(line.get_xydata()) == 2]
    rising = [line for line in lines if line[1, 1] > line[0, 1]]
    falling = [line for line in lines if line[1, 1] < line[0, 1]]
    assert len(rising) > 5 and len(falling) > 5
    for line in rising:
        accelerations = line[:, 1] * 2 * np.pi / line[:, 0]
        assert np.isclose(*accelerations, rtol=1e-12) and is_one_two_five(accelerations[0])
    for line in falling:
        displacements = line[:, 1] * line[:, 0] / (2 * np.pi)
        assert np.isclose(*displacements, rtol=1e-12) and is_one_two_five(displacements[0])
    axes.figure.canvas.draw()
    assert axes.get_aspect() == 1.0


def is_one_two_five(value):
    return any(np.isclose(value / 10 ** np.floor(np.log10(value) + 1e-9), digit, rtol=1e-9) for digit in (1, 2, 5))


def test_labels_of_four_way_paper_name_their_lines():
    axes = plot.spectra(SPECTRUM, paper="four-way")
    texts = [text for text in axes.texts if text.get_text()[0].isdigit()]
    assert len(texts) >= 4
    for text in texts:
        x, y = getattr(text, "xy", text.get_position())
        constant = y * 2 * np.pi / x if text.get_rotation() == 45 else y * x / (2 * np.pi)
        assert np.isclose(constant, float(text.get_text()), rtol=1e-6)


def test_refusals():
    with pytest.raises(ValueError, match="^paper: "):
        plot.spectra(SPECTRUM, paper="squared")
    with pytest.raises(ValueError, match="^quantity: "):
        plot.spectra(SPECTRUM, "PGA")
    with pytest.raises(ValueError, match="^names: 1 for 2"):
        plot.spectra(SPECTRUM, names=["one"])
    with pytest.raises(ValueError, match="^spectrum: two periods"):
        plot.spectra(rampwise.response_spectrum(RECORD, 0.01, period=1.0))
    response = rampwise.respond(RECORD, 0.01, input="force", period=1.0, damping=0.1)
    with pytest.raises(ValueError, match="^quantities: "):
        plot.histories(response, ["speed"])
