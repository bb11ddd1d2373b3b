## weights (CALLER, NAME, X): the four weights X of an output as the gateway takes it: {the library's number; weights}.
function column = weights (caller, name, x)
  x = numbers (caller, name, x);
  if (numel (x) != 4 || ! all (isfinite (x)))
    error ("rampwise:argument", "%s: %s must have four finite weights, on u, v, p and p - p_before", caller, name);
  endif
  column = [constant("WEIGHTED"); x(:)];
endfunction
