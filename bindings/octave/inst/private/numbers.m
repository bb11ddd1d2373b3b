## numbers (CALLER, NAME, X): X as doubles, exactly; refused where it is no real, full array of numbers. The integers of
## 64 bits have values that no double has.
function x = numbers (caller, name, x)
  small = isfloat (x) || (isinteger (x) && ! isa (x, "int64") && ! isa (x, "uint64"));
  if (! small || ! isreal (x) || issparse (x) || ndims (x) > 2)
    error ("rampwise:argument", "%s: %s must be a real, full array of numbers", caller, name);
  endif
  x = double (x);
endfunction
