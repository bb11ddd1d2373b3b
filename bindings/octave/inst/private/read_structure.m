## read_structure (CALLER, S, PART, STEPS): what the structure S does at the present sample, as rows, and its peaks in the
## part of the time that has the library's number PART, with so many steps of the free motion at most.
function now = read_structure (caller, s, part, steps)
  [status, fault, made, u, v, peaks, of_displacement, of_total] = __rampwise__ ("structure_read", s.object, part, steps);
  if (status == -18)
    error ("rampwise:not_made", "%s: no sample was pushed yet", caller);
  endif
  check (caller, status, fault);
  for i = 1:numel (s.outputs)
    j = (i - 1) * s.rows + (1:s.rows);
    now.(s.outputs{i}) = made(j).';
    if (s.peaks)
      now.peaks.(s.outputs{i}) = peak_rows (peaks(:,j));
    endif
  endfor
  if (s.pieces > 0)
    now.equipment = struct ("displacement", u.', "velocity", v.');
    if (s.peaks)
      now.equipment.peaks = struct ("displacement", peak_rows (of_displacement), "total_acceleration", peak_rows (of_total));
    endif
  endif
endfunction
