## truth (CALLER, NAME, X): the option NAME as true or false.
function x = truth (caller, name, x)
  if (! isscalar (x) || ! (islogical (x) || isnumeric (x)) || isnan (x))
    error ("rampwise:option", "%s: option '%s' must be true or false", caller, name);
  endif
  x = logical (x);
endfunction
