## two_histories (CALLER, X, Y, NAMES): two vectors of as many numbers, one or more, as columns.
function [x, y] = two_histories (caller, x, y, names)
  x = numbers (caller, names, x);
  y = numbers (caller, names, y);
  if (! isvector (x) || ! isvector (y) || numel (x) != numel (y))
    error ("rampwise:argument", "%s: %s must be vectors of as many elements", caller, names);
  endif
  [x, y] = deal (x(:), y(:));
endfunction
