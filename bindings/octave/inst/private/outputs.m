## outputs (CALLER, WORDS): the library's numbers for outputs of a stream, and the fields they go by.
function [quantities, fields] = outputs (caller, words)
  known = {"displacement", "velocity", "acceleration", "total acceleration", "spring force", "damper force", "load"};
  if (ischar (words))
    words = {words};
  endif
  if (! iscellstr (words) || isempty (words) || numel (words) > 8)
    error ("rampwise:option", "%s: outputs are one to eight of: %s", caller, strjoin (known, ", "));
  endif
  quantities = zeros (1, numel (words));
  fields = cell (1, numel (words));
  for i = 1:numel (words)
    fields{i} = strrep (known{choice(caller, "output", words{i}, known)}, " ", "_");
    quantities(i) = __rampwise__ ("constant", ["RAMPWISE_", upper(fields{i})]);
  endfor
  if (numel (unique (quantities)) != numel (quantities))
    error ("rampwise:option", "%s: an output is named twice", caller);
  endif
endfunction
