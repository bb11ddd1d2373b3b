## -*- texinfo -*-
## @deftypefn {} {@var{w} =} rampwise_stream_watch (@var{stream}, @var{output}, @dots{})
## Watches an output of @var{stream} from here on, between the samples too: its greatest and least values, and up to
## four levels. @var{w} is the number of the watch, from 1, for @code{rampwise_stream_read} and others.
##
## @var{output} is one of the outputs of @code{rampwise_stream}, or four weights as in its option "weighted". Options:
##
## @table @asis
## @item "level"
## Up to four values; the response is beyond a level from the instant that it comes to it.
## @item "direction"
## 1 (default): beyond is above. -1: beyond is below.
## @item "hysteresis"
## So far must it come back to be beyond no more: 0 unless given.
## @item "latch"
## true: once beyond, the level stays tripped until @code{rampwise_stream_release}. false (default): it is tripped while
## beyond.
## @item "window"
## How many of the last steps have a greatest and least value of their own: 0, none, unless given.
## @item "events"
## How many events wait for @code{rampwise_stream_events}; those that find no room are lost, and counted. 100 unless
## given.
## @end table
##
## "direction", "hysteresis" and "latch" have one element, or one for each level.
## @seealso{rampwise_stream, rampwise_stream_read, rampwise_stream_events, rampwise_stream_release}
## @end deftypefn

function w = rampwise_stream_watch (stream, output, varargin)
  if (nargin < 2)
    print_usage ();
  endif
  caller = "rampwise_stream_watch";
  [object, ending] = stream_object (caller, stream);
  if (isnumeric (output))
    made = weights (caller, "OUTPUT", output);
  else
    made = quantities (caller, output);
  endif
  if (columns (made) != 1)
    error ("rampwise:argument", "%s: a watch looks at one output", caller);
  endif
  options = parse (caller, struct ("level", [], "direction", 1, "hysteresis", 0, "latch", false, "window", 0, "events",
                                   100), varargin);
  [status, fault, w] = __rampwise__ (["stream_watch" ending], object, made, levels (caller, options), ...
    count_of (caller, "option 'window'", options.window), count_of (caller, "option 'events'", options.events));
  if (status == -62)
    error ("rampwise:level", "%s: levels must be finite, and hysteresis 0 or more", caller);
  endif
  if (status == -18)
    error ("rampwise:not_made", "%s: after rampwise_stream_resume, rampwise_stream_retune comes first", caller);
  endif
  check (caller, status, fault);
endfunction

## Columns {value; hysteresis; direction; latch}.
function made = levels (caller, options)
  n = numel (options.level);
  if (n > 4)
    error ("rampwise:argument", "%s: a watch has up to four levels", caller);
  endif
  made = zeros (4, n);
  names = {"level", "hysteresis", "direction", "latch"};
  for i = 1:4
    x = options.(names{i});
    if (islogical (x))
      x = double (x);
    endif
    x = numbers (caller, ["option '" names{i} "'"], x)(:).';
    if (numel (x) != n && numel (x) != 1)
      error ("rampwise:argument", "%s: option '%s' must have one element, or one for each level", caller, names{i});
    endif
    made(i,:) = x .* ones (1, n);
  endfor
  if (! all (ismember (made(3,:), [-1, 1])) || ! all (ismember (made(4,:), [0, 1])))
    error ("rampwise:option", "%s: option 'direction' must be 1 or -1, 'latch' true or false", caller);
  endif
endfunction

%!demo
%! ## A trip for a pump skid: the spring's displacement must not pass 8 mm
%! stream = rampwise_stream (0.005, "frequency", 2.4, "damping", 0.05, "input", "base acceleration");
%! trip = rampwise_stream_watch (stream, "displacement", "level", [0.008, -0.008], "direction", [1, -1], "latch", true);
%! t = (0:0.005:2).';
%! rampwise_stream_push (stream, 1.5 * t .* sin (2 * pi * 2.2 * t));
%! event = rampwise_stream_events (stream, trip)(1);
%! printf ("tripped at %.4f s by %.4f m\n", event.time, event.value);

%!shared s
%! s = rampwise_stream (0.1, "omega", 1, "damping", 0, "input", "force");
%!test # weights: twice the displacement
%! a = rampwise_stream (0.1, "omega", 1, "damping", 0, "input", "force");
%! rampwise_stream_watch (a, "displacement"); rampwise_stream_watch (a, [2, 0, 0, 0]);
%! rampwise_stream_push (a, [1, 3, -2, 5]);
%! watches = rampwise_stream_read (a).watches;
%! assert (watches(2).since_start.high, 2 * watches(1).since_start.high);
%!error <four finite weights> rampwise_stream_watch (s, [1, 2])
%!error <Invalid call> rampwise_stream_watch (s)
%!error <'output' must be one of> rampwise_stream_watch (s, "height")
%!error <looks at one output> rampwise_stream_watch (s, {"load", "velocity"})
%!error <up to four levels> rampwise_stream_watch (s, "load", "level", 1:5)
%!error <'direction' must be 1 or -1> rampwise_stream_watch (s, "load", "level", 1, "direction", 0)
%!error <'latch' must have one element> rampwise_stream_watch (s, "load", "level", 1, "latch", [true, false])
%!error id=rampwise:level rampwise_stream_watch (s, "load", "level", NaN)
%!error id=rampwise:level rampwise_stream_watch (s, "load", "level", 1, "hysteresis", -1)
%!error <'window' must be a whole> rampwise_stream_watch (s, "load", "window", -1)
%!error id=rampwise:step_length rampwise_stream_watch (rampwise_stream (1, "omega", 100, "damping", 0, "input", "force"), "load")
