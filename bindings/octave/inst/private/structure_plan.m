## structure_plan (CALLER, B, DT, OPTIONS, QUANTITIES): the structure B as oscillators under forces, as the gateway takes
## them: columns {mass; damper; stiffness}, and matrices whose columns are they. Outputs are OPTIONS.rows times
## displacements, then velocities, accelerations and total accelerations, as far as QUANTITIES has their numbers 1 to 4.
## The vectors u and v are their state at sample 0.
function plan = structure_plan (caller, b, dt, options, quantities)
  b = modes_of (caller, b);
  [input, between] = kinds (caller, options, {"force", "base acceleration"});
  of_base = input == constant ("BASE_ACCELERATION");
  [on, at] = sizes (caller, options, rows (b.mass), of_base);
  forces = on;
  base = zeros (rows (at), columns (on));
  if (of_base)
    forces = -b.mass * on;
    base = at * on;
  endif
  kept = kept_modes (caller, b, options);
  w = weights_of (b, at, base, quantities);
  state = b.shapes.' * b.mass * [masses(caller, "displacement", options, b), masses(caller, "velocity", options, b)];
  parts = {alone(b, kept, w, forces, state), together(caller, b, w, forces, state)};
  plan = struct ("between", between, "inputs", columns (on), "rows", rows (at));
  for name = {"systems", "load", "on_displacement", "on_velocity", "on_acceleration", "u", "v"}
    plan.(name{1}) = [parts{1}.(name{1}), parts{2}.(name{1})];
  endfor
  plan.on_input = parts{2}.on_input + w.input;
  if (truth (caller, "static_correction", options.static_correction))
    settled = w.displacement(:,b.omega > 0) * (b.shapes(:,b.omega > 0).' * forces ./ b.modal_stiffness(b.omega > 0));
    [status, fault, plan.on_input] = __rampwise__ ("static_correction", plan.systems, dt, constant ("FORCE"), between, ...
                                                   plan.load, plan.on_displacement, settled + w.input);
    check (caller, status, fault);
  endif
endfunction

function [on, at] = sizes (caller, options, n, of_base)
  on = numbers (caller, "option 'on'", options.on);
  at = numbers (caller, "option 'rows'", options.rows);
  if (isempty (on) && of_base)
    on = ones (n, 1);
  endif
  if (isempty (at))
    at = eye (n);
  endif
  if (rows (on) != n || isempty (on))
    error ("rampwise:argument", "%s: option 'on' must have %d rows, and a column for each input", caller, n);
  endif
  if (columns (at) != n)
    error ("rampwise:argument", "%s: option 'rows' must have %d columns", caller, n);
  endif
  if (! all (isfinite ([on(:); at(:)])))
    error ("rampwise:weight", "%s: options 'on' and 'rows' must be finite", caller);
  endif
endfunction

## A number for each mass, zeros unless given.
function x = masses (caller, name, options, b)
  n = rows (b.mass);
  x = numbers (caller, ["option '" name "'"], options.(name))(:);
  if (isempty (x))
    x = zeros (n, 1);
  endif
  if (numel (x) != n || ! all (isfinite (x)))
    error ("rampwise:argument", "%s: option '%s' must have %d finite elements, one for each mass", caller, name, n);
  endif
endfunction

## Which modes stay, a logical column.
function kept = kept_modes (caller, b, options)
  n = rows (b.mass);
  count = n;
  if (! isempty (options.modes))
    count = count_of (caller, "option 'modes'", options.modes);
  endif
  if (count < 1 || count > n)
    error ("rampwise:option", "%s: option 'modes' must be from 1 to %d", caller, n);
  endif
  if (any (b.coupled) && (count < n || truth (caller, "static_correction", options.static_correction)))
    error ("rampwise:option", "%s: options 'modes' and 'static_correction' are for classical damping", caller);
  endif
  kept = (1:n).' <= count;
endfunction

## Of the outputs, on the modes' own motions (outputs x modes) and on the inputs (outputs x inputs).
function w = weights_of (b, at, base, quantities)
  on_modes = at * b.shapes;
  among = @(which) any (quantities(:) == which, 2);
  w.displacement = kron (among (1), on_modes);
  w.velocity = kron (among (2), on_modes);
  w.acceleration = kron (among ([3, 4]), on_modes);
  w.input = kron (among (4), base);
endfunction

## The modes that damping ties to no other. STATE is a column of displacements and one of velocities, of all modes.
function part = alone (b, kept, w, forces, state)
  j = kept & ! b.coupled;
  part.systems = [ones(1, sum (j)); diag(b.modal_damper)(j).'; b.modal_stiffness(j).'];
  part.load = forces.' * b.shapes(:,j);
  part.on_displacement = w.displacement(:,j);
  part.on_velocity = w.velocity(:,j);
  part.on_acceleration = w.acceleration(:,j);
  part.u = state(j,1).';
  part.v = state(j,2).';
endfunction

## The others, by their roots. q'' = load - D q' - k q.
function part = together (caller, b, w, forces, state)
  j = b.coupled;
  [D, k] = deal (b.modal_damper(j,j), b.modal_stiffness(j));
  loads = b.shapes(:,j).' * forces;
  part = struct ("systems", zeros (3, 0), "load", zeros (columns (forces), 0), "on_displacement", zeros (rows (w.velocity), 0),
                 "u", zeros (1, 0), "v", zeros (1, 0));
  part.on_velocity = part.on_acceleration = part.on_displacement;
  part.on_input = w.acceleration(:,j) * loads;
  if (! any (j))
    return;
  endif
  ## What begins with q and q' goes on as after an impulse D q + q' and the derivative of an impulse q: two inputs more.
  if (any (state(j,:)(:)))
    loads = [loads, state(j,1), D * state(j,1) + state(j,2)];
  endif
  two = @(x) reshape ([real(x(:)), imag(x(:))].', 2 * rows (x), []);
  on_displacement = w.displacement(:,j) - w.acceleration(:,j) .* k.';
  on_velocity = w.velocity(:,j) - w.acceleration(:,j) * D;
  [status, fault, part.systems, load, part.on_displacement, part.on_velocity] = ...
    __rampwise__ ("roots_to_modes", eye (sum (j)), D, two (b.coupled_roots.'), two (b.coupled_shapes), loads, ...
                  on_displacement.', on_velocity.');
  check (caller, status, fault);
  part.load = load(1:columns (forces),:);
  part.on_acceleration = zeros (size (part.on_velocity));
  part.u = part.v = zeros (1, columns (load));
  if (rows (load) > columns (forces))
    part.u = load(end - 1,:);
    part.v = load(end,:) - part.systems(2,:) .* part.u;
  endif
endfunction
