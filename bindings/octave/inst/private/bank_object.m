## bank_object (CALLER, BANK): the number by which the gateway knows BANK.
function object = bank_object (caller, bank)
  if (! isstruct (bank) || ! isscalar (bank) || ! isfield (bank, "object"))
    error ("rampwise:argument", "%s: BANK must come from rampwise_bank", caller);
  endif
  object = bank.object;
endfunction
