## natural (CALLER, OPTIONS): which of "period", "frequency" and "omega" is given, and its values.
function [way, value] = natural (caller, options)
  ways = {"period", "frequency", "omega"};
  given = ! cellfun (@(w) isempty (options.(w)), ways);
  if (sum (given) != 1)
    error ("rampwise:option", "%s: give exactly one of 'period', 'frequency' (cycles) and 'omega' (radians)", caller);
  endif
  way = ways{given};
  value = numbers (caller, ["option '" way "'"], options.(way));
endfunction
