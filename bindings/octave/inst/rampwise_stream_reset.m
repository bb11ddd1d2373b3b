## -*- texinfo -*-
## @deftypefn {} {} rampwise_stream_reset (@var{stream}, @var{w})
## Begins the greatest and least values "since the reset" of watch @var{w} of @var{stream} anew, with the present value.
## @seealso{rampwise_stream_watch, rampwise_stream_read}
## @end deftypefn

function rampwise_stream_reset (stream, w)
  if (nargin != 2)
    print_usage ();
  endif
  caller = "rampwise_stream_reset";
  [object, w, ending] = stream_watched (caller, stream, w);
  [status, fault] = __rampwise__ (["watch_reset" ending], object, w);
  check (caller, status, fault);
endfunction

%!test
%! s = rampwise_stream (0.25, "omega", 1, "damping", 0, "input", "force");
%! w = rampwise_stream_watch (s, "displacement");
%! rampwise_stream_start (s, 0, [1; 0; 0; 0]);
%! h = rampwise_stream_push (s, zeros (1, 8));
%! rampwise_stream_reset (s, w);
%! now = rampwise_stream_read (s).watches;
%! assert ([now.since_reset.high, now.since_reset.low], h.displacement(end) * [1, 1]);
%! assert (now.since_start.high, 1);
%!error <Invalid call> rampwise_stream_reset (1)
%!error <must come from> rampwise_stream_reset (1, 1)
