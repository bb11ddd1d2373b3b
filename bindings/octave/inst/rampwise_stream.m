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
  options = parse (caller, defaults, varargin);
  s = systems (caller, options);
  if (columns (s) != 1)
    error ("rampwise:argument", "%s: a stream has one oscillator; many under one input are a bank", caller);
  endif
  [input, between] = kinds (caller, options);
  [quantities, fields] = quantities (caller, options.outputs);
  rails = numbers (caller, "option 'rails'", options.rails);
  if (numel (rails) != 2)
    error ("rampwise:argument", "%s: option 'rails' must have two elements", caller);
  endif
  description = {s, scalar(caller, "DT", dt), input, between};
  [status, fault, object] = __rampwise__ ("stream_make", description{:}, ...
    word_number (caller, "start", options.start, {"at once", "AT_REST"; "settled", "SETTLED"}), ...
    word_number (caller, "missing", options.missing, {"bridge", "GAP_BRIDGE"; "hold", "GAP_HOLD"; "refuse", "GAP_REFUSE"}), ...
    word_number (caller, "beyond", options.beyond, {"restart", "GAP_RESTART"; "refuse", "GAP_REFUSE"}), ...
    count_of (caller, "option 'longest'", options.longest), count_of (caller, "option 'ticks'", options.ticks), ...
    rails, quantities);
  check (caller, status, fault);
  stream = struct ("dt", dt, "outputs", {fields}, "provenance", provenance (), "description", {description}, "object",
                   object, "guard", onCleanup (@() __rampwise__ ("object_free", object)));
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
