## quantities (CALLER, WORDS): the library's numbers for outputs of a stream, and the fields they go by.
function [numbers, fields] = quantities (caller, words)
  known = {"displacement", "velocity", "acceleration", "total acceleration", "spring force", "damper force", "load"};
  [~, fields] = outputs (caller, words, known);
  numbers = cellfun (@(f) __rampwise__ ("constant", ["RAMPWISE_", upper(f)]), fields);
endfunction
