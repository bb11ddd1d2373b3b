## pairs (CALLER, S, P): how many columns of answers the systems S and the columns of P make.
function n = pairs (caller, s, p)
  n = max (columns (s), columns (p));
  if (any ([columns(s), columns(p)] != n & [columns(s), columns(p)] != 1))
    error ("rampwise:argument", "%s: %d oscillators and %d columns of P: they must be as many, or one", caller,
           columns (s), columns (p));
  endif
endfunction
