## -*- texinfo -*-
## @deftypefn  {} {@var{h} =} rampwise_stream_push (@var{stream}, @var{p})
## @deftypefnx {} {@var{h} =} rampwise_stream_push (@var{stream}, @var{p}, @var{t})
## Takes @var{stream} over the next samples, the vector @var{p}; with the stamps @var{t}, whole numbers of ticks, each
## later than the one before, best of class int64. Samples of an integer class are raw (@code{rampwise_stream}).
##
## @var{h} is a struct of a column for each of the stream's outputs, named like them with an underscore for a space, and
## logical columns: @code{started}, the stream starts with this sample; @code{clipped}, an end of the step's line was
## clipped; @code{bridged}, the line was drawn over missing samples or the load held for them; @code{waiting}, the sample
## is missing, and the values are those of the last good one, or NaN before the first.
##
## The bits are those of @code{rampwise_response}, however the samples are cut into blocks. An overflow is a warning;
## values from there on are NaN.
## @seealso{rampwise_stream, rampwise_stream_watch}
## @end deftypefn

function h = rampwise_stream_push (stream, p, t = [])
  if (nargin < 2)
    print_usage ();
  endif
  caller = "rampwise_stream_push";
  [object, ending, as_class] = stream_object (caller, stream);
  p = raw_or (as_class, p, numbers (caller, "P", p), caller);
  if (! isvector (p) && ! isempty (p))
    error ("rampwise:argument", "%s: P must be a vector", caller);
  endif
  if (nargin > 2)
    t = stamps (caller, t, numel (p));
  endif
  [status, fault, frames, flags] = __rampwise__ (["stream_put" ending], object, p, t);
  if (status == -80)
    warning ("rampwise:overflow", "%s: response to P(%d): %s", caller, fault, __rampwise__ ("status_text", status));
  else
    check (caller, status, fault, size (p(:)));
  endif
  h = cell2struct (num2cell (frames.', 1), stream.outputs, 2);
  names = {"started", "clipped", "bridged", "waiting"};
  for i = 1:4
    h.(names{i}) = bitand (flags, 2 ^ (i - 1)) != 0;
  endfor
endfunction

## Integers as int32, other numbers of the stream's class.
function p = raw_or (as_class, given, p, caller)
  if (! isinteger (given))
    p = as_class (p);
    return;
  endif
  if (any (p(:) > 2^31 - 1))
    error ("rampwise:argument", "%s: raw samples P must be integers of 32 bits", caller);
  endif
  p = int32 (given);
endfunction

function t = stamps (caller, t, n)
  if (! isnumeric (t) || ! isreal (t) || issparse (t) || numel (t) != n)
    error ("rampwise:argument", "%s: T must hold a stamp for each sample of P", caller);
  endif
  if (! isa (t, "int64"))
    if (any (t != fix (t)) || any (abs (t) > 2^53))
      error ("rampwise:argument", "%s: T must be whole numbers of ticks, beyond 2^53 of class int64", caller);
    endif
    t = int64 (t);
  endif
endfunction

%!shared p, o
%! p = sin ((1:60).' .^ 1.4); o = {"omega", 3, "damping", 0.05, "input", "base acceleration"};
%!test # the bits of the whole record, in any blocks, by steady stamps too
%! r = rampwise_response (p, 0.1, o{:});
%! s = rampwise_stream (0.1, o{:});
%! h = [rampwise_stream_push(s, p(1:7)), rampwise_stream_push(s, p(8)), rampwise_stream_push(s, p(9:60).')];
%! for f = s.outputs
%!   assert (vertcat (h.(f{1})), r.(f{1}));
%! endfor
%! assert (find (vertcat (h.started)), 1);
%! s = rampwise_stream (0.1, o{:}, "ticks", 1e8);
%! assert (rampwise_stream_push (s, p, int64 (4e18) + int64 (1e8) * int64 (0:59)).velocity, r.velocity);
%!test # stamps: the bits of irregular times
%! t = cumsum ([4; 3; 5; 4; 4; 2; 6]);
%! s = rampwise_stream (0.5, o{:}, "ticks", 4);
%! h = rampwise_stream_push (s, p(1:7), t);
%! r = rampwise_response_at (t / 8, p(1:7), o{:});
%! assert (h.displacement, r.displacement);
%! assert (h.total_acceleration, r.total_acceleration);
%!test # bridged: one line over what is missing; the first value there is the last good one's
%! q = p(1:20); q(8:10) = NaN;
%! h = rampwise_stream_push (rampwise_stream (0.1, o{:}), q);
%! good = [1:7, 11:20].';
%! r = rampwise_response_at ((good - 1) * 0.1, p(good), o{:});
%! assert (h.displacement(good), r.displacement, 1e-14); # the times of the stamps are rounded, the stream's are not
%! assert (h.displacement(8:10), h.displacement(7) * [1; 1; 1]);
%! assert (find (h.waiting), [8; 9; 10]);
%! assert (find (h.bridged), 11);
%!test # held: steps under the last good load
%! q = p(1:12); q([5, 6]) = Inf;
%! h = rampwise_stream_push (rampwise_stream (0.1, o{:}, "missing", "hold"), q);
%! q([5, 6]) = q(4);
%! assert (h.displacement, rampwise_response (q, 0.1, o{:}).displacement);
%!test # rails, and before the first sample
%! s = rampwise_stream (0.1, o{:}, "rails", [-0.9, 0.9], "outputs", {"load", "spring force"});
%! h = rampwise_stream_push (s, [NaN, 0.5, 0.9, 0.1]);
%! assert (find (h.clipped), [3; 4]);
%! assert (h.load, [NaN; 0.5; 0.9; 0.1]);
%! assert (h.spring_force(1:2), [NaN; 0]);
%!test # nothing refused changes anything
%! s = rampwise_stream (0.1, o{:}, "missing", "refuse");
%! rampwise_stream_push (s, p(1:5));
%! before = rampwise_stream_save (s);
%! try
%!   rampwise_stream_push (s, [1; 2; NaN]);
%!   error ("not refused");
%! catch e
%!   assert (e.identifier, "rampwise:sample");
%!   assert (! isempty (strfind (e.message, "P(3)")));
%! end_try_catch
%! assert (rampwise_stream_save (s), before);
%! h = rampwise_stream_push (s, []);
%! assert (size (h.displacement), [0, 1]);
%!test # after too many the stream starts anew, or refuses
%! s = rampwise_stream (0.1, o{:}, "longest", 2);
%! h = rampwise_stream_push (s, [1, 2, NaN, NaN, NaN, 3, 4]);
%! assert (find (h.started), [1; 6]);
%! assert (h.displacement(6), 0);
%!error id=rampwise:gap rampwise_stream_push (rampwise_stream (0.1, o{:}, "longest", 2, "beyond", "refuse"), [1, 2, NaN, NaN, NaN, 3, 4])
%!error id=rampwise:time rampwise_stream_push (rampwise_stream (0.1, o{:}), [1, 2], [5, 5])
%!warning id=rampwise:overflow rampwise_stream_push (rampwise_stream (1, "omega", 0.1, "damping", 0, "input", "force"), 1e307 * ones (30, 1));
%!error <Invalid call> rampwise_stream_push (1)
%!error <must come from rampwise_stream> rampwise_stream_push (1, 2)
%!error <P must be a vector> rampwise_stream_push (rampwise_stream (0.1, o{:}), ones (3))
%!error <a stamp for each> rampwise_stream_push (rampwise_stream (0.1, o{:}), [1, 2], 1)
%!error <a stamp for each> rampwise_stream_push (rampwise_stream (0.1, o{:}), [1, 2], [])
%!error <whole numbers of ticks> rampwise_stream_push (rampwise_stream (0.1, o{:}), [1, 2], [1.5, 2])
