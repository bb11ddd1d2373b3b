## stream_watched (CALLER, STREAM, W): the numbers by which the gateway knows STREAM and its watch W, and what its
## commands end in.
function [object, w, ending] = stream_watched (caller, stream, w)
  [object, ending] = stream_object (caller, stream);
  w = count_of (caller, "W", w);
  [~, ~, ~, watches] = __rampwise__ (["stream_read" ending], object);
  if (w < 1 || w > watches)
    error ("rampwise:argument", "%s: W must be the number of a watch, from 1 to %d", caller, watches);
  endif
endfunction
