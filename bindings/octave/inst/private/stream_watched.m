## stream_watched (CALLER, STREAM, W): the numbers by which the gateway knows STREAM and its watch W.
function [object, w] = stream_watched (caller, stream, w)
  object = stream_object (caller, stream);
  w = count_of (caller, "W", w);
  [~, ~, ~, watches] = __rampwise__ ("stream_read", object);
  if (w < 1 || w > watches)
    error ("rampwise:argument", "%s: W must be the number of a watch, from 1 to %d", caller, watches);
  endif
endfunction
