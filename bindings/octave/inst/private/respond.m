## respond (CALLER, T, P, DT, OPTIONS): the histories under P, at the times T where that is not empty.
function r = respond (caller, t, p, dt, options)
  in_single = isa (p, "single") && isempty (t);
  p = samples (caller, p);
  s = systems (caller, options);
  [input, between] = kinds (caller, options);
  n = pairs (caller, s, p);
  start = choice (caller, "start", options.start, starts ()) - 1;
  u0 = initial (caller, "displacement", options.displacement, n);
  v0 = initial (caller, "velocity", options.velocity, n);
  if (start != 0 && any ([u0, v0]))
    error ("rampwise:option", "%s: 'displacement' and 'velocity' belong to the start 'at once'", caller);
  endif
  [which, fields] = outputs (caller, options.outputs, motions ());
  wanted = zeros (1, numel (motions ()));
  wanted(which) = 1;
  command = "response";
  if (in_single)
    command = "response_f32";
    p = single (p);
  endif
  answers = cell (1, numel (wanted));
  [status, fault, answers{:}] = __rampwise__ (command, s, dt, input, between, start, u0, v0, p, wanted, t);
  check (caller, status, fault, size (p));
  r = cell2struct ([{t}, answers(which)], [{"time"}, fields], 2);
  r.provenance = provenance ();
endfunction
