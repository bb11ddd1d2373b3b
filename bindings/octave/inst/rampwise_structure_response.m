## -*- texinfo -*-
## @deftypefn  {} {@var{r} =} rampwise_structure_response (@var{b}, @var{p}, @var{dt}, "input", "base acceleration")
## @deftypefnx {} {@var{r} =} rampwise_structure_response (@var{b}, @var{p}, @var{dt}, "input", "force", "on", @var{F})
## The exact response of the structure @var{b}, of @code{rampwise_structure}, from the first sample on, to samples
## @var{p} that are straight lines in between, a column each input, each @var{dt} after the one before.
##
## @table @asis
## @item "input"
## "force" or "base acceleration", always needed. Displacement and velocity are relative to the base then.
## @item "on"
## A column each input: the forces on the structure's masses for a unit of a force; of a base acceleration what it
## displaces rigidly, ones unless given.
## @item "rows"
## What is answered: @var{rows} times the displacements of the masses, their velocities and so on. Of a row each, the
## unit matrix unless given: for example @code{[-1, 1, 0]} for the drift of a storey.
## @item "between"
## "ramp" (default), or "hold": constant until the next sample.
## @item "displacement", "velocity"
## of the masses at the first sample, a number each: zeros, at rest, unless given.
## @item "modes"
## How many modes are kept, slowest first: all unless given (@code{rampwise_participation} says what that takes of the
## mass). For classical damping.
## @item "static_correction"
## true: displacements settle where the whole structure does, although modes are left out (residual mode, missing mass).
## Default: false. For classical damping.
## @item "equipment", "point"
## Light equipment, which the structure does not feel: oscillators as from @code{rampwise_system}, and for each the row of
## "rows" on whose total acceleration it stands. Several pieces may have one point, and one piece several points, as a
## piece each. It begins at rest against its point. The answer is exact,
## for tuned equipment too.
## @item "peaks"
## true (default) or false: find the peaks between the samples too.
## @item "part"
## Of which time the peaks are: "primary" (default), "residual" or "maximax", as in @code{rampwise_live_structure_read}; but
## where "between" is "hold" the last sample acts for one @var{dt} before the free motion begins.
## @end table
##
## @var{r} is a struct of @code{time}, a column; matrices @code{displacement}, @code{velocity}, @code{acceleration} and
## @code{total_acceleration} (against a fixed frame), a row each sample and a column each row of "rows"; @code{peaks}, a
## struct of the four names, with structs of rows @code{largest} (in size, with its sign), @code{time}, @code{high},
## @code{high_time}, @code{low}, @code{low_time} and, but for "primary", @code{later}; where there is equipment
## @code{equipment}, a struct of the same four motions, against its point but for the total acceleration, a column each
## piece, and @code{peaks} of its displacement and total acceleration; and @code{provenance}.
##
## Results support, and never replace, the governing code and a licensed engineer's judgement.
## @seealso{rampwise_structure, rampwise_live_structure, rampwise_floor_spectrum, rampwise_combine}
## @end deftypefn

function r = rampwise_structure_response (b, p, dt, varargin)
  if (nargin < 3)
    print_usage ();
  endif
  caller = "rampwise_structure_response";
  if (isempty (p))
    error ("rampwise:argument", "%s: P holds no samples", caller);
  endif
  options = structure_options ();
  options.part = "primary";
  options = parse (caller, options, varargin);
  part = part_number (caller, options.part);
  s = make_structure (caller, b, dt, options, 1:4);
  [h, status, fault] = push_structure (caller, s, p, true);
  n = rows (h.displacement);
  check (caller, status, fault, [n, s.inputs]);
  r = cell2struct ([{(0:n - 1).' * dt}; struct2cell(h)], [{"time"}; fieldnames(h)]);
  if (s.peaks)
    if (part != 0 && strcmpi (options.between, "hold")) # the last sample acts for DT
      [~, status] = push_structure (caller, s, zeros (1, s.inputs), false);
      check (caller, status, n, [n, s.inputs]);
    endif
    now = read_structure (caller, s, part, free_steps ());
    r.peaks = now.peaks;
    if (s.pieces > 0)
      r.equipment.peaks = now.equipment.peaks;
    endif
  endif
  r.provenance = provenance ();
endfunction

%!demo
%! ## The drift of the storeys of an invented three-storey rack whose base shakes, with one damper in its lowest storey
%! M = diag ([2, 2, 1]); K = 600 * [2, -1, 0; -1, 2, -1; 0, -1, 1]; C = zeros (3); C(1,1) = 20;
%! dt = 0.01; t = (0:dt:6).';
%! r = rampwise_structure_response (rampwise_structure (M, C, K), sin (8 * t) .* (t < 2), dt, ...
%!                                  "input", "base acceleration", "rows", [1, 0, 0; -1, 1, 0; 0, -1, 1]);
%! plot (r.time, r.displacement); xlabel ("time (s)"); ylabel ("drift (m)"); legend ("1st", "2nd", "3rd");

%!function E = step_of (A, B, dt, part = 1)
%!  ## x' = A x + B p over a part of a step: one matrix exponential of the system with p and its change over the step.
%!  [n, m] = size (B);
%!  E = expm (part * [dt*A, dt*B, zeros(n, m); zeros(m, n + m), eye(m); zeros(m, n + 2 * m)])(1:n,:);
%!endfunction
%!function x = stepped (A, B, p, dt, x)
%!  E = step_of (A, B, dt);
%!  x(:,rows (p)) = 0;
%!  for i = 2:rows (p)
%!    x(:,i) = E * [x(:,i-1); p(i-1,:).'; (p(i,:) - p(i-1,:)).'];
%!  endfor
%!endfunction
%!function f = inside (A, B, p, dt, x)
%!  ## The states at the samples, and at 63 instants in every step.
%!  f = x;
%!  for i = 1:63
%!    f = [f, step_of(A, B, dt, i / 64) * [x(:,1:end-1); p(1:end-1,:).'; diff(p).']];
%!  endfor
%!endfunction
%!function [A, B] = first_order (M, C, K, forces)
%!  n = rows (M);
%!  A = [zeros(n), eye(n); -M\K, -M\C];
%!  B = [zeros(n, columns (forces)); M\forces];
%!endfunction
%!function [u, v] = exact (M, C, K, forces, p, dt, start = zeros (2 * rows (M), 1))
%!  [A, B] = first_order (M, C, K, forces);
%!  x = stepped (A, B, p, dt, start);
%!  u = x(1:end/2,:).'; v = x(end/2+1:end,:).';
%!endfunction
%!function compare (M, C, K, b, dt, p, input, on, start = zeros (2 * rows (M), 1))
%!  r = rampwise_structure_response (b, p, dt, "input", input, "on", on, "displacement", start(1:end/2), "velocity", start(end/2+1:end));
%!  forces = on; base = 0;
%!  if (! strcmp (input, "force"))
%!    forces = -M * on; base = p * on.';
%!  endif
%!  [u, v] = exact (M, C, K, forces, p, dt, start);
%!  a = (p * forces.' - v * C.' - u * K.') / M;
%!  x = {"displacement", u; "velocity", v; "acceleration", a; "total_acceleration", a + base};
%!  for i = 1:4
%!    assert (r.(x{i,1}), x{i,2}, 1e-10 * max (abs (x{i,2}(:)))); # 200 steps of both roundings, 3e-13 or so
%!    assert (r.peaks.(x{i,1}).high >= max (x{i,2}) - 1e-10 * max (abs (x{i,2}(:))));
%!  endfor
%!endfunction
%!function [A, B, out, direct] = with_equipment (M, C, K, e, point)
%!  ## The states u, u', x, x' of a structure whose base shakes, with equipment on masses; rows of x'' and of its total.
%!  [A, B] = first_order (M, C, K, -M * ones (rows (M), 1));
%!  n = rows (M); k = numel (point);
%!  [damper, stiffness] = deal (diag (e.damper ./ e.mass), diag (e.stiffness ./ e.mass));
%!  y = A(n + point,:); # the point's total acceleration: the base's own is in it twice, with both signs
%!  A = [A, zeros(2 * n, 2 * k); zeros(k, 2 * n + k), eye(k); -y, -stiffness, -damper];
%!  B = [B; zeros(2 * k, 1)];
%!  out = [A(2*n+k+1:end,:); zeros(k, 2 * n), -stiffness, -damper];
%!endfunction
%!shared M, K, C, p, dt
%! M = diag ([2, 2, 1]); K = 600 * [2, -1, 0; -1, 2, -1; 0, -1, 1]; C = 0.3 * M + 0.002 * K;
%! dt = 0.04; p = sin ((0:200).' .^ 1.2) + 0.5;
%!test # classical, from the base and by forces, given every way
%! compare (M, C, K, rampwise_structure (M, C, K), dt, p, "base acceleration", [1; 1; 1]);
%! compare (M, C, K, rampwise_structure (M, C, K), dt, [p, cos(p)], "force", [0, 1; 2, 0; 0, -3]);
%! b = rampwise_structure (M, [], K, "damping", [0.02, 0.1, 0.4]);
%! D = M * b.shapes * diag (2 * b.damping .* b.omega) * b.shapes.' * M;
%! compare (M, D, K, b, dt, p, "base acceleration", [1; 1; 1]);
%!test # damping that is not classical, also with real roots, under one input and two
%! for damper = [5, 80, 500]
%!   D = C; D(1,1) += damper;
%!   b = rampwise_structure (M, D, K);
%!   assert (! b.classical);
%!   compare (M, D, K, b, dt, p, "base acceleration", [1; 1; 1]);
%!   compare (M, D, K, b, dt, [p, cos(p)], "force", [0, 1; 2, 0; 0, -3]);
%! endfor
%!test # rigid bodies: three masses that nothing holds, damping between two of them; and a damper to the ground
%! F = 600 * [1, -1, 0; -1, 2, -1; 0, -1, 1]; D = 4 * [1, -1, 0; -1, 1, 0; 0, 0, 0];
%! b = rampwise_structure (M, D, F);
%! assert (b.coupled, [false; true; true]);
%! compare (M, D, F, b, dt, p - mean (p), "force", [1; 0; 0]);
%! D(3,3) = 7;
%! compare (M, D, F, rampwise_structure (M, D, F), dt, p - mean (p), "force", [1; 0; 0]);
%!test # rows, and peaks between the samples: those at 63 instants in every step
%! D = C; D(1,1) += 5; b = rampwise_structure (M, D, K); drift = [1, 0, 0; -1, 1, 0];
%! r = rampwise_structure_response (b, p, dt, "input", "base acceleration", "rows", drift);
%! [A, B] = first_order (M, D, K, -M * ones (3, 1));
%! x = stepped (A, B, p, dt, zeros (6, 1));
%! u = inside (A, B, p, dt, x)(1:3,:).' * drift.';
%! assert (r.displacement, x(1:3,:).' * drift.', 1e-10 * max (abs (u(:))));
%! assert (r.peaks.displacement.high, max (u), -2e-4); # (w dt / 64)^2 / 8 = 4e-5 for the fastest mode, w = 33
%! assert (all (r.peaks.displacement.high >= max (u) * (1 - 1e-10)));
%! assert (abs (r.peaks.displacement.largest), max (abs (u)), -2e-4);
%! q = rampwise_structure_response (b, p, dt, "input", "base acceleration", "rows", drift, "peaks", false);
%! assert (! isfield (q, "peaks"));
%! assert (q.velocity, r.velocity);
%!test # initial states, however damped: classical, by pairs of complex roots, with real roots, of rigid bodies
%! start = [0.02; -0.01; 0.03; 0.5; 0; -0.7];
%! for damper = [0, 5, 500]
%!   D = C; D(1,1) += damper;
%!   compare (M, D, K, rampwise_structure (M, D, K), dt, p, "base acceleration", [1; 1; 1], start);
%!   compare (M, D, K, rampwise_structure (M, D, K), dt, 0 * p, "force", [1; 0; 0], start);
%! endfor
%! F = 600 * [1, -1, 0; -1, 2, -1; 0, -1, 1]; D = 4 * [1, -1, 0; -1, 1, 0; 0, 0, 0];
%! compare (M, D, F, rampwise_structure (M, D, F), dt, p - mean (p), "force", [1; 0; 0], start);
%!test # equipment on two floors, also tuned and undamped: structure and equipment in one matrix exponential
%! for damper = [0, 30]
%!   D = C; D(1,1) += damper; b = rampwise_structure (M, D, K);
%!   e = rampwise_system ("omega", [3, b.omega(1), b.omega(3), 90], "damping", [0.05, 0, 0.001, 0.02], "mass", [1, 2, 3, 4]);
%!   point = [2, 1, 3, 3];
%!   r = rampwise_structure_response (b, p, dt, "input", "base acceleration", "equipment", e, "point", point);
%!   [A, B, out] = with_equipment (M, D, K, e, point);
%!   x = stepped (A, B, p, dt, zeros (rows (A), 1));
%!   f = inside (A, B, p, dt, x);
%!   made = [r.equipment.displacement, r.equipment.velocity, r.equipment.acceleration, r.equipment.total_acceleration];
%!   x = [x(7:14,:); out * x].';
%!   assert (max (abs (made - x)) < 1e-10 * max (abs (x)));
%!   f = [f(7:10,:); (out * f)(5:8,:)].';
%!   high = [r.equipment.peaks.displacement.high, r.equipment.peaks.total_acceleration.high];
%!   low = [r.equipment.peaks.displacement.low, r.equipment.peaks.total_acceleration.low];
%!   assert (all ([high - max(f), min(f) - low] > -1e-10 * max (abs ([f, f]))));
%!   assert ([high; -low], [max(f); -min(f)], -4e-4); # (90 dt / 64)^2 / 8 = 4e-4
%! endfor
%!test # one piece on several points is as many pieces
%! b = rampwise_structure (M, C, K); o = {"input", "base acceleration", "equipment"}; e = {"omega", 7, "damping", 0.05};
%! r = rampwise_structure_response (b, p, dt, o{:}, rampwise_system (e{:}), "point", [3, 1]);
%! x = rampwise_structure_response (b, p, dt, o{:}, rampwise_system (e{:}, "mass", [1, 1]), "point", [3, 1]);
%! assert (columns (r.equipment.displacement), 2);
%! assert (r.equipment, x.equipment);
%!test # modes left out: those that stay, in one matrix exponential
%! b = rampwise_structure (M, C, K); s = b.shapes(:,1:2);
%! r = rampwise_structure_response (b, p, dt, "input", "base acceleration", "modes", 2);
%! u = exact (eye (2), diag (2 * b.damping(1:2) .* b.omega(1:2)), diag (b.omega(1:2) .^ 2), -s.' * M * ones (3, 1), p, dt) * s.';
%! assert (r.displacement, u, 1e-10 * max (abs (u(:))));
%!test # static correction: what modes left out carry of a load that does not change; nothing where none is
%! b = rampwise_structure (M, [], K, "damping", 0.3); o = {"input", "force", "on", [0; 0; 1], "static_correction", true};
%! r = rampwise_structure_response (b, ones (900, 1), dt, o{:}, "modes", 1); # 1.5 damping rates of the slowest mode a unit of time
%! assert (r.displacement(end,:).', K \ [0; 0; 1], 1e-15);
%! assert (r.velocity(end,:), zeros (1, 3), 1e-14);
%! [x, q] = deal (rampwise_structure_response (b, p, dt, o{:}), rampwise_structure_response (b, p, dt, o{1:4}));
%! assert (x.displacement, q.displacement, 1e-14);
%!test # of rigid bodies: the springs' forces give the others the acceleration of all, 1/5
%! F = 600 * [1, -1, 0; -1, 2, -1; 0, -1, 1];
%! r = rampwise_structure_response (rampwise_structure (M, [], F, "damping", 0.1), [1; 1; 1], dt, "input", "force", "on", [1; 0; 0], ...
%!                                  "modes", 1, "static_correction", true, "rows", [-1, 1, 0; 0, -1, 1]);
%! assert (r.displacement, [1; 1; 1] * -[3, 1] / 5 / 600, 1e-16);
%! assert (r.acceleration, zeros (3, 2), 1e-14);
%!test # where a complex pair meets on the real axis there is one shape for two roots, and that is refused
%! D = C; [low, high] = deal (5, 500);
%! for i = 1:60
%!   D(1,1) = (low + high) / 2;
%!   b = rampwise_structure (M, D, K);
%!   if (any (imag (b.roots) == 0)) high = D(1,1); else low = D(1,1); endif
%! endfor
%! fail ('rampwise_structure_response (b, 1, 1, "input", "base acceleration")', "M, C, K: ");
%!test # one mass is an oscillator, bit for bit, wherever it begins; held inputs too
%! start = {"displacement", 0.3, "velocity", -2};
%! for between = {"ramp", "hold"}
%!   o = {"input", "force", "between", between{1}, start{:}};
%!   s = rampwise_structure_response (rampwise_structure (1, 0.6, 9), p, dt, o{:}, "on", 1);
%!   r = rampwise_response (p, dt, "system", struct ("mass", 1, "damper", 0.6, "stiffness", 9), o{:});
%!   assert (s.displacement, r.displacement);
%! endfor
%!test # and so are its peaks with those after the record; a held last sample acts for its step
%! q = [p(1:39); 5]; w = 0.7 / dt; x = {"omega", w, "damping", 0.05}; b = rampwise_structure (1, [], w ^ 2, x{3:4});
%! for between = {"ramp", "hold"}
%!   for part = {"residual", "maximax"}
%!     o = {"between", between{1}, "part", part{1}};
%!     s = rampwise_spectrum (q, dt, x{:}, o{:});
%!     r = rampwise_structure_response (b, q, dt, "input", "base acceleration", o{:});
%!     assert (abs (r.peaks.displacement.largest), s.SD, -1e-13);
%!     assert (abs (r.peaks.total_acceleration.largest), s.SA, -1e-13);
%!     assert (rows (r.displacement), 40);
%!   endfor
%! endfor
%!test # parts of the time: those of the live structure; the histories are the same
%! b = rampwise_structure (M, C, K); e = rampwise_system ("omega", 7, "damping", 0.05);
%! o = {"input", "base acceleration", "equipment", e, "point", 3};
%! s = rampwise_live_structure (b, dt, o{:}); h = rampwise_live_structure_push (s, p);
%! for part = {"primary", "residual", "maximax"}
%!   r = rampwise_structure_response (b, p, dt, o{:}, "part", part{1});
%!   now = rampwise_live_structure_read (s, "part", part{1});
%!   assert ({r.displacement, r.peaks, r.equipment.peaks}, {h.displacement, now.peaks, now.equipment.peaks});
%! endfor
%!shared b
%! b = rampwise_structure (eye (2), [], [2, -1; -1, 1], "damping", 0.05);
%!error <'part' must be one of> rampwise_structure_response (b, 1, 1, "input", "base acceleration", "part", "after")
%!error <Invalid call> rampwise_structure_response (b, 1)
%!error <B must come from> rampwise_structure_response (1, 1, 1, "input", "force")
%!error <a column for each of the 1 of option 'on'> rampwise_structure_response (b, ones (2, 3), 1, "input", "force", "on", [1; 1])
%!error <'on' must have> rampwise_structure_response (b, 1, 1, "input", "force")
%!error <'rows' must have 2 columns> rampwise_structure_response (b, 1, 1, "input", "base acceleration", "rows", [1, 2, 3])
%!error <must be finite> rampwise_structure_response (b, 1, 1, "input", "base acceleration", "rows", [1, NaN])
%!error <P.3,2.> rampwise_structure_response (b, [1, 1; 2, 2; 3, NaN], 1, "input", "force", "on", eye (2))
%!error <P.1.> rampwise_structure_response (b, Inf, 1, "input", "base acceleration")
%!error id=rampwise:interval rampwise_structure_response (b, 1, 0, "input", "base acceleration")
%!error <'input' must be one of: force, base acceleration$> rampwise_structure_response (b, 1, 1, "input", "base velocity")
%!error <'input' is needed, one of: force, base acceleration$> rampwise_structure_response (b, 1, 1)
%!error <P holds no samples> rampwise_structure_response (b, [], 1, "input", "base acceleration")
%!error <'peaks' must be true or false> rampwise_structure_response (b, 1, 1, "input", "base acceleration", "peaks", "no")
