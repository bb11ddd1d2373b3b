## count_of (CALLER, NAME, X): X as a whole number, 0 or more.
function x = count_of (caller, name, x)
  x = scalar (caller, name, x);
  if (! (x >= 0 && x <= 2^53 && x == fix (x)))
    error ("rampwise:argument", "%s: %s must be a whole number, 0 or more", caller, name);
  endif
endfunction
