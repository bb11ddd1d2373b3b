## -*- texinfo -*-
## @deftypefn  {} {@var{now} =} rampwise_live_structure_read (@var{s})
## @deftypefnx {} {@var{now} =} rampwise_live_structure_read (@var{s}, "part", @var{part}, "samples", @var{n})
## What the structure @var{s} does at the present sample, and its peaks. The structure goes on unchanged.
##
## @table @asis
## @item "part"
## Peaks "primary" (default): from the first to the present sample. "residual": in the free motion from here on, under zero
## input at once. "maximax": both. Where "between" is "hold", push a zero first if the last sample is to act for its DT.
## @item "samples"
## How many steps of the free motion are looked at, at most: 100000 unless given. It ends earlier where nothing later can
## exceed the peaks.
## @end table
##
## @var{now} is a struct of rows @code{displacement}, @code{velocity}, @code{acceleration} and @code{total_acceleration}, an
## element each row of "rows"; of @code{peaks} as in @code{rampwise_structure_response}, with times from the first sample
## on; and where there is equipment of @code{equipment}, a struct of @code{displacement} and @code{velocity} against its
## point, an element each piece, and @code{peaks} of displacement and total acceleration. There are no peaks where option
## "peaks" is false.
##
## Of residual and maximax, peaks have a field @code{later} too: no value after the steps that were looked at is larger in
## size. Where that is above the smaller of @code{high} and @code{-low}, a peak after them may be larger than the one found.
## Undamped equipment on an undamped mode of its own frequency grows for ever: its residual is infinite, and so is its
## instant.
## @seealso{rampwise_live_structure, rampwise_live_structure_push}
## @end deftypefn

function now = rampwise_live_structure_read (s, varargin)
  if (nargin < 1)
    print_usage ();
  endif
  caller = "rampwise_live_structure_read";
  options = parse (caller, struct ("part", "primary", "samples", free_steps ()), varargin);
  now = read_structure (caller, live_structure (caller, s), part_number (caller, options.part), ...
                        count_of (caller, "option 'samples'", options.samples));
endfunction

%!test # the last row of what was pushed; equipment begins at rest against its point
%! b = rampwise_structure (eye (2), [], [20, -10; -10, 10], "damping", 0.05); o = {"input", "base acceleration"};
%! e = {"equipment", rampwise_system("period", [0.5; 1; 2], "damping", 0.05), "point", 2};
%! s = rampwise_live_structure (b, 0.1, o{:}, e{:}, "peaks", false);
%! h = rampwise_live_structure_push (s, 3);
%! assert (h.total_acceleration, [0, 0], 1e-14);
%! assert (h.equipment.acceleration, -h.total_acceleration([2, 2, 2]));
%! assert ([h.equipment.displacement; h.equipment.velocity; h.equipment.total_acceleration], zeros (3));
%! h = rampwise_live_structure_push (s, [1, 4, 2]);
%! now = rampwise_live_structure_read (s);
%! assert (fieldnames (now), {"displacement"; "velocity"; "acceleration"; "total_acceleration"; "equipment"});
%! assert (now.total_acceleration, h.total_acceleration(3,:));
%! assert (now.equipment, struct ("displacement", h.equipment.displacement(3,:), "velocity", h.equipment.velocity(3,:)));
%!function each_peak (call, varargin)
%!  ## CALL with the peaks of each quantity, of outputs and of equipment, from every struct.
%!  for name = fieldnames (varargin{1}.peaks).'
%!    call (cellfun (@(x) x.peaks.(name{1}), varargin, "UniformOutput", false){:});
%!  endfor
%!  if (isfield (varargin{1}, "equipment"))
%!    each_peak (call, cellfun (@(x) x.equipment, varargin, "UniformOutput", false){:});
%!  endif
%!endfunction
%!function near (before, residual, maximax, after)
%!  ## The larger of both times, bit for bit, with its instant; and what a run over zeros finds, to 1e-11 as in the header.
%!  [high, low] = deal (residual.high > before.high, residual.low < before.low);
%!  assert ([maximax.high, maximax.low], [max(before.high, residual.high), min(before.low, residual.low)]);
%!  assert (maximax.high_time, merge (high, residual.high_time, before.high_time));
%!  assert (maximax.low_time, merge (low, residual.low_time, before.low_time));
%!  assert (abs (maximax.largest), max (maximax.high, -maximax.low));
%!  assert (maximax.later, residual.later);
%!  size_of = abs (after.largest);
%!  assert (abs ([maximax.high - after.high, maximax.low - after.low]) <= 1e-11 * [size_of, size_of]);
%!  assert (residual.later <= min (residual.high, -residual.low) + 2e-11 * abs (residual.largest));
%!  assert ([residual.high_time, residual.low_time] >= 6 - 1e-12);
%!endfunction
%!test # the free motion is what a run over zeros finds; it changes nothing
%! b = rampwise_structure (diag ([2, 1]), [], [300, -100; -100, 100], "damping", 0.03); o = {"input", "base acceleration"};
%! e = rampwise_system ("omega", [b.omega(1), 8, 30], "damping", [0.03, 0.02, 0.3]);
%! for damper = [0, 5] # classical, and by pairs of roots
%!   if (damper > 0)
%!     b = rampwise_structure (diag ([2, 1]), [1 + damper, -0.5; -0.5, 0.5], [300, -100; -100, 100]);
%!   endif
%!   s = rampwise_live_structure (b, 0.04, o{:}, "equipment", e, "point", [1, 2, 2]);
%!   rampwise_live_structure_push (s, [sin((0:149) .^ 1.3), 0]);
%!   saved = rampwise_live_structure_save (s);
%!   x = cellfun (@(part) rampwise_live_structure_read (s, "part", part), {"primary", "residual", "maximax"});
%!   assert (rampwise_live_structure_save (s), saved);
%!   assert (x(1), rampwise_live_structure_read (s));
%!   rampwise_live_structure_push (s, zeros (3000, 1));
%!   each_peak (@near, x(1), x(2), x(3), rampwise_live_structure_read (s));
%! endfor
%!test # an oscillator's residual has a closed form, which needs no steps; without any, what comes later is bounded
%! for damper = [0.3, 7] # below and above critical damping, 6
%!   b = rampwise_structure (1, damper, 9); p = [1, -2, 4, 3];
%!   s = rampwise_live_structure (b, 0.1, "input", "force", "on", 1);
%!   rampwise_live_structure_push (s, p);
%!   x = rampwise_spectrum (p, 0.1, "omega", 3, "damping", damper / 6, "input", "force", "part", "residual").displacement;
%!   r = rampwise_live_structure_read (s, "part", "residual").peaks.displacement;
%!   assert (r.high, x.high, -1e-13);
%!   assert (r.high_time, x.high_time, 1e-7); # flat at the peak: half the digits
%!   r = rampwise_live_structure_read (s, "part", "residual", "samples", 0).peaks.displacement;
%!   assert (r.later > x.high && abs (r.largest) < 0.99 * x.high);
%! endfor
%!test # undamped equipment on an undamped mode of its own frequency grows for ever, that beside it does not
%! b = rampwise_structure (1, 0, 9); e = struct ("mass", [1, 1], "damper", 0, "stiffness", [9, 8]);
%! r = rampwise_structure_response (b, [1; -1; 0.5], 0.1, "input", "base acceleration", "equipment", e, "point", 1, "part", "maximax");
%! for x = {r.equipment.peaks.displacement, r.equipment.peaks.total_acceleration}
%!   assert ([x{1}.high(1), x{1}.low(1), x{1}.high_time(1), x{1}.low_time(1), x{1}.later(1)], [Inf, -Inf, Inf, Inf, Inf]);
%!   assert (isfinite ([x{1}.high(2), x{1}.low(2), x{1}.high_time(2), x{1}.low_time(2), x{1}.later(2)]));
%! endfor
%!shared s
%! s = rampwise_live_structure (rampwise_structure (1, 1, 9), 0.1, "input", "force", "on", 1);
%!error <no sample was pushed yet> rampwise_live_structure_read (s, "part", "residual")
%!error <Invalid call> rampwise_live_structure_read ()
%!error <S must come from> rampwise_live_structure_read (1)
%!error <'part' must be one of: primary, residual, maximax> rampwise_live_structure_read (s, "part", "all")
%!error <option 'samples' must be a whole number> rampwise_live_structure_read (s, "samples", -1)
%!error <option 'samples' must be a whole number> rampwise_live_structure_read (s, "samples", 2.5)
%!error <no option 'steps'> rampwise_live_structure_read (s, "steps", 1)
