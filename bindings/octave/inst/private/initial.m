## initial (CALLER, NAME, X, N): the option NAME, a number for each of N columns, or one for all.
function x = initial (caller, name, x, n)
  x = numbers (caller, ["option '" name "'"], x)(:).';
  if (numel (x) != 1 && numel (x) != n)
    error ("rampwise:argument", "%s: option '%s' must have one element, or one for each of the %d columns of the answer",
           caller, name, n);
  endif
  x = x .* ones (1, n);
endfunction
