## push_structure (CALLER, S, P, WITH_EQUIPMENT): takes the structure S over the samples P, a row each and a column each
## input. A status that is not 0 is an overflow, at row FAULT, from which on values are NaN.
function [h, status, fault] = push_structure (caller, s, p, with_equipment)
  p = frames (caller, p, s.inputs);
  of_equipment = cell (1, 4);
  [status, fault, made, of_equipment{:}] = __rampwise__ ("structure_run", s.object, p.', with_equipment + 0);
  if (status == -60)
    fault = sub2ind (size (p), fault, find (! isfinite (p(fault,:)), 1));
  endif
  if (status != -80)
    check (caller, status, fault, size (p));
  endif
  for i = 1:numel (s.outputs)
    h.(s.outputs{i}) = made((i - 1) * s.rows + (1:s.rows),:).';
  endfor
  if (with_equipment && s.pieces > 0)
    h.equipment = cell2struct (cellfun (@transpose, of_equipment, "UniformOutput", false), ...
                               strrep (motions ()(1:4), " ", "_"), 2);
  endif
endfunction

## A vector is samples of one input.
function p = frames (caller, p, inputs)
  p = numbers (caller, "P", p);
  if (isempty (p))
    p = zeros (0, inputs);
  elseif (inputs == 1 && isrow (p))
    p = p(:);
  endif
  if (columns (p) != inputs)
    error ("rampwise:argument", "%s: P must have a column for each of the %d of option 'on'", caller, inputs);
  endif
endfunction
