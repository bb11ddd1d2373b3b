## numbers (CALLER, NAME, X): X as doubles, exactly; refused where it is no real, full array of numbers.
function x = numbers (caller, name, x)
  if (! isreal (x) || issparse (x) || ndims (x) > 2 || ! (isfloat (x) || isinteger (x)) || isa (x, "int64")
      || isa (x, "uint64"))
    error ("rampwise:argument", "%s: %s must be a real, full array of numbers", caller, name);
  endif
  x = double (x);
endfunction
