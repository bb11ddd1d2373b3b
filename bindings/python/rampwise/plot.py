"""Pictures of responses and spectra, with matplotlib, which is loaded when a picture is made."""

from __future__ import annotations

from typing import Any, Dict, List, Literal, Optional, Sequence, Tuple

import numpy as np

from ._arrays import Doubles
from .response import Response
from .spectrum import Spectrum

Paper = Literal["linear", "log", "four-way"]

_PAPERS = ("linear", "log", "four-way")
_COLOURS = ("#1f4e79", "#b3541e", "#4b7f3a", "#7a3b73", "#8a6d1d", "#3f7f86")
_GRID = "#d5d5d5"
_NOTED = 4  # with more curves numbers would hide them
_RISING: Dict[str, Any] = {
    "line": "#a8b8c8",
    "text": {"color": "#44607a", "fontsize": "x-small", "rotation": 45, "rotation_mode": "anchor"},
}
_FALLING: Dict[str, Any] = {
    "line": "#cdb8a3",
    "text": {"color": "#7a5a3c", "fontsize": "x-small", "rotation": -45, "rotation_mode": "anchor"},
}
_HISTORIES = {  # axis label, and unit by length, time and force
    "record": ("input", ""),
    "displacement": ("displacement", "{length}"),
    "velocity": ("velocity", "{length}/{time}"),
    "acceleration": ("acceleration", "{length}/{time}²"),
    "total_acceleration": ("total acceleration", "{length}/{time}²"),
    "relative_displacement": ("relative displacement", "{length}"),
    "relative_velocity": ("relative velocity", "{length}/{time}"),
    "spring_force": ("spring force", "{force}"),
    "damper_force": ("damper force", "{force}"),
}
_PEAKS = {
    "SD": "displacement",
    "PSV": "displacement",
    "PSA": "displacement",
    "SV": "velocity",
    "SA": "total_acceleration",
}
_SPECTRA = {
    "SD": ("relative displacement SD", "{length}"),
    "SV": ("relative velocity SV", "{length}/{time}"),
    "SA": ("total acceleration SA", "{length}/{time}²"),
    "PSV": ("pseudo-velocity PSV", "{length}/{time}"),
    "PSA": ("pseudo-acceleration PSA", "{length}/{time}²"),
}


def _pyplot() -> Any:
    try:
        from matplotlib import pyplot
    except ImportError:
        raise ImportError("pictures need matplotlib (Debian: python3-matplotlib)") from None
    return pyplot


def _label(words: Tuple[str, str], units: Optional[Dict[str, str]]) -> str:
    text, unit = words
    if not units or not unit:
        return text
    try:
        return f"{text} ({unit.format(**units)})"
    except KeyError:
        return text


def _sized(axes: Any) -> None:
    axes.grid(True, color=_GRID, linewidth=0.6)
    axes.set_axisbelow(True)
    for side in ("top", "right"):
        axes.spines[side].set_visible(False)


def histories(
    response: Response,
    quantities: Sequence[str] = ("record", "displacement", "total_acceleration"),
    *,
    names: Optional[Sequence[str]] = None,
    units: Optional[Dict[str, str]] = None,
    axes: Optional[Sequence[Any]] = None,
) -> List[Any]:
    """Histories under each other over one axis of time, with the largest value of each marked.

    Parameters
    ----------
    response : Response
        Of one system and record, or several, which are drawn over each other.
    quantities : sequence of str
        Any of record, displacement, velocity, acceleration, total_acceleration, relative_displacement,
        relative_velocity, spring_force, damper_force.
    names : sequence of str, optional
        Names of the systems or records, for the legend.
    units : dict, optional
        Such as ``{"length": "m", "time": "s", "force": "N"}``, for the labels.
    axes : sequence of matplotlib Axes, optional
        Where to draw, one for each quantity; otherwise a new figure is made.

    Returns
    -------
    list of matplotlib Axes
    """
    unknown = [name for name in quantities if name not in _HISTORIES]
    if unknown or not quantities:
        raise ValueError(f"quantities: {unknown} are none of {', '.join(_HISTORIES)}")
    if axes is None:
        _, grid = _pyplot().subplots(len(quantities), 1, sharex=True, squeeze=False, layout="constrained",
                                     figsize=(8, 1.2 + 1.8 * len(quantities)))  # fmt: skip
        axes = list(grid[:, 0])
    if len(axes) != len(quantities):
        raise ValueError(f"axes: {len(axes)} for {len(quantities)} quantities")
    for place, name in zip(axes, quantities):
        rows = np.atleast_2d(getattr(response, name))
        rows = rows.reshape(-1, rows.shape[-1])
        is_first = name == next((other for other in quantities if other != "record"), None)
        labels = _names(names, len(rows)) if is_first else [None] * len(rows)
        for i, row in enumerate(rows):
            colour = "#555555" if name == "record" else _COLOURS[i % len(_COLOURS)]
            place.plot(response.time, row, color=colour, linewidth=1.1, label=labels[i])
            if name != "record":
                peak = int(np.argmax(np.abs(row)))
                place.plot(response.time[peak], row[peak], "o", color=colour, markersize=4)
                if len(rows) <= _NOTED:
                    _note_peak(place, response.time[peak], row[peak], colour)
        place.axhline(0, color="#888888", linewidth=0.6)
        place.set_ylabel(_label(_HISTORIES[name], units))
        place.margins(x=0, y=0.18)
        _sized(place)
        if names is not None and is_first:
            place.legend(frameon=False, loc="lower left", bbox_to_anchor=(0, 0.98), ncols=_NOTED, borderaxespad=0)
    axes[-1].set_xlabel(_label(("time", "{time}"), units))
    return list(axes)


def _note_peak(axes: Any, time: float, value: float, colour: str) -> None:
    axes.annotate(f"{value:.3g}", (time, value), xytext=(6, 0), textcoords="offset points", color=colour,
                  fontsize="small", va="center",
                  bbox={"facecolor": "white", "edgecolor": "none", "alpha": 0.75, "pad": 1.0})  # fmt: skip


def _names(names: Optional[Sequence[str]], count: int) -> List[Optional[str]]:
    if names is None:
        return [None] * count
    if len(names) != count:
        raise ValueError(f"names: {len(names)} for {count} curves")
    return list(names)


def spectra(
    spectrum: Spectrum,
    quantity: str = "PSA",
    *,
    paper: Paper = "linear",
    names: Optional[Sequence[str]] = None,
    units: Optional[Dict[str, str]] = None,
    axes: Optional[Any] = None,
) -> Any:
    """A spectrum over the period, one curve for each damping ratio and record.

    Where the spectrum was made with ``evidence=True``, a band about each curve shows the estimated sampling error.

    Parameters
    ----------
    spectrum : Spectrum
        With two periods or more.
    quantity : {'PSA', 'SA', 'PSV', 'SV', 'SD'}
        What is drawn. Four-way paper shows PSV.
    paper : {'linear', 'log', 'four-way'}
        Linear, or both axes logarithmic, or that with lines of equal displacement and of equal pseudo-acceleration:
        on it a point shows SD, PSV and PSA at once, since PSV = omega SD and PSA = omega PSV.
    names : sequence of str, optional
        Names of the curves; otherwise the damping ratios.
    units : dict, optional
        Such as ``{"length": "m", "time": "s"}``, for the labels.
    axes : matplotlib Axes, optional
        Where to draw; otherwise a new figure is made.

    Returns
    -------
    matplotlib Axes
    """
    if paper not in _PAPERS:
        raise ValueError(f"paper: {paper!r} is none of {', '.join(map(repr, _PAPERS))}")
    if paper == "four-way":
        quantity = "PSV"
    if quantity not in _SPECTRA:
        raise ValueError(f"quantity: {quantity!r} is none of {', '.join(map(repr, _SPECTRA))}")
    period, curves, bands, labels = _curves(spectrum, quantity, names, logarithmic=paper != "linear")
    if axes is None:
        _, axes = _pyplot().subplots(figsize=(7, 6.4 if paper == "four-way" else 4.4), layout="constrained")
    for i, (curve, label) in enumerate(zip(curves, labels)):
        colour = _COLOURS[i % len(_COLOURS)]
        if bands is not None:
            low, high = curve * np.maximum(1 - bands[i], 0), curve * (1 + bands[i])
            label_once = "sampling error" if i == 0 else None
            axes.fill_between(period, low, high, color=colour, alpha=0.22, linewidth=0, label=label_once)
        axes.plot(period, curve, color=colour, linewidth=1.4, label=label, zorder=3)
    axes.set_xlabel(_label(("natural period", "{time}"), units))
    axes.set_ylabel(_label(_SPECTRA[quantity], units))
    if paper == "linear":
        axes.set_xlim(0, period[-1])
        axes.set_ylim(bottom=0)
        _sized(axes)
    else:
        _logarithmic(axes, period, curves)
        if paper == "four-way":
            _four_way(axes, units)
    if paper == "four-way":
        axes.legend(frameon=False, loc="lower left", bbox_to_anchor=(0, 1.04), ncols=2, borderaxespad=0)
    else:
        axes.legend(framealpha=0.9, edgecolor="none", loc="best")
    return axes


def _curves(
    spectrum: Spectrum, quantity: str, names: Optional[Sequence[str]], logarithmic: bool
) -> Tuple[Doubles, Doubles, Optional[Doubles], List[Optional[str]]]:
    """Periods in rising order, a row for each curve, and the share of each value that is sampling error."""
    if spectrum.period.ndim != 1 or spectrum.period.size < 2:
        raise ValueError("spectrum: two periods or more on one axis are needed for a picture")
    period = spectrum.period
    values = getattr(spectrum, quantity)
    bands = getattr(spectrum, _PEAKS[quantity]).share
    drawn = np.isfinite(period) & ((period > 0) | (not logarithmic))
    order = np.flatnonzero(drawn)[np.argsort(period[drawn])]
    curves = values.reshape(-1, period.size)[:, order]
    labels = _names(names, len(curves)) if names is not None else _damping_names(spectrum, len(curves))
    return period[order], curves, None if bands is None else bands.reshape(-1, period.size)[:, order], labels


def _damping_names(spectrum: Spectrum, count: int) -> List[Optional[str]]:
    texts = [f"{100 * ratio:g} % damping" for ratio in spectrum.damping.reshape(-1)]
    return [texts[i % len(texts)] if i < len(texts) else None for i in range(count)]


def _logarithmic(axes: Any, period: Doubles, curves: Doubles) -> None:
    seen = curves[np.isfinite(curves) & (curves > 0)]
    axes.set_xscale("log")
    axes.set_yscale("log")
    axes.set_xlim(period[0], period[-1])
    if seen.size > 0:
        axes.set_ylim(_step_below(seen.min() / 1.1), _step_above(seen.max() * 1.1))
    for axis in (axes.xaxis, axes.yaxis):
        axis.set_major_formatter(_plain_number)
    axes.grid(True, which="major", color="#bdbdbd", linewidth=0.7)
    axes.grid(True, which="minor", color="#e3e3e3", linewidth=0.5)
    axes.set_axisbelow(True)


def _plain_number(value: float, _: Any = None) -> str:
    return f"{value:g}" if 0.99e-4 < value < 1.01e5 else f"{value:.0e}"


def _one_two_five(low: float, high: float) -> Doubles:
    """1, 2, 5, 10, ... from low to high."""
    decades = np.arange(np.floor(np.log10(low)), np.ceil(np.log10(high)) + 1)
    values = (10.0 ** decades[:, np.newaxis] * np.array([1.0, 2.0, 5.0])).reshape(-1)
    inside = (values >= low * (1 - 1e-9)) & (values <= high * (1 + 1e-9))
    return np.asarray(values[inside])


def _step_below(value: float) -> float:
    return float(_one_two_five(value / 10, value)[-1])


def _step_above(value: float) -> float:
    return float(_one_two_five(value, value * 10)[0])


def _four_way(axes: Any, units: Optional[Dict[str, str]]) -> None:
    """Lines of equal PSA rise and lines of equal SD fall, by 45 degrees where decades are squares."""
    axes.set_aspect("equal", adjustable="box")
    (left, right), (bottom, top) = axes.get_xlim(), axes.get_ylim()
    span = np.array([left, right])
    circular = 2 * np.pi / span
    for value in _one_two_five(circular[1] * bottom, circular[0] * top):
        _line(axes, span, value / circular, value, _RISING)
    for value in _one_two_five(bottom / circular[0], top / circular[1]):
        _line(axes, span, value * circular, value, _FALLING)
    for words, place, style in ((_SPECTRA["PSA"], (0.82, 0.16), _RISING), (_SPECTRA["SD"], (0.14, 0.84), _FALLING)):
        axes.text(*place, _label(words, units), transform=axes.transAxes, ha="center", va="center",
                  bbox={"facecolor": "white", "edgecolor": "none", "pad": 1.0}, **style["text"])  # fmt: skip


def _line(axes: Any, span: Doubles, ends: Doubles, value: float, style: Dict[str, Any]) -> None:
    """A line across the paper, with its number outside where it leaves it to the right, above or below."""
    is_decade = abs(np.log10(value) - round(np.log10(value))) < 1e-9
    axes.plot(span, ends, color=style["line"], linewidth=0.8 if is_decade else 0.4, zorder=1)
    if not is_decade:
        return
    left, (bottom, top) = np.log10(axes.get_xlim()[0]), np.log10(axes.get_ylim())
    first, last = np.log10(ends)
    y = min(max(last, bottom), top)
    x = left + abs(y - first)
    if y > bottom:  # inside for falling lines: the axis has its own numbers below
        axes.annotate(_plain_number(value), (10.0**x, 10.0**y), xytext=(4, 4 if style is _RISING else -4),
                      textcoords="offset points", annotation_clip=False, ha="left",
                      va="bottom" if style is _RISING else "top", **style["text"])  # fmt: skip
    else:
        inset = 0.03 * (top - bottom)
        axes.text(10.0 ** (x - inset), 10.0 ** (y + inset), _plain_number(value), ha="center", va="center",
                  bbox={"facecolor": "white", "edgecolor": "none", "pad": 0.6}, **style["text"])  # fmt: skip
