## -*- texinfo -*-
## @deftypefn {} {@var{stream} =} rampwise_stream (@var{dt}, "frequency", @var{f}, "damping", @var{zeta}, "input", @var{kind})
## One oscillator on live data: samples are pushed as they come, one or a block at a time, @var{dt} apart or with time
## stamps; samples may be missing.
##
## The oscillator is described as in @code{rampwise_system}, or by option "system"; options "input" and "between" are
## those of @code{rampwise_response}. Further options:
##
## @table @asis
## @item "start"
## "at once" (default): at rest under the first sample. "settled": in equilibrium under it.
## @item "outputs"
## A cell array of what pushing answers, of "displacement", "velocity", "acceleration", "total acceleration" (these
## four by default), "spring force", "damper force", "load".
## @item "weighted"
## A struct of outputs more, each a field of four weights on displacement, velocity, load and the load less the one
## before. With "outputs" there are up to eight.
## @item "precision"
## "double" (default) or "single": samples are rounded to single precision then, and answers are of that class.
## @item "scale", "offset", "missing_raw"
## Samples of an integer class are raw: the load is "offset" + "scale" times them, 0 and 1 unless given. The raw sample
## "missing_raw" is missing: @code{intmin ("int32")} unless given. Rails are those of the samples as they are pushed.
## @item "missing"
## What is done about missing samples, which are NaN or infinite, or left out between stamps. "bridge" (default):
## nothing until the next good one, then one exact step over all of them. "hold": each is a step under the last good
## load. "refuse": an error.
## @item "longest", "beyond"
## When more than "longest" (10) in a row were missing, the next good one begins the stream anew ("restart", default),
## or is refused until @code{rampwise_stream_start} ("refuse").
## @item "ticks"
## How many ticks of the time stamps make one @var{dt}: 1 unless given.
## @item "rails"
## @code{[@var{low}, @var{high}]}: a sample at or beyond them is flagged as clipped. None unless given.
## @end table
##
## @var{stream} is a struct of @code{dt}, @code{outputs}, @code{provenance} and what the package needs. Copies of it are
## the same stream, which is freed with the last of them.
##
## Results support, and never replace, the governing code and a licensed engineer's judgement; a trip that protects
## people needs certified equipment.
## @seealso{rampwise_stream_push, rampwise_stream_watch, rampwise_stream_read, rampwise_stream_save}
## @end deftypefn

function stream = rampwise_stream (dt, varargin)
  if (nargin < 1)
    print_usage ();
  endif
  caller = "rampwise_stream";
  defaults = describe ();
  defaults.start = "at once";
  defaults.outputs = {"displacement", "velocity", "acceleration", "total acceleration"};
  defaults.missing = "bridge";
  defaults.longest = 10;
  defaults.beyond = "restart";
  defaults.ticks = 1;
  defaults.rails = [-Inf, Inf];
  defaults.weighted = struct ();
  defaults.precision = "double";
  defaults.scale = 1;
  defaults.offset = 0;
  defaults.missing_raw = -2^31;
  options = parse (caller, defaults, varargin);
  s = systems (caller, options);
  if (columns (s) != 1)
    error ("rampwise:argument", "%s: a stream has one oscillator; many under one input are a bank", caller);
  endif
  [input, between] = kinds (caller, options);
  [made, fields] = all_outputs (caller, options);
  ending = ending_of (caller, options);
  rails = numbers (caller, "option 'rails'", options.rails);
  if (numel (rails) != 2)
    error ("rampwise:argument", "%s: option 'rails' must have two elements", caller);
  endif
  dt = scalar (caller, "DT", dt);
  [status, fault, object] = __rampwise__ (["stream_make" ending], s, dt, input, between, ...
    word_number (caller, "start", options.start, {"at once", "AT_REST"; "settled", "SETTLED"}), ...
    word_number (caller, "missing", options.missing, {"bridge", "GAP_BRIDGE"; "hold", "GAP_HOLD"; "refuse", "GAP_REFUSE"}), ...
    word_number (caller, "beyond", options.beyond, {"restart", "GAP_RESTART"; "refuse", "GAP_REFUSE"}), ...
    count_of (caller, "option 'longest'", options.longest), count_of (caller, "option 'ticks'", options.ticks), ...
    rails, made, raw (caller, options));
  check (caller, status, fault);
  stream = struct ("dt", dt, "outputs", {fields}, "provenance", provenance (), "kinds", {{input, between}}, "object",
                   object, "ending", ending, "guard", onCleanup (@() __rampwise__ ("object_free", object)));
endfunction

function [made, fields] = all_outputs (caller, options)
  [made, fields] = quantities (caller, options.outputs);
  if (! isstruct (options.weighted) || ! isscalar (options.weighted))
    error ("rampwise:option", "%s: option 'weighted' must be a struct of four weights a field", caller);
  endif
  for [x, name] = options.weighted
    if (any (strcmp (name, [fields, {"started", "clipped", "bridged", "waiting"}])))
      error ("rampwise:option", "%s: an output more cannot be called '%s'", caller, name);
    endif
    made(:,end+1) = weights (caller, ["'weighted'." name], x);
    fields{end+1} = name;
  endfor
  if (numel (fields) > 8)
    error ("rampwise:option", "%s: a stream has up to eight outputs", caller);
  endif
endfunction

function x = raw (caller, options)
  x = [scalar(caller, "option 'scale'", options.scale), scalar(caller, "option 'offset'", options.offset), ...
       scalar(caller, "option 'missing_raw'", options.missing_raw)];
  if (! (x(3) == fix (x(3)) && x(3) >= -2^31 && x(3) < 2^31))
    error ("rampwise:argument", "%s: option 'missing_raw' must be an integer of 32 bits", caller);
  endif
endfunction

function x = word_number (caller, option, word, table)
  i = choice (caller, option, word, table(:,1).');
  x = __rampwise__ ("constant", ["RAMPWISE_", table{i,2}]);
endfunction

%!test # made, copied, freed with the last copy, its watches too
%! before = __rampwise__ ("objects");
%! a = rampwise_stream (0.1, "frequency", 2, "damping", 0.05, "input", "force");
%! rampwise_stream_watch (a, "displacement", "window", 5, "events", 3);
%! b = a;
%! clear a
%! assert (__rampwise__ ("objects"), before + 1);
%! clear b
%! assert (__rampwise__ ("objects"), before);
%!shared o
%! o = {"omega", 2, "damping", 0.05, "input", "force"};
%!test # settled
%! s = rampwise_stream (0.1, o{:}, "start", "settled");
%! h = rampwise_stream_push (s, [8, 8, 8]);
%! assert (h.displacement, [2; 2; 2]);
%!test # weighted outputs: those of other names, and any sum
%! c = rampwise_coefficients (0.1, o{:});
%! s = rampwise_stream (0.1, o{:}, "outputs", {"velocity", "spring force"}, ...
%!                      "weighted", struct ("strain", [0.5, 0, 0, 0], "rate", [0, 0, 0, 10], "mixed", [1, -2, 3, 0]));
%! h = rampwise_stream_push (s, [1, 4, 2, -7]);
%! r = rampwise_response ([1, 4, 2, -7], 0.1, o{:});
%! assert (s.outputs, {"velocity", "spring_force", "strain", "rate", "mixed"});
%! assert (h.strain, 0.5 * r.displacement);
%! assert (h.rate, [0; 30; -20; -90]);
%! assert (h.mixed, r.displacement - 2 * r.velocity + 3 * [1; 4; 2; -7], 1e-14);
%!test # raw integers of any class, missing ones, rails before scale and offset
%! s = rampwise_stream (0.1, o{:}, "scale", 0.25, "offset", -3, "missing_raw", -99, "rails", [-100, 100], "outputs", "load");
%! h = rampwise_stream_push (s, int16 ([4; -99; 100; 8]));
%! assert (h.load([1, 3, 4]), [-2; 22; -1]);
%! assert ([find(h.waiting), find(h.bridged)], [2, 3]);
%! assert (h.clipped, [false; false; true; true]);
%! assert (rampwise_stream_push (s, uint8 (255), 8).load, 60.75);
%! assert (rampwise_stream_push (s, 4).load, 4);
%! fail ('rampwise_stream_push (s, intmax ("uint32"))', "32 bits");
%! fail ('rampwise_stream_push (s, int64 (1))', "real, full array");
%!test # single precision: the bits of single records; raw, saved, watched, begun anew
%! p = single (sin ((1:30).' .^ 1.2));
%! make = @() rampwise_stream (0.1, o{:}, "precision", "single", "scale", 0.5);
%! a = make (); b = make ();
%! w = rampwise_stream_watch (a, "displacement", "level", 0.01, "window", 5); rampwise_stream_watch (b, "displacement", "level", 0.01, "window", 5);
%! h = [rampwise_stream_push(a, double (p(1:9))), rampwise_stream_push(a, p(10:30))];
%! r = rampwise_response (p, 0.1, o{:});
%! for f = a.outputs
%!   assert (vertcat (h.(f{1})), r.(f{1}));
%!   assert (class (h(1).(f{1})), "single");
%! endfor
%! rampwise_stream_resume (b, rampwise_stream_save (a));
%! assert (rampwise_stream_push (b, int8 (2)), rampwise_stream_push (a, 1));
%! assert (rampwise_stream_read (b), rampwise_stream_read (a));
%! assert (! isempty (rampwise_stream_events (a, w)));
%! rampwise_stream_reset (a, w); rampwise_stream_release (a, w, 1); rampwise_stream_skip (a, 33);
%! state = rampwise_stream_read (b).state;
%! assert (size (state), [6, 1]);
%! rampwise_stream_start (a, 0, state); rampwise_stream_start (b, 0, state);
%! assert (rampwise_stream_push (a, 5), rampwise_stream_push (b, 5));
%! fail ("rampwise_stream_resume (rampwise_stream (0.1, o{:}), rampwise_stream_save (make ()))", "BYTES");
%!error <option 'weighted' must be a struct> rampwise_stream (0.1, o{:}, "weighted", 1)
%!error <four finite weights> rampwise_stream (0.1, o{:}, "weighted", struct ("a", [1, 2, 3]))
%!error <four finite weights> rampwise_stream (0.1, o{:}, "weighted", struct ("a", [1, 2, 3, NaN]))
%!error <cannot be called 'velocity'> rampwise_stream (0.1, o{:}, "weighted", struct ("velocity", 1:4))
%!error <up to eight> rampwise_stream (0.1, o{:}, "weighted", struct ("a", 1:4, "b", 1:4, "c", 1:4, "d", 1:4, "e", 1:4))
%!error <'missing_raw' must be> rampwise_stream (0.1, o{:}, "missing_raw", 0.5)
%!error id=rampwise:sample rampwise_stream (0.1, o{:}, "scale", NaN)
%!error id=rampwise:argument rampwise_stream (0.1, o{:}, "offset", "x")
%!error <'precision' must be one of> rampwise_stream (0.1, o{:}, "precision", 1)
%!error <Invalid call> rampwise_stream ()
%!error <a stream has one oscillator> rampwise_stream (0.1, "omega", [1, 2], "damping", 0.05, "input", "force")
%!error <'missing' must be one of> rampwise_stream (0.1, o{:}, "missing", "skip")
%!error <'longest' must be a whole number> rampwise_stream (0.1, o{:}, "longest", 1.5)
%!error <'rails' must have two> rampwise_stream (0.1, o{:}, "rails", 1)
%!error id=rampwise:sample rampwise_stream (0.1, o{:}, "rails", [NaN, 1])
%!error <'output' must be one of> rampwise_stream (0.1, o{:}, "outputs", {"weight"})
%!error <named twice> rampwise_stream (0.1, o{:}, "outputs", {"load", "load"})
%!error <one to eight> rampwise_stream (0.1, o{:}, "outputs", {})
%!error id=rampwise:interval rampwise_stream (0, o{:})
%!error id=rampwise:count rampwise_stream (0.1, o{:}, "ticks", 0)
