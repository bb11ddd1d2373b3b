## -*- texinfo -*-
## @deftypefn {} {} rampwise_stream_skip (@var{stream}, @var{number})
## Tells @var{stream} that the samples before @var{number} are missing: a gap in the sender's numbers. Samples are
## numbered from 0; @code{rampwise_stream_read} knows the one that is expected next.
## @seealso{rampwise_stream, rampwise_stream_start}
## @end deftypefn

function rampwise_stream_skip (stream, number)
  if (nargin != 2)
    print_usage ();
  endif
  caller = "rampwise_stream_skip";
  [object, ending] = stream_object (caller, stream);
  [status, fault] = __rampwise__ (["stream_skip" ending], object, count_of (caller, "NUMBER", number));
  if (status == -64)
    error ("rampwise:time", "%s: NUMBER is already past", caller);
  endif
  check (caller, status, fault);
endfunction

%!test # as if they had been pushed as NaN
%! o = {"omega", 3, "damping", 0.05, "input", "force"};
%! a = rampwise_stream (0.1, o{:}); b = rampwise_stream (0.1, o{:});
%! rampwise_stream_push (a, [1, 4]);
%! rampwise_stream_skip (a, 4);
%! rampwise_stream_push (b, [1, 4, NaN, NaN]);
%! assert (rampwise_stream_push (a, [3, 5]), rampwise_stream_push (b, [3, 5]));
%! assert (rampwise_stream_read (a).missing, 2);
%!shared s
%! s = rampwise_stream (0.1, "omega", 1, "damping", 0, "input", "force"); rampwise_stream_push (s, [1, 2, 3]);
%!error <Invalid call> rampwise_stream_skip (s)
%!error id=rampwise:time rampwise_stream_skip (s, 1)
%!error id=rampwise:argument rampwise_stream_skip (s, NaN)
