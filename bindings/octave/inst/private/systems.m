## systems (CALLER, OPTIONS): the systems that OPTIONS describe, a column {mass; damper; stiffness} each.
function s = systems (caller, options)
  if (! isempty (options.system))
    s = of_struct (caller, options);
    return;
  endif
  [way, value] = natural (caller, options);
  zeta = damping (caller, options);
  mass = numbers (caller, "option 'mass'", options.mass)(:).';
  value = value(:).';
  n = max ([numel(value), numel(zeta), numel(mass)]);
  if (any ([numel(value), numel(zeta), numel(mass)] != n & [numel(value), numel(zeta), numel(mass)] != 1))
    error ("rampwise:argument", "%s: '%s', 'damping' and 'mass' must have as many elements, or one", caller, way);
  endif
  [status, fault, s] = __rampwise__ ("system", way, value .* ones (1, n), zeta(:).' .* ones (1, n));
  check (caller, status, fault);
  s = s .* mass;
endfunction

function s = of_struct (caller, options)
  s = options.system;
  if (! isempty ([options.period(:); options.frequency(:); options.omega(:); options.damping(:)])
      || ! isequal (options.mass, 1))
    error ("rampwise:option", "%s: give either 'system' or a description of one", caller);
  endif
  if (! isstruct (s) || ! isscalar (s) || ! all (isfield (s, {"mass", "damper", "stiffness"})))
    error ("rampwise:argument", "%s: 'system' must be a struct of mass, damper and stiffness", caller);
  endif
  m = numbers (caller, "mass", s.mass)(:).';
  c = numbers (caller, "damper", s.damper)(:).';
  k = numbers (caller, "stiffness", s.stiffness)(:).';
  n = max ([numel(m), numel(c), numel(k)]);
  if (any ([numel(m), numel(c), numel(k)] != n & [numel(m), numel(c), numel(k)] != 1) || isempty (m))
    error ("rampwise:argument", "%s: mass, damper and stiffness must have as many elements, or one", caller);
  endif
  s = [m .* ones(1, n); c .* ones(1, n); k .* ones(1, n)];
endfunction
