## grid_of (CALLER, OPTIONS): the oscillators of a spectrum: their struct, which of period, frequency and omega was
## given, a column of it, and a row of damping ratios.
function [s, way, value, zeta] = grid_of (caller, options)
  [way, value] = natural (caller, options);
  value = value(:);
  zeta = damping (caller, options)(:).';
  s = oscillators (way, value, zeta);
endfunction
