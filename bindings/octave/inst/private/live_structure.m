## live_structure (CALLER, S): S, refused where it is no live structure.
function s = live_structure (caller, s)
  if (! isstruct (s) || ! isscalar (s) || ! all (isfield (s, {"object", "inputs", "rows", "pieces", "outputs"})))
    error ("rampwise:argument", "%s: S must come from rampwise_live_structure", caller);
  endif
endfunction
