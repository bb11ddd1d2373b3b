## stream_object (CALLER, STREAM): the number by which the gateway knows STREAM.
function object = stream_object (caller, stream)
  if (! isstruct (stream) || ! isscalar (stream) || ! all (isfield (stream, {"object", "description", "outputs"})))
    error ("rampwise:argument", "%s: STREAM must come from rampwise_stream", caller);
  endif
  object = stream.object;
endfunction
