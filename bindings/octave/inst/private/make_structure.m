## make_structure (CALLER, B, DT, OPTIONS, QUANTITIES): the structure B as an object, which is freed with the last copy of
## the struct. QUANTITIES are the numbers of those of the first four motions () that are outputs.
function s = make_structure (caller, b, dt, options, quantities)
  dt = scalar (caller, "DT", dt);
  plan = structure_plan (caller, b, dt, options, quantities);
  [pieces, point] = equipment (caller, options, dt, plan);
  peaks = truth (caller, "peaks", options.peaks);
  [status, fault, object] = __rampwise__ ("structure_make", plan.systems, dt, constant ("FORCE"), plan.between, plan.load, ...
    plan.on_displacement, plan.on_velocity, plan.on_acceleration, plan.on_input, peaks + 0, pieces, ...
    (find (quantities == 4) - 1) * plan.rows + point, plan.u, plan.v);
  if (status == -40 && fault == 0)
    error ("rampwise:step_length", "%s: DT: a mode or piece of equipment has omega dt or c dt/m above 1024, too fast for peaks",
           caller);
  endif
  check (caller, status, fault);
  s = struct ("dt", dt, "inputs", plan.inputs, "rows", plan.rows, "pieces", columns (pieces), "peaks", peaks, "provenance",
              provenance (), "outputs", {strrep(motions ()(quantities), " ", "_")}, "object", object, "guard",
              onCleanup (@() __rampwise__ ("object_free", object)));
endfunction

## Columns {mass; damper; stiffness}, and the number of the row that each stands on.
function [pieces, point] = equipment (caller, options, dt, plan)
  pieces = zeros (3, 0);
  if (! isempty (options.equipment))
    pieces = columns_of (caller, "option 'equipment'", options.equipment);
  endif
  point = numbers (caller, "option 'point'", options.point)(:).';
  given = [columns(pieces), numel(point)];
  n = max (given);
  if (any (given != n & given != 1) || any (given == 0) && n > 0)
    error ("rampwise:argument", "%s: option 'point' must have one element, or one for each piece of equipment", caller);
  endif
  if (any (! ismember (point, 1:plan.rows)))
    error ("rampwise:argument", "%s: option 'point' must be numbers of rows, from 1 to %d", caller, plan.rows);
  endif
  pieces = pieces .* ones (1, n);
  point = point .* ones (1, n);
  [status, fault] = __rampwise__ ("coefficients", pieces, dt, constant ("BASE_ACCELERATION"), plan.between);
  check ([caller ": option 'equipment'"], status, fault);
endfunction
