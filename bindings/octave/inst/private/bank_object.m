## bank_object (CALLER, BANK): the number by which the gateway knows BANK.
function object = bank_object (caller, bank)
  if (! isstruct (bank) || ! isscalar (bank) || ! all (isfield (bank, {"object", "dt", "kinds", "count"})))
    error ("rampwise:argument", "%s: BANK must come from rampwise_bank", caller);
  endif
  object = bank.object;
endfunction
