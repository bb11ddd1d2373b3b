## damping (CALLER, OPTIONS): the damping ratios, refused where they are not finite or look like per cent.
function zeta = damping (caller, options)
  if (isempty (options.damping))
    error ("rampwise:option", "%s: option 'damping' is needed: the damping ratio, 1 is critical", caller);
  endif
  zeta = numbers (caller, "option 'damping'", options.damping);
  check (caller, -32 * any (! isfinite (zeta(:))), find (! isfinite (zeta(:)), 1));
  if (any (zeta(:) > 2) && ! truth (caller, "allow_strong_damping", options.allow_strong_damping))
    error ("rampwise:damping", ["%s: damping ratio %g is above 2: is it in per cent? Divide by 100, or set option " ...
                                "'allow_strong_damping' to true"], caller, max (zeta(:)));
  endif
endfunction
