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
  if (! isempty ([options.period(:); options.frequency(:); options.omega(:); options.damping(:)])
      || ! isequal (options.mass, 1))
    error ("rampwise:option", "%s: give either 'system' or a description of one", caller);
  endif
  s = columns_of (caller, "'system'", options.system);
endfunction
