## oscillators (WAY, VALUE, ZETA): the fields by which spectra name their oscillators.
function s = oscillators (way, value, zeta)
  s = struct ("period", value, "frequency", value, "omega", value, "damping", zeta);
  switch (way)
    case "period"
      s.frequency = 1 ./ value;
      s.omega = 2 * pi ./ value;
    case "frequency"
      s.period = 1 ./ value;
      s.omega = 2 * pi * value;
    otherwise
      s.period = 2 * pi ./ value;
      s.frequency = value / (2 * pi);
  endswitch
endfunction
