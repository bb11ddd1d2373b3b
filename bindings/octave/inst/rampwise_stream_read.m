## -*- texinfo -*-
## @deftypefn {} {@var{now} =} rampwise_stream_read (@var{stream})
## How @var{stream} stands.
##
## @var{now} is a struct: @code{number} and @code{state}, the number of the sample reached, from 0, and
## @code{[u; v; p; p_before]} there, empty before the first; @code{next}, the number of the sample that is expected;
## counts of samples and what became of them, @code{good}, @code{missing}, @code{clipped}, @code{bridges},
## @code{starts}, @code{longest} (run of missing ones), @code{last_missing} and @code{last_clipped} (numbers of samples,
## NaN for none); and @code{watches}, a struct array, an element each watch:
##
## @table @asis
## @item @code{since_start}, @code{since_reset}, @code{window}
## structs of @code{high}, @code{high_time}, @code{low} and @code{low_time}, with instants in the unit of dt from sample
## 0 on; NaN where nothing was seen, or no window was asked for;
## @item @code{levels}
## a struct of rows, an element each level: @code{beyond}, @code{tripped}, and @code{passed} and @code{cycles}, how
## often it went beyond and came back as well;
## @item @code{lost}, @code{resets}
## events lost, and steps too long to be looked into.
## @end table
## @seealso{rampwise_stream, rampwise_stream_watch}
## @end deftypefn

function now = rampwise_stream_read (stream)
  if (nargin != 1)
    print_usage ();
  endif
  [object, ending] = stream_object ("rampwise_stream_read", stream);
  [counts, state, number, watches] = __rampwise__ (["stream_read" ending], object);
  now = struct ("number", number, "state", state);
  names = {"next", "good", "missing", "clipped", "bridges", "starts", "longest", "last_missing", "last_clipped"};
  for i = 1:numel (names)
    now.(names{i}) = counts(i);
  endfor
  now.watches = struct ("since_start", {}, "since_reset", {}, "window", {}, "levels", {}, "lost", {}, "resets", {});
  for w = 1:watches
    [peaks, levels, lost, resets] = __rampwise__ (["watch_read" ending], object, w);
    now.watches(w) = struct ("since_start", span (peaks(:,1:2), stream.dt), "since_reset", span (peaks(:,3:4), stream.dt),
                             "window", span (peaks(:,5:6), stream.dt), "levels", reports (levels), "lost", lost,
                             "resets", resets);
  endfor
endfunction

## Columns {value; sample; fraction}, of high and low.
function s = span (peaks, dt)
  time = (peaks(2,:) + peaks(3,:)) * dt;
  s = struct ("high", peaks(1,1), "high_time", time(1), "low", peaks(1,2), "low_time", time(2));
endfunction

function s = reports (levels)
  s = struct ("beyond", logical (levels(1,:)), "tripped", logical (levels(2,:)), "passed", levels(3,:), "cycles",
              levels(4,:));
endfunction

%!test # counts
%! s = rampwise_stream (0.1, "omega", 3, "damping", 0.05, "input", "force", "rails", [-9, 9]);
%! now = rampwise_stream_read (s);
%! assert (isempty (now.state) && isempty (now.number));
%! assert (now.last_missing, NaN);
%! rampwise_stream_push (s, [1, NaN, 9, 2, 3]);
%! now = rampwise_stream_read (s);
%! assert ([now.number, now.next, now.good, now.missing, now.clipped, now.bridges, now.starts, now.longest, now.last_missing], ...
%!         [4, 5, 4, 1, 1, 1, 1, 1, 1]);
%! assert (now.state(3:4), [3; 2]);
%! assert (size (now.watches), [0, 0]);
%!test # greatest and least values are those of the spectrum, and those of the window the last ones
%! p = sin ((1:80).' .^ 1.2);
%! s = rampwise_stream (0.1, "omega", 3, "damping", 0.05, "input", "base acceleration");
%! rampwise_stream_watch (s, "displacement", "window", 10);
%! rampwise_stream_watch (s, "total acceleration");
%! rampwise_stream_push (s, p(1:33)); rampwise_stream_push (s, p(34:80));
%! now = rampwise_stream_read (s);
%! q = rampwise_spectrum (p, 0.1, "omega", 3, "damping", 0.05);
%! assert (now.watches(1).since_start.high, q.displacement.high, 1e-13);
%! assert (now.watches(1).since_start.low_time, q.displacement.low_time, 1e-7); # flat there: half the digits
%! assert (now.watches(2).since_start.low, q.total_acceleration.low, 1e-13);
%! r = rampwise_response (p, 0.1, "omega", 3, "damping", 0.05, "input", "base acceleration");
%! assert (now.watches(1).window.high >= max (r.displacement(70:80)));
%! assert (now.watches(1).window.high_time >= 7 - 1e-12);
%! assert (now.watches(2).window.high, NaN);
%!error <Invalid call> rampwise_stream_read ()
%!error <must come from> rampwise_stream_read (1)
