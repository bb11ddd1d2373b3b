## -*- texinfo -*-
## @deftypefn {} {@var{events} =} rampwise_stream_events (@var{stream}, @var{w})
## Takes the events that wait out of watch @var{w} of @var{stream}: a column of structs, the oldest first.
##
## Fields: @code{time}, in the unit of dt from sample 0 on; @code{value} of the output then; @code{level}, which of the
## watch's levels was passed, from 1, or 0 where a step too long to be looked into has reset the watch;
## @code{direction}, 1 rising or -1 falling; and @code{clipped} and @code{bridged} of the step, as in
## @code{rampwise_stream_push}.
## @seealso{rampwise_stream_watch}
## @end deftypefn

function events = rampwise_stream_events (stream, w)
  if (nargin != 2)
    print_usage ();
  endif
  [object, w, ending] = stream_watched ("rampwise_stream_events", stream, w);
  x = __rampwise__ (["watch_events" ending], object, w);
  time = (x(1,:) + x(2,:)) * stream.dt;
  events = struct ("time", num2cell (time), "value", num2cell (x(3,:)), "level", num2cell (x(6,:)), "direction",
                   num2cell (x(5,:)), "clipped", num2cell (bitand (x(7,:), 2) > 0), "bridged",
                   num2cell (bitand (x(7,:), 4) > 0))(:);
endfunction

%!test # free vibration cos t: crosses 0.5 downwards at pi/3, upwards at 5 pi/3
%! s = rampwise_stream (0.25, "omega", 1, "damping", 0, "input", "force");
%! w = rampwise_stream_watch (s, "displacement", "level", [0.5, -0.5], "direction", [1, -1]);
%! rampwise_stream_start (s, 0, [1; 0; 0; 0]);
%! rampwise_stream_push (s, zeros (1, 26));
%! e = rampwise_stream_events (s, w);
%! assert ([e.level], [1, 1, 2, 2, 1]);
%! assert ([e.direction], [1, -1, -1, 1, 1]);
%! assert ([e(2:5).time], pi * [1, 2, 4, 5] / 3, 1e-9);
%! assert (abs ([e(2:5).value]), 0.5 * ones (1, 4), 1e-12);
%! assert (size (rampwise_stream_events (s, w)), [0, 1]);
%!shared s
%! s = rampwise_stream (0.1, "omega", 1, "damping", 0, "input", "force");
%!error <Invalid call> rampwise_stream_events (s)
%!error <from 1 to 0> rampwise_stream_events (s, 1)
