## columns_of (CALLER, NAME, S): columns {mass; damper; stiffness} of NAME, a struct of the three.
function x = columns_of (caller, name, s)
  if (! isstruct (s) || ! isscalar (s) || ! all (isfield (s, {"mass", "damper", "stiffness"})))
    error ("rampwise:argument", "%s: %s must be a struct of mass, damper and stiffness", caller, name);
  endif
  m = numbers (caller, "mass", s.mass)(:).';
  c = numbers (caller, "damper", s.damper)(:).';
  k = numbers (caller, "stiffness", s.stiffness)(:).';
  n = max ([numel(m), numel(c), numel(k)]);
  if (any ([numel(m), numel(c), numel(k)] != n & [numel(m), numel(c), numel(k)] != 1) || isempty (m))
    error ("rampwise:argument", "%s: mass, damper and stiffness must have as many elements, or one", caller);
  endif
  x = [m .* ones(1, n); c .* ones(1, n); k .* ones(1, n)];
endfunction
