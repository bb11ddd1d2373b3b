## modes_of (CALLER, B): B, refused where it does not come from rampwise_structure.
function b = modes_of (caller, b)
  if (! isstruct (b) || ! isscalar (b) || ! all (isfield (b, {"shapes", "modal_damper", "coupled_shapes"})))
    error ("rampwise:argument", "%s: B must come from rampwise_structure", caller);
  endif
endfunction
