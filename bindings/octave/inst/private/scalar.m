## scalar (CALLER, NAME, X): X as a double scalar.
function x = scalar (caller, name, x)
  x = numbers (caller, name, x);
  if (! isscalar (x))
    error ("rampwise:argument", "%s: %s must be a scalar", caller, name);
  endif
endfunction
