## -*- texinfo -*-
## @deftypefn {} {} rampwise_stream_release (@var{stream}, @var{w}, @var{level})
## Lets go of the latch of a level, from 1, of watch @var{w} of @var{stream}. While the response is beyond the level it
## stays tripped.
## @seealso{rampwise_stream_watch, rampwise_stream_reset}
## @end deftypefn

function rampwise_stream_release (stream, w, level)
  if (nargin != 3)
    print_usage ();
  endif
  caller = "rampwise_stream_release";
  [object, w, ending] = stream_watched (caller, stream, w);
  level = count_of (caller, "LEVEL", level);
  [status, fault] = __rampwise__ (["watch_release" ending], object, w, min (level, 5));
  if (status == -26)
    error ("rampwise:count", "%s: the watch has no level %d", caller, level);
  endif
  check (caller, status, fault);
endfunction

%!test # latched, beyond or not, until it is let go of
%! s = rampwise_stream (0.25, "omega", 1, "damping", 0, "input", "force");
%! w = rampwise_stream_watch (s, "displacement", "level", 0.5, "latch", true);
%! rampwise_stream_start (s, 0, [1; 0; 0; 0]);
%! rampwise_stream_push (s, 0);
%! rampwise_stream_release (s, w, 1);
%! assert (rampwise_stream_read (s).watches.levels.tripped);
%! rampwise_stream_push (s, zeros (1, 8)); # to t = 2.25, cos t < 0.5
%! levels = rampwise_stream_read (s).watches.levels;
%! assert ([levels.beyond, levels.tripped], [false, true]);
%! assert ([levels.passed, levels.cycles], [1, 1]);
%! rampwise_stream_release (s, w, 1);
%! assert (! rampwise_stream_read (s).watches.levels.tripped);
%!shared s
%! s = rampwise_stream (0.1, "omega", 1, "damping", 0, "input", "force"); rampwise_stream_watch (s, "load", "level", 1);
%!error <Invalid call> rampwise_stream_release (s, 1)
%!error <no level 2> rampwise_stream_release (s, 1, 2)
%!error <no level 0> rampwise_stream_release (s, 1, 0)
%!error <from 1 to 1> rampwise_stream_release (s, 2, 1)
