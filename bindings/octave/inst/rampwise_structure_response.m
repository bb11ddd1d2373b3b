## -*- texinfo -*-
## @deftypefn  {} {@var{r} =} rampwise_structure_response (@var{b}, @var{p}, @var{dt}, "input", "base acceleration")
## @deftypefnx {} {@var{r} =} rampwise_structure_response (@var{b}, @var{p}, @var{dt}, "input", "force", "on", @var{F})
## The exact response of the structure @var{b}, of @code{rampwise_structure}, from rest at the first sample, to samples
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
## @item "peaks"
## true (default) or false: find the peaks between the samples too.
## @end table
##
## @var{r} is a struct of @code{time}, a column; matrices @code{displacement}, @code{velocity}, @code{acceleration} and
## @code{total_acceleration} (against a fixed frame), a row each sample and a column each row of "rows"; @code{peaks}, a
## struct of the four names, with structs of rows @code{largest} (in size, with its sign), @code{time}, @code{high},
## @code{high_time}, @code{low} and @code{low_time}; and @code{provenance}.
##
## Results support, and never replace, the governing code and a licensed engineer's judgement.
## @seealso{rampwise_structure, rampwise_combine}
## @end deftypefn

function r = rampwise_structure_response (b, p, dt, varargin)
  if (nargin < 3)
    print_usage ();
  endif
  caller = "rampwise_structure_response";
  if (! isstruct (b) || ! isscalar (b) || ! all (isfield (b, {"shapes", "modal_damper", "coupled_shapes"})))
    error ("rampwise:argument", "%s: B must come from rampwise_structure", caller);
  endif
  options = parse (caller, struct ("input", [], "on", [], "rows", [], "between", "ramp", "peaks", true), varargin);
  p = samples (caller, p);
  dt = scalar (caller, "DT", dt);
  [input, between] = kinds (caller, options);
  of_base = input == constant ("BASE_ACCELERATION");
  if (! of_base && input != constant ("FORCE"))
    error ("rampwise:input", "%s: option 'input' must be force or base acceleration", caller);
  endif
  [on, at] = sizes (caller, options, rows (b.mass), columns (p), of_base);
  forces = on;
  base = zeros (rows (at), columns (p));
  if (of_base)
    forces = -b.mass * on;
    base = at * on;
  endif
  w = weights_of (b, at);
  parts = {alone(b, w, forces), together(caller, b, w, forces)};
  pick = @(name) [parts{1}.(name), parts{2}.(name)];
  on_input = parts{2}.on_input + kron ([0; 0; 0; 1], base);
  [status, fault, made, six] = __rampwise__ ("structure", pick ("systems"), dt, constant ("FORCE"), between, ...
    pick ("load"), pick ("on_displacement"), pick ("on_velocity"), pick ("on_acceleration"), on_input, p.', ...
    truth (caller, "peaks", options.peaks) + 0);
  if (status == -60)
    fault = sub2ind (size (p), fault, find (! isfinite (p(fault,:)), 1));
  endif
  check (caller, status, fault, size (p));
  r = named (rows (at), made.', six, dt);
endfunction

function [on, at] = sizes (caller, options, n, inputs, of_base)
  on = numbers (caller, "option 'on'", options.on);
  at = numbers (caller, "option 'rows'", options.rows);
  if (isempty (on) && of_base)
    on = ones (n, 1);
  endif
  if (isempty (at))
    at = eye (n);
  endif
  if (any (size (on) != [n, inputs]))
    error ("rampwise:argument", "%s: option 'on' must have %d rows and a column for each of the %d columns of P", caller, n,
           inputs);
  endif
  if (columns (at) != n)
    error ("rampwise:argument", "%s: option 'rows' must have %d columns", caller, n);
  endif
  if (! all (isfinite ([on(:); at(:)])))
    error ("rampwise:weight", "%s: options 'on' and 'rows' must be finite", caller);
  endif
endfunction

## Outputs, displacement first, velocity, acceleration, total acceleration, as weights on the modes' own: outputs x modes.
function w = weights_of (b, at)
  on_modes = at * b.shapes;
  w.displacement = kron ([1; 0; 0; 0], on_modes);
  w.velocity = kron ([0; 1; 0; 0], on_modes);
  w.acceleration = kron ([0; 0; 1; 1], on_modes);
endfunction

## The modes that damping ties to no other.
function part = alone (b, w, forces)
  j = ! b.coupled;
  part.systems = [ones(1, sum (j)); diag(b.modal_damper)(j).'; b.modal_stiffness(j).'];
  part.load = forces.' * b.shapes(:,j);
  part.on_displacement = w.displacement(:,j);
  part.on_velocity = w.velocity(:,j);
  part.on_acceleration = w.acceleration(:,j);
endfunction

## The others, by their roots. q'' = load - D q' - k q.
function part = together (caller, b, w, forces)
  j = b.coupled;
  loads = b.shapes(:,j).' * forces;
  part = struct ("systems", zeros (3, 0), "load", zeros (columns (forces), 0), "on_displacement", zeros (rows (w.velocity), 0));
  part.on_velocity = part.on_acceleration = part.on_displacement;
  part.on_input = w.acceleration(:,j) * loads;
  if (! any (j))
    return;
  endif
  [D, k] = deal (b.modal_damper(j,j), b.modal_stiffness(j));
  two = @(x) reshape ([real(x(:)), imag(x(:))].', 2 * rows (x), []);
  on_displacement = w.displacement(:,j) - w.acceleration(:,j) .* k.';
  on_velocity = w.velocity(:,j) - w.acceleration(:,j) * D;
  [status, fault, part.systems, part.load, part.on_displacement, part.on_velocity] = ...
    __rampwise__ ("roots_to_modes", eye (sum (j)), D, two (b.coupled_roots.'), two (b.coupled_shapes), loads, ...
                  on_displacement.', on_velocity.');
  check (caller, status, fault);
  part.on_acceleration = zeros (size (part.on_velocity));
endfunction

function r = named (n, made, six, dt)
  r = struct ("time", (0:rows (made) - 1).' * dt);
  names = {"displacement", "velocity", "acceleration", "total_acceleration"};
  for i = 1:4
    j = (i - 1) * n + (1:n);
    r.(names{i}) = made(:,j);
    if (! isempty (six))
      x = six(:,j);
      r.peaks.(names{i}) = struct ("largest", x(1,:), "time", x(2,:), "high", x(3,:), "high_time", x(4,:), "low", x(5,:),
                                   "low_time", x(6,:));
    endif
  endfor
  r.provenance = provenance ();
endfunction

%!demo
%! ## The drift of the storeys of an invented three-storey rack whose base shakes, with one damper in its lowest storey
%! M = diag ([2, 2, 1]); K = 600 * [2, -1, 0; -1, 2, -1; 0, -1, 1]; C = zeros (3); C(1,1) = 20;
%! dt = 0.01; t = (0:dt:6).';
%! r = rampwise_structure_response (rampwise_structure (M, C, K), sin (8 * t) .* (t < 2), dt, ...
%!                                  "input", "base acceleration", "rows", [1, 0, 0; -1, 1, 0; 0, -1, 1]);
%! plot (r.time, r.displacement); xlabel ("time (s)"); ylabel ("drift (m)"); legend ("1st", "2nd", "3rd");

%!function [u, v] = exact (M, C, K, forces, p, dt)
%!  ## One matrix exponential of the system with p and its change over the step, [u; v; p; slope dt].
%!  n = rows (M); m = columns (p);
%!  A = zeros (2 * n + 2 * m);
%!  A(1:2*n,1:2*n+m) = dt * [zeros(n), eye(n), zeros(n, m); -M\K, -M\C, M\forces];
%!  A(2*n+(1:m),2*n+m+(1:m)) = eye (m);
%!  E = expm (A);
%!  x = zeros (2 * n, rows (p));
%!  for i = 2:rows (p)
%!    x(:,i) = E(1:2*n,:) * [x(:,i-1); p(i-1,:).'; (p(i,:) - p(i-1,:)).'];
%!  endfor
%!  u = x(1:n,:).'; v = x(n+1:end,:).';
%!endfunction
%!function compare (M, C, K, b, dt, p, input, on)
%!  r = rampwise_structure_response (b, p, dt, "input", input, "on", on);
%!  forces = on; base = 0;
%!  if (! strcmp (input, "force"))
%!    forces = -M * on; base = p * on.';
%!  endif
%!  [u, v] = exact (M, C, K, forces, p, dt);
%!  a = (p * forces.' - v * C.' - u * K.') / M;
%!  x = {"displacement", u; "velocity", v; "acceleration", a; "total_acceleration", a + base};
%!  for i = 1:4
%!    assert (r.(x{i,1}), x{i,2}, 1e-10 * max (abs (x{i,2}(:)))); # 200 steps of both roundings, 3e-13 or so
%!    assert (r.peaks.(x{i,1}).high >= max (x{i,2}) - 1e-10 * max (abs (x{i,2}(:))));
%!  endfor
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
%!test # rows, and peaks between the samples: those of samples 64 times as close
%! D = C; D(1,1) += 5; b = rampwise_structure (M, D, K); drift = [1, 0, 0; -1, 1, 0];
%! r = rampwise_structure_response (b, p, dt, "input", "base acceleration", "rows", drift);
%! u = exact (M, D, K, -M * ones (3, 1), interp1 ((0:200).', p, (0:200*64).' / 64), dt / 64) * drift.';
%! assert (r.displacement, u(1:64:end,:), 1e-10 * max (abs (u(:))));
%! assert (r.peaks.displacement.high, max (u), -2e-4); # (w dt / 64)^2 / 8 = 4e-5 for the fastest mode, w = 33
%! assert (all (r.peaks.displacement.high >= max (u) * (1 - 1e-10)));
%! assert (abs (r.peaks.displacement.largest), max (abs (u)), -2e-4);
%! q = rampwise_structure_response (b, p, dt, "input", "base acceleration", "rows", drift, "peaks", false);
%! assert (! isfield (q, "peaks"));
%! assert (q.velocity, r.velocity);
%!test # where a complex pair meets on the real axis there is one shape for two roots, and that is refused
%! D = C; [low, high] = deal (5, 500);
%! for i = 1:60
%!   D(1,1) = (low + high) / 2;
%!   b = rampwise_structure (M, D, K);
%!   if (any (imag (b.roots) == 0)) high = D(1,1); else low = D(1,1); endif
%! endfor
%! fail ('rampwise_structure_response (b, 1, 1, "input", "base acceleration")', "M, C, K: ");
%!test # one mass is an oscillator, bit for bit; held inputs too
%! for between = {"ramp", "hold"}
%!   s = rampwise_structure_response (rampwise_structure (1, 0.6, 9), p, dt, "input", "force", "on", 1, "between", between{1});
%!   r = rampwise_response (p, dt, "system", struct ("mass", 1, "damper", 0.6, "stiffness", 9), "input", "force", "between", between{1});
%!   assert (s.displacement, r.displacement);
%! endfor
%!shared b
%! b = rampwise_structure (eye (2), [], [2, -1; -1, 1], "damping", 0.05);
%!error <Invalid call> rampwise_structure_response (b, 1)
%!error <B must come from> rampwise_structure_response (1, 1, 1, "input", "force")
%!error <'on' must have 2 rows and a column for each of the 3> rampwise_structure_response (b, ones (2, 3), 1, "input", "force", "on", [1; 1])
%!error <'on' must have> rampwise_structure_response (b, 1, 1, "input", "force")
%!error <'rows' must have 2 columns> rampwise_structure_response (b, 1, 1, "input", "base acceleration", "rows", [1, 2, 3])
%!error <must be finite> rampwise_structure_response (b, 1, 1, "input", "base acceleration", "rows", [1, NaN])
%!error <P.3,2.> rampwise_structure_response (b, [1, 1; 2, 2; 3, NaN], 1, "input", "force", "on", eye (2))
%!error <P.1.> rampwise_structure_response (b, Inf, 1, "input", "base acceleration")
%!error id=rampwise:interval rampwise_structure_response (b, 1, 0, "input", "base acceleration")
%!error <must be force or base> rampwise_structure_response (b, 1, 1, "input", "base velocity")
%!error <P holds no samples> rampwise_structure_response (b, [], 1, "input", "base acceleration")
%!error <'peaks' must be true or false> rampwise_structure_response (b, 1, 1, "input", "base acceleration", "peaks", "no")
