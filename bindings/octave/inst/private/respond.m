## respond (CALLER, T, P, DT, OPTIONS): the histories under P, at the times T where that is not empty.
function r = respond (caller, t, p, dt, options)
  in_single = isa (p, "single") && isempty (t);
  p = samples (caller, p);
  s = systems (caller, options);
  [input, between] = kinds (caller, options);
  n = max (columns (s), columns (p));
  if (any ([columns(s), columns(p)] != n & [columns(s), columns(p)] != 1))
    error ("rampwise:argument", "%s: %d oscillators and %d columns of P: they must be as many, or one", caller,
           columns (s), columns (p));
  endif
  start = choice (caller, "start", options.start, starts ()) - 1;
  u0 = initial (caller, "displacement", options.displacement, n);
  v0 = initial (caller, "velocity", options.velocity, n);
  if (start != 0 && any ([u0, v0]))
    error ("rampwise:option", "%s: 'displacement' and 'velocity' belong to the start 'at once'", caller);
  endif
  r = struct ("time", t);
  command = "response";
  if (in_single)
    command = "response_f32";
    p = single (p);
  endif
  [status, fault, r.displacement, r.velocity, r.acceleration, r.total_acceleration] = ...
    __rampwise__ (command, s, dt, input, between, start, u0, v0, p, ones (1, 4), t);
  check (caller, status, fault, size (p));
  r.provenance = provenance ();
endfunction
