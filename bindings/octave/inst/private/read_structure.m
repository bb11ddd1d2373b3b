## read_structure (CALLER, S): what the structure S does at the present sample, as rows, and its peaks so far.
function now = read_structure (caller, s)
  [status, fault, made, u, v, six, of_displacement, of_total] = __rampwise__ ("structure_read", s.object);
  if (status == -18)
    error ("rampwise:not_made", "%s: no sample was pushed yet", caller);
  endif
  check (caller, status, fault);
  for i = 1:numel (s.outputs)
    j = (i - 1) * s.rows + (1:s.rows);
    now.(s.outputs{i}) = made(j).';
    if (s.peaks)
      now.peaks.(s.outputs{i}) = peak_rows (six(:,j));
    endif
  endfor
  if (s.pieces > 0)
    now.equipment = struct ("displacement", u.', "velocity", v.');
    if (s.peaks)
      now.equipment.peaks = struct ("displacement", peak_rows (of_displacement), "total_acceleration", peak_rows (of_total));
    endif
  endif
endfunction
