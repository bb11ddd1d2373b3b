## samples (CALLER, P): the samples P as doubles, a column each channel. A row is one channel.
function p = samples (caller, p)
  p = numbers (caller, "P", p);
  if (isempty (p))
    error ("rampwise:argument", "%s: P holds no samples", caller);
  endif
  if (isrow (p))
    p = p(:);
  endif
endfunction
