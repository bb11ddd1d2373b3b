"""The shared library: found, checked and called. No other module knows how calls go from here to C.

Calls release the interpreter's lock, so threads run side by side.
"""

from __future__ import annotations

import ctypes
import ctypes.util
import os
import pathlib
from typing import Any, Callable, Dict, List

import numpy as np
from numpy.typing import NDArray

from ._version import __version__

_POINTER = ctypes.c_void_p
_SIZE = ctypes.c_size_t
_DOUBLE = ctypes.c_double
_INT = ctypes.c_int

# Public structs as NumPy sees them.
SYSTEM = np.dtype([("mass", "f8"), ("damper", "f8"), ("stiffness", "f8")])
STATE = np.dtype([("u", "f8"), ("v", "f8"), ("p", "f8"), ("p_before", "f8")])
COEFFS = np.dtype(
    [(name, "f8") for name in ("A", "B", "C", "D", "Ap", "Bp", "Cp", "Dp", "A_minus_1", "Bp_minus_1")]
    + [("acceleration", "f8", 4), ("total", "f8", 4), ("system", SYSTEM), ("dt", "f8")]
    + [("input", "i4"), ("between", "i4"), ("reserve", "f8", 9)]
)
COEFFS_F32 = np.dtype(
    [(name, "f4") for name in ("A", "B", "C", "D", "Ap", "Bp", "Cp", "Dp", "A_minus_1", "Bp_minus_1")]
    + [("acceleration", "f4", 4), ("total", "f4", 4)]
    + [(name, "f4") for name in ("mass", "damper", "stiffness", "rate")]
    + [("dt", "f8"), ("input", "i4"), ("between", "i4"), ("reserve", "f4", 6)]
)
STATE_F32 = np.dtype([(name, "f4") for name in ("u", "v", "p", "p_before", "u_low", "v_low")])
INSTANT = np.dtype([("value", "f8"), ("sample", "u8"), ("fraction", "f8")])
PEAK = np.dtype([("high", INSTANT), ("low", INSTANT)])
EVIDENCE = np.dtype([("error_high", "f8"), ("error_low", "f8"), ("abrupt", "u4"), ("reserve", "u4")])
ENERGY = np.dtype([(name, "f8") for name in ("input", "kinetic", "strain", "dissipated")])
HISTORY = np.dtype([(name, np.uintp) for name in ("u", "v", "a", "total")])
BANK_WANTED = np.dtype(
    [("size", np.uintp), ("largest", np.uintp), ("chosen_count", np.uintp), ("chosen", np.uintp)]
    + [("history", HISTORY), ("reserve", np.uintp, 4)]
)
OUTPUT = np.dtype([("row", "f8", 4), ("quantity", "i4"), ("reserve", "i4")])
LEVEL = np.dtype([("value", "f8"), ("hysteresis", "f8"), ("direction", "i4"), ("latch", "i4")])
LEVEL_REPORT = np.dtype([("beyond", "i4"), ("tripped", "i4"), ("passed", "u8"), ("cycles", "u8")])
EVENT = np.dtype(
    [("sample", "u8"), ("fraction", "f8"), ("value", "f8")]
    + [(name, "i4") for name in ("kind", "direction", "output", "level")]
    + [("flags", "u4"), ("reserve", "i4")]
)
WATCHED = np.dtype([("at", INSTANT), ("begin", "u8")])
WATCHED_F32 = np.dtype([("sample", "u8"), ("value", "f4"), ("fraction", "f4"), ("begin", "u8")])
WATCH_OPTIONS = np.dtype(
    [("size", np.uintp), ("output", OUTPUT), ("level", LEVEL, 4), ("level_count", "i4"), ("number", "i4")]
    + [(name, np.uintp) for name in ("window", "window_steps", "events", "event_capacity")]
    + [("reserve", np.uintp, 4)]
)
STREAM_OPTIONS = np.dtype(
    [("size", np.uintp)]
    + [(name, "i4") for name in ("start", "missing", "beyond", "missing_raw")]
    + [("longest", "u8"), ("ticks", "u8")]
    + [(name, "f8") for name in ("scale", "offset", "rail_low", "rail_high")]
    + [("output_count", "i4"), ("numbered", "i4"), ("output", OUTPUT, 8)]
    + [("intervals", np.uintp), ("interval_count", np.uintp), ("reserve", np.uintp, 4)]
)
STREAM_COUNTS = np.dtype(
    [
        (name, "u8")
        for name in (
            "next", "good", "missing", "clipped", "bridges", "starts", "longest", "last_missing", "last_clipped",
        )
    ]
)  # fmt: skip
MODES_PLAN = np.dtype(
    [(name, np.uintp) for name in ("size", "modes", "inputs", "outputs", "c", "load")]
    + [(name, np.uintp) for name in ("on_displacement", "on_velocity", "on_acceleration", "on_input")]
    + [("peaks", "i4"), ("instructions", "i4")]
    + [(name, np.uintp) for name in ("equipment_count", "equipment", "point")]
    + [("reserve", np.uintp, 5)]
)
ROOTS = np.dtype(
    [(name, np.uintp) for name in ("size", "bodies", "inputs", "outputs", "mass", "damper", "root", "shape")]
    + [(name, np.uintp) for name in ("force", "on_displacement", "on_velocity")]
    + [("reserve", np.uintp, 4)]
)
RESPONSE = np.dtype([("gain", "f8"), ("phase", "f8")])
_STRUCTS = {
    "rampwise_system": SYSTEM,
    "rampwise_state": STATE,
    "rampwise_coeffs": COEFFS,
    "rampwise_coeffs_f32": COEFFS_F32,
    "rampwise_state_f32": STATE_F32,
    "rampwise_history_f32": HISTORY,
    "rampwise_bank_wanted_f32": BANK_WANTED,
    "rampwise_evidence": EVIDENCE,
    "rampwise_energy": ENERGY,
    "rampwise_output": OUTPUT,
    "rampwise_level": LEVEL,
    "rampwise_level_report": LEVEL_REPORT,
    "rampwise_event": EVENT,
    "rampwise_watched": WATCHED,
    "rampwise_watched_f32": WATCHED_F32,
    "rampwise_watch_options": WATCH_OPTIONS,
    "rampwise_stream_options": STREAM_OPTIONS,
    "rampwise_stream_counts": STREAM_COUNTS,
    "rampwise_instant": INSTANT,
    "rampwise_peak": PEAK,
    "rampwise_history": HISTORY,
    "rampwise_bank_wanted": BANK_WANTED,
    "rampwise_modes_plan": MODES_PLAN,
    "rampwise_roots": ROOTS,
    "rampwise_response": RESPONSE,
}

_COUNT = ctypes.c_uint64
_PUT = (_INT, _POINTER, _SIZE, _POINTER, _POINTER, _POINTER, _POINTER)
_SYSTEM_MAKER = (_INT, _POINTER, _DOUBLE, _DOUBLE)
_PROTOTYPES: Dict[str, Any] = {  # the result first
    "rampwise_system_natural": _SYSTEM_MAKER,
    "rampwise_system_hertz": _SYSTEM_MAKER,
    "rampwise_system_period": _SYSTEM_MAKER,
    "rampwise_coeffs_make": (_INT, _POINTER, _POINTER, _DOUBLE, _INT, _INT),
    "rampwise_start_settled": (_INT, _POINTER, _POINTER, _DOUBLE),
    "rampwise_acceleration": (_DOUBLE, _POINTER, _POINTER),
    "rampwise_total_acceleration": (_DOUBLE, _POINTER, _POINTER),
    "rampwise_run": (_INT, _POINTER, _POINTER, _SIZE, _POINTER, _POINTER, _POINTER),
    "rampwise_solve": (_INT, _POINTER, _DOUBLE, _DOUBLE, _SIZE, _POINTER, _POINTER, _POINTER),
    "rampwise_run_at": (_INT, _POINTER, _POINTER, _POINTER, _SIZE, _POINTER, _POINTER, _POINTER, _POINTER),
    "rampwise_run_frames": (_INT, _SIZE, _POINTER, _POINTER, _SIZE, _POINTER, _POINTER, _POINTER),
    "rampwise_bank_size": (_SIZE, _SIZE),
    "rampwise_bank_alignment": (_SIZE,),
    "rampwise_bank_init": (_INT, _POINTER, _SIZE, _SIZE, _POINTER, _INT, _POINTER),
    "rampwise_bank_start": (_INT, _POINTER, _DOUBLE),
    "rampwise_bank_set": (_INT, _POINTER, _POINTER),
    "rampwise_bank_get": (_INT, _POINTER, _POINTER),
    "rampwise_bank_retune": (_INT, _POINTER, _SIZE, _POINTER),
    "rampwise_bank_run": (_INT, _POINTER, _SIZE, _POINTER, _POINTER, _POINTER),
    "rampwise_bank_stopped": (_SIZE, _POINTER, _POINTER),
    "rampwise_bank_read": (_INT, _POINTER, _POINTER),
    "rampwise_bank_saved_size": (_SIZE, _POINTER),
    "rampwise_bank_save": (_INT, _POINTER, _POINTER, _SIZE),
    "rampwise_bank_resume": (_INT, _POINTER, _POINTER, _SIZE),
    "rampwise_peaks_size": (_SIZE, _SIZE),
    "rampwise_peaks_alignment": (_SIZE,),
    "rampwise_peaks_init": (_INT, _POINTER, _SIZE, _SIZE, _POINTER, _SIZE, _POINTER, ctypes.c_uint, _INT, _POINTER),
    "rampwise_peaks_run": (_INT, _POINTER, _SIZE, _POINTER, _POINTER),
    "rampwise_peaks_get": (_INT, _POINTER, _INT, ctypes.c_uint, _POINTER),
    "rampwise_peaks_start": (_INT, _POINTER, _POINTER),
    "rampwise_peaks_saved_size": (_SIZE, _POINTER),
    "rampwise_peaks_save": (_INT, _POINTER, _POINTER, _SIZE),
    "rampwise_peaks_resume": (_INT, _POINTER, _POINTER, _SIZE),
    "rampwise_evidence_input": (_INT, _SIZE, _POINTER, _POINTER, _POINTER),
    "rampwise_inside": (_INT, _POINTER, _POINTER, _DOUBLE, _DOUBLE, _POINTER),
    "rampwise_frequency_response": (_INT, _POINTER, _POINTER, _DOUBLE, _POINTER, _POINTER),
    "rampwise_spectrum": (
        _INT, _SIZE, _DOUBLE, _POINTER, _INT, _SIZE, _POINTER, _POINTER, _INT, ctypes.c_uint, _POINTER, _POINTER,
    ),
    "rampwise_peaks_evidence": (_INT, _POINTER, _INT, ctypes.c_uint, _POINTER),
    "rampwise_spectrum_evidence": (
        _INT, _SIZE, _DOUBLE, _POINTER, _INT, _SIZE, _POINTER, _POINTER, _INT, ctypes.c_uint, _POINTER, _POINTER,
        _POINTER,
    ),
    "rampwise_stream_options_init": (None, _POINTER),
    "rampwise_stream_init": (_INT, _POINTER, _POINTER, _POINTER),
    "rampwise_stream_start": (_INT, _POINTER, _POINTER, _COUNT),
    "rampwise_stream_put": _PUT,
    "rampwise_stream_put_raw": _PUT,
    "rampwise_stream_put_at": _PUT + (_POINTER,),
    "rampwise_stream_put_raw_at": _PUT + (_POINTER,),
    "rampwise_stream_skip_to": (_INT, _POINTER, _COUNT),
    "rampwise_stream_read": (_INT, _POINTER, _POINTER, _POINTER),
    "rampwise_stream_state": (_INT, _POINTER, _POINTER, _POINTER),
    "rampwise_stream_count": (_INT, _POINTER, _POINTER),
    "rampwise_stream_retune": (_INT, _POINTER, _POINTER, _POINTER, _SIZE),
    "rampwise_stream_attach": (_INT, _POINTER, _POINTER),
    "rampwise_stream_saved_size": (_SIZE, _POINTER),
    "rampwise_stream_save": (_INT, _POINTER, _POINTER, _SIZE),
    "rampwise_stream_resume": (_INT, _POINTER, _POINTER, _SIZE),
    "rampwise_watch_options_init": (None, _POINTER),
    "rampwise_watch_init": (_INT, _POINTER, _POINTER, _POINTER),
    "rampwise_watch_peak": (_INT, _POINTER, _INT, _POINTER),
    "rampwise_watch_reset": (_INT, _POINTER),
    "rampwise_watch_level": (_INT, _POINTER, _SIZE, _POINTER),
    "rampwise_watch_release": (_INT, _POINTER, _SIZE),
    "rampwise_watch_events": (_SIZE, _POINTER, _SIZE, _POINTER),
    "rampwise_watch_counts": (_INT, _POINTER, _POINTER, _POINTER),
    "rampwise_watch_saved_size": (_SIZE, _POINTER),
    "rampwise_watch_save": (_INT, _POINTER, _POINTER, _SIZE),
    "rampwise_watch_resume": (_INT, _POINTER, _POINTER, _SIZE),
    "rampwise_energy_solve": (
        _INT, _POINTER, _INT, _DOUBLE, _DOUBLE, _SIZE, _POINTER, _POINTER, _POINTER,
    ),
    "rampwise_energy_spectrum": (
        _INT, _SIZE, _DOUBLE, _POINTER, _INT, _INT, _SIZE, _POINTER, _POINTER, _POINTER, _POINTER, _POINTER,
    ),
    "rampwise_spectrum_directions": (
        _INT, _SIZE, _DOUBLE, _POINTER, _POINTER, _INT, _SIZE, _POINTER, _POINTER, _INT, ctypes.c_uint, _SIZE, _POINTER,
        _POINTER, _POINTER,
    ),
    "rampwise_percentiles_over_angle": (_INT, _SIZE, _POINTER, _POINTER, _SIZE, _POINTER, _POINTER, _POINTER),
    "rampwise_modes_plan_init": (None, _POINTER),
    "rampwise_modes_size": (_SIZE, _POINTER),
    "rampwise_modes_alignment": (_SIZE,),
    "rampwise_modes_init": (_INT, _POINTER, _SIZE, _POINTER, _POINTER),
    "rampwise_modes_set": (_INT, _POINTER, _POINTER, _POINTER, _POINTER),
    "rampwise_modes_read": (_INT, _POINTER, _POINTER),
    "rampwise_modes_peaks": (_INT, _POINTER, _POINTER),
    "rampwise_modes_residual": (_INT, _POINTER, ctypes.c_uint64, _POINTER, _POINTER),
    "rampwise_modes_saved_size": (_SIZE, _POINTER),
    "rampwise_modes_save": (_INT, _POINTER, _POINTER, _SIZE),
    "rampwise_modes_resume": (_INT, _POINTER, _POINTER, _SIZE),
    "rampwise_equipment_run": (_INT, _POINTER, _SIZE, _POINTER, _POINTER, _POINTER, _POINTER),
    "rampwise_equipment_peaks": (_INT, _POINTER, _INT, _POINTER),
    "rampwise_equipment_residual": (_INT, _POINTER, _INT, ctypes.c_uint64, _POINTER, _POINTER),
    "rampwise_static_correction": (_INT, _POINTER, _POINTER, _POINTER),
    "rampwise_mass_share": (_INT, _POINTER, _POINTER, _POINTER),
    "rampwise_roots_init": (None, _POINTER),
    "rampwise_roots_modes": (_SIZE, _POINTER),
    "rampwise_roots_to_modes": (_INT, _POINTER, _POINTER, _POINTER, _POINTER, _POINTER),
    "rampwise_combine_absolute_sum": (_DOUBLE, _SIZE, _POINTER),
    "rampwise_combine_root_of_squares": (_DOUBLE, _SIZE, _POINTER),
    "rampwise_combine_complete_quadratic": (_DOUBLE, _SIZE, _POINTER, _POINTER, _POINTER),
    "rampwise_combine_with_share": (_DOUBLE, _SIZE, _POINTER, _DOUBLE),
    "rampwise_modal_correlation": (_DOUBLE, _DOUBLE, _DOUBLE, _DOUBLE, _DOUBLE),
    "rampwise_list_log": (_INT, _SIZE, _DOUBLE, _DOUBLE, _POINTER),
    "rampwise_list_octaves": (_INT, _DOUBLE, _DOUBLE, _SIZE, _SIZE, _POINTER, _POINTER),
}  # fmt: skip
_IN_SINGLE = (
    "coeffs_make", "start_settled", "acceleration", "total_acceleration", "run", "solve", "bank_size",
    "bank_alignment", "bank_init", "bank_start", "bank_set", "bank_get", "bank_retune", "bank_run", "bank_stopped",
    "bank_read", "bank_saved_size", "bank_save", "bank_resume", "stream_init", "stream_start", "stream_put",
    "stream_put_raw", "stream_put_at", "stream_put_raw_at", "stream_skip_to", "stream_read", "stream_state",
    "stream_count", "stream_retune", "stream_attach", "stream_saved_size", "stream_save", "stream_resume",
    "watch_init", "watch_peak", "watch_reset", "watch_level", "watch_release", "watch_events", "watch_counts",
    "watch_saved_size", "watch_save", "watch_resume",
)  # fmt: skip
_MAKERS = ("coeffs_make",)  # numbers that go in stay double
_PROTOTYPES.update({
    f"rampwise_{name}_f32": tuple(
        ctypes.c_float if kind is _DOUBLE and name not in _MAKERS else kind for kind in _PROTOTYPES["rampwise_" + name]
    )
    for name in _IN_SINGLE
})  # fmt: skip

# Which argument a status speaks of, unless the caller knows better.
_ARGUMENTS = {
    "INPUT": "input",
    "BETWEEN": "between",
    "IMPULSES": "between",
    "DIFFERENT": "system",
    "COUNT": "count",
    "QUANTITY": "quantity",
    "INSTRUCTIONS": "instructions",
    "MASS": "mass",
    "DAMPER": "damper",
    "STIFFNESS": "stiffness",
    "FREQUENCY": "frequency",
    "INTERVAL": "dt",
    "STEP_LENGTH": "dt",
    "COEFFICIENT": "dt",
    "FRACTION": "fraction",
    "NO_REST": "start",
    "SAMPLE": "record",
    "STATE": "state",
    "TIME": "time",
    "OVERFLOW": "record",
    "FRAME": "frame",
    "GAP": "samples",
    "PERCENT": "percent",
    "WEIGHT": "outputs",
    "ROOTS": "damper",
    "DEFECTIVE": "damper",
    "DAMAGED": "saved",
    "KIND": "saved",
    "EDITION": "saved",
}


def _candidates() -> List[str]:
    """Where the library may be: as the environment says, beside this file, or installed."""
    named = os.environ.get("RAMPWISE_LIBRARY")
    if named:
        return [named]
    beside = sorted(str(path) for path in pathlib.Path(__file__).parent.glob("librampwise.*"))
    installed = ctypes.util.find_library("rampwise")
    return beside + ([installed] if installed else []) + ["librampwise.so.0.1"]


def _open() -> ctypes.CDLL:
    reasons = []
    for path in _candidates():
        try:
            return ctypes.CDLL(path)
        except OSError as error:
            reasons.append(str(error))
    raise ImportError(
        "The shared library of rampwise cannot be loaded: " + "; ".join(reasons)
        + ". Install it, or set RAMPWISE_LIBRARY to its file."
    )  # fmt: skip


def _function(library: ctypes.CDLL, name: str, result: Any, *arguments: Any) -> Callable[..., Any]:
    function = getattr(library, name)
    function.restype = result
    function.argtypes = arguments
    return function  # type: ignore[no-any-return]


def _check_version(version: str) -> None:
    """Until 1.0 the face may change with the middle number."""
    if version.split(".")[:2] != __version__.split(".")[:2]:
        raise ImportError(
            f"The package rampwise {__version__} does not fit the shared library, which is version {version}. "
            "Install the two of one version."
        )


def _check_sizes(size_of: Callable[[bytes], int]) -> None:
    for name, dtype in _STRUCTS.items():
        if size_of(name.encode()) != dtype.itemsize:
            raise ImportError(
                f"The package takes {name} to have {dtype.itemsize} bytes, the shared library "
                f"{size_of(name.encode())}. Install the two of one version."
            )


_loaded = _open()
try:
    _version = _function(_loaded, "rampwise_version", ctypes.c_char_p)
    _constant = _function(_loaded, "rampwise_constant", _INT, ctypes.c_char_p, ctypes.POINTER(_INT))
    _status_text = _function(_loaded, "rampwise_status_text", ctypes.c_char_p, _INT)
    _check_version(_version().decode())
    _size_of = _function(_loaded, "rampwise_struct_size", _SIZE, ctypes.c_char_p)
    _check_sizes(_size_of)
    _functions = {name: _function(_loaded, name, *types) for name, types in _PROTOTYPES.items()}
except AttributeError as error:
    raise ImportError(f"The shared library is not rampwise {__version__}: {error}") from error

library_version: str = _version().decode()
arithmetic_edition: int = _function(_loaded, "rampwise_arithmetic_edition", _INT)()


def constant(name: str) -> int:
    """The value of a public constant, named without RAMPWISE_."""
    value = _INT()
    if _constant(f"RAMPWISE_{name}".encode(), ctypes.byref(value)) != 0:
        raise ValueError(f"there is no constant {name}")
    return value.value


_STATUS = {constant(f"ERROR_{kind}"): kind for kind in [*_ARGUMENTS, "MEMORY", "MISSING", "NOT_MADE"]}
OVERFLOW = constant("ERROR_OVERFLOW")


def struct_size(name: str) -> int:
    """Bytes of a struct whose members are private."""
    return int(_size_of(name.encode()))


def status_text(status: int) -> str:
    return str(_status_text(status).decode())


def call(name: str, *arguments: Any) -> Any:
    """A function of the library by its name without rampwise_; arrays go in as addresses."""
    return _functions["rampwise_" + name](*arguments)


def check(status: int, where: str = "", **names: str) -> None:
    """Raises what a status says, naming the argument.

    Parameters
    ----------
    status : int
        What the library answered.
    where : str
        Where in the argument, for the end of the text.
    **names : str
        Other names of arguments, by the kind of status: ``frequency="period"``.
    """
    if status == 0:
        return
    kind = _STATUS.get(status, "")
    if kind == "MEMORY":
        raise MemoryError(status_text(status))
    argument = names.get(kind.lower(), _ARGUMENTS.get(kind, ""))
    text = status_text(status) + (f" ({where})" if where else "")
    raise ValueError(f"{argument}: {text}" if argument else text)


def saved(kind: str, at: int, suffix: str = "") -> bytes:
    """An object of a kind as bytes."""
    held = np.zeros(call(f"{kind}_saved_size{suffix}", at), np.uint8)
    check(call(f"{kind}_save{suffix}", at, address(held), held.size))
    return held.tobytes()


def resume(kind: str, at: int, held: bytes, suffix: str = "") -> None:
    """Takes an object of a kind back from bytes."""
    given = np.frombuffer(held, np.uint8)
    check(call(f"{kind}_resume{suffix}", at, address(given), given.size), different="saved")


def address(array: NDArray[Any]) -> int:
    """Where the first element lies."""
    return int(array.ctypes.data)


def addresses(array: NDArray[Any]) -> NDArray[np.intp]:
    """The address of every element."""
    at = np.full(array.shape, address(array), np.intp)
    for axis, (length, stride) in enumerate(zip(array.shape, array.strides)):
        along = np.arange(length) * stride
        at += along.reshape((length,) + (1,) * (array.ndim - axis - 1))
    return at.reshape(-1)


_self_test = _function(_loaded, "rampwise_self_test", _INT)()
if _self_test != 0:
    raise ImportError(f"The shared library does not compute here as it should: {status_text(_self_test)}")
