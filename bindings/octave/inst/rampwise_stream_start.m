## -*- texinfo -*-
## @deftypefn  {} {} rampwise_stream_start (@var{stream}, @var{number})
## @deftypefnx {} {} rampwise_stream_start (@var{stream}, @var{number}, @var{state})
## Begins @var{stream} anew. The next sample pushed has the number @var{number} and starts it; or the state is
## @var{state}, @code{[u; v; p; p_before]}, at the sample @var{number}, and the next sample comes one dt later. Samples
## are numbered from 0. In single precision the low parts of u and v follow in the state.
## @seealso{rampwise_stream, rampwise_stream_skip}
## @end deftypefn

function rampwise_stream_start (stream, number, state = [])
  if (nargin < 2)
    print_usage ();
  endif
  caller = "rampwise_stream_start";
  [object, ending, as_class] = stream_object (caller, stream);
  state = as_class (numbers (caller, "STATE", state));
  if (nargin == 3 && numel (state) != 4 + 2 * ! isempty (ending))
    error ("rampwise:argument", "%s: STATE must have %s elements", caller, {"four", "six"}{1 + ! isempty(ending)});
  endif
  [status, fault] = __rampwise__ (["stream_start" ending], object, state, count_of (caller, "NUMBER", number));
  check (caller, status, fault);
endfunction

%!shared s, o
%! o = {"omega", 3, "damping", 0.05, "input", "force"}; s = rampwise_stream (0.1, o{:});
%!test
%! rampwise_stream_push (s, [1, 4, 2]);
%! rampwise_stream_start (s, 100);
%! h = rampwise_stream_push (s, [5, 6]);
%! assert (h.velocity, rampwise_response ([5, 6], 0.1, o{:}).velocity);
%! assert (rampwise_stream_read (s).number, 101);
%!test
%! rampwise_stream_start (s, 7, [0.5, -1, 5, 5]);
%! h = rampwise_stream_push (s, 6);
%! assert (h.velocity, rampwise_response ([5, 6], 0.1, o{:}, "displacement", 0.5, "velocity", -1).velocity(2));
%! assert (rampwise_stream_read (s).number, 8);
%!error <Invalid call> rampwise_stream_start (s)
%!error <four elements> rampwise_stream_start (s, 0, 1)
%!error <NUMBER must be a whole> rampwise_stream_start (s, -1)
%!error id=rampwise:state rampwise_stream_start (s, 0, [NaN, 0, 0, 0])
