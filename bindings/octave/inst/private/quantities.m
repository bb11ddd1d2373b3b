## quantities (CALLER, WORDS): outputs of a stream as the gateway takes them, columns {the library's number; four zeros},
## and the fields they go by.
function [columns, fields] = quantities (caller, words)
  known = {"displacement", "velocity", "acceleration", "total acceleration", "spring force", "damper force", "load"};
  [~, fields] = outputs (caller, words, known);
  columns = [cellfun(@constant, upper (fields)); zeros(4, numel (fields))];
endfunction
