## stream_object (CALLER, STREAM): the number by which the gateway knows STREAM, what its commands end in, and the function
## that makes numbers of its class.
function [object, ending, as_class] = stream_object (caller, stream)
  if (! isstruct (stream) || ! isscalar (stream) || ! all (isfield (stream, {"object", "kinds", "outputs", "ending"})))
    error ("rampwise:argument", "%s: STREAM must come from rampwise_stream", caller);
  endif
  object = stream.object;
  ending = stream.ending;
  as_class = {@double, @single}{1 + ! isempty(ending)};
endfunction
