## bank_object (CALLER, BANK): the number by which the gateway knows BANK, what its commands end in, and the function
## that makes numbers of its class.
function [object, ending, as_class] = bank_object (caller, bank)
  if (! isstruct (bank) || ! isscalar (bank) || ! all (isfield (bank, {"object", "dt", "kinds", "count", "ending"})))
    error ("rampwise:argument", "%s: BANK must come from rampwise_bank", caller);
  endif
  object = bank.object;
  ending = bank.ending;
  as_class = {@double, @single}{1 + ! isempty(ending)};
endfunction
