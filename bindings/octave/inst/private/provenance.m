## provenance (): what belongs beside stored results: which library, which bits.
function p = provenance ()
  persistent kept = [];
  if (isempty (kept))
    v = rampwise_version ();
    kept = struct ("library", ["rampwise " v.version], "arithmetic_edition", v.arithmetic_edition);
  endif
  p = kept;
endfunction
