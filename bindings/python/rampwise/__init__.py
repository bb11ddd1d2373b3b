"""Exact response of spring-mass-damper systems to sampled loads.

Three lines::

    import rampwise
    spectrum = rampwise.response_spectrum(ground, dt=0.005, period=rampwise.equal_ratios(200, 0.02, 4.0))
    print(spectrum.PSA)

====================================  =================================================================
`System`, `System.natural`            systems by mass, damper, stiffness, or by period, frequency, omega
`respond`                             whole records, at regular or irregular times
`response_spectrum`                   SD, SV, SA, PSV, PSA with instants and signs
`directional_spectrum`,               two components: percentiles over the direction
`percentiles_over_angle`
`energies`, `energy_spectrum`         where the energy goes
`for_each`                            many records of unequal length; a bad one does not stop the rest
`Bank`, `PeakBank`                    many oscillators under one input, fed in blocks; their true peaks
`Stream`, `Level`                     one oscillator on live data, with gaps, rails, watches that trip
`Structure`, `rayleigh_damper`,       structures by mass, damping and stiffness matrices: modes, records, live data,
`modal_damper`                        equipment; needs SciPy
`floor_spectrum`, `Equipment`         light equipment on a shaken structure
`root_of_squares`,                    rules for peaks where only a spectrum is known; also `absolute_sum`, `with_share`,
`complete_quadratic`                  `modal_correlation`
`coefficients`                        the coefficients of a step
`frequency_response`                  gain and phase, sampled beside continuous
`evidence_input`                      what the sampling has cost, for whole histories
`equal_ratios`, `octaves`             periods or frequencies of a spectrum
`rampwise.plot`                       pictures; needs matplotlib
====================================  =================================================================

Arrays may be of any real type, shape and layout, and are not copied where they need not be. Units are the caller's,
any consistent set; damping is a ratio. All bits are those of the C library. Results support, and never replace, the
governing code and a licensed engineer's judgement.
"""

from ._library import arithmetic_edition, library_version
from ._version import __version__
from .bank import Bank, Histories
from .combination import absolute_sum, complete_quadratic, modal_correlation, root_of_squares, with_share
from .directions import DirectionalSpectrum, directional_spectrum, percentiles_over_angle
from .energy import Energies, EnergyHistory, EnergySpectrum, energies, energy_spectrum
from .evidence import evidence_input
from .floor_spectrum import FloorSpectrum, floor_spectrum
from .frequency import FrequencyResponse, frequency_response
from .live_structure import Equipment, LiveStructure, StructureBlock, StructureResponse
from .peaks import PeakBank, Peaks
from .records import Outcomes, for_each
from .response import Response, respond
from .spectrum import Spectrum, equal_ratios, octaves, response_spectrum
from .stream import BRIDGED, CLIPPED, STARTED, WAITING, Block, Event, Level, LevelReport, Stream, Watch
from .structure import Row, Structure, modal_damper, rayleigh_damper
from .system import System, coefficients

__all__ = [
    "BRIDGED",
    "Bank",
    "Block",
    "CLIPPED",
    "DirectionalSpectrum",
    "Energies",
    "EnergyHistory",
    "EnergySpectrum",
    "Equipment",
    "Event",
    "FloorSpectrum",
    "FrequencyResponse",
    "Histories",
    "Level",
    "LevelReport",
    "LiveStructure",
    "Outcomes",
    "PeakBank",
    "Peaks",
    "Response",
    "Row",
    "STARTED",
    "Spectrum",
    "Stream",
    "Structure",
    "StructureBlock",
    "StructureResponse",
    "System",
    "WAITING",
    "Watch",
    "__version__",
    "absolute_sum",
    "arithmetic_edition",
    "coefficients",
    "complete_quadratic",
    "directional_spectrum",
    "energies",
    "energy_spectrum",
    "equal_ratios",
    "evidence_input",
    "floor_spectrum",
    "for_each",
    "frequency_response",
    "library_version",
    "modal_correlation",
    "modal_damper",
    "octaves",
    "percentiles_over_angle",
    "rayleigh_damper",
    "respond",
    "response_spectrum",
    "root_of_squares",
    "with_share",
]
