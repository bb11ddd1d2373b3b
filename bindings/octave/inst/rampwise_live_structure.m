## -*- texinfo -*-
## @deftypefn  {} {@var{s} =} rampwise_live_structure (@var{b}, @var{dt}, "input", "base acceleration")
## @deftypefnx {} {@var{s} =} rampwise_live_structure (@var{b}, @var{dt}, "input", "force", "on", @var{F})
## The structure @var{b}, of @code{rampwise_structure}, on live data: samples are pushed as they come, one or a block at a
## time, @var{dt} apart.
##
## Options are those of @code{rampwise_structure_response}. The first sample pushed is the one at which the motion begins.
##
## @var{s} is a struct of @code{dt}; @code{inputs}, @code{rows} and @code{pieces} (of equipment), how many there are;
## @code{provenance}; and what the package needs. Copies of it are the same structure, which is freed with the last of them.
##
## @example
## @group
## b = rampwise_structure (M, [], K, "damping", 0.05);
## s = rampwise_live_structure (b, 0.01, "input", "base acceleration");
## h = rampwise_live_structure_push (s, samples);
## roof = rampwise_live_structure_read (s).peaks.displacement.largest(end)
## @end group
## @end example
##
## Results support, and never replace, the governing code and a licensed engineer's judgement; a trip that protects
## people needs certified equipment.
## @seealso{rampwise_live_structure_push, rampwise_live_structure_read, rampwise_live_structure_start,
## rampwise_live_structure_save, rampwise_structure_response}
## @end deftypefn

function s = rampwise_live_structure (b, dt, varargin)
  if (nargin < 2)
    print_usage ();
  endif
  caller = "rampwise_live_structure";
  s = make_structure (caller, b, dt, parse (caller, structure_options (), varargin), 1:4);
endfunction

%!shared b, o
%! b = rampwise_structure (eye (2), [], [20, -10; -10, 10], "damping", 0.05); o = {"input", "base acceleration"};
%!test # made, copied, freed with the last copy; a number never comes again
%! before = __rampwise__ ("objects");
%! s = rampwise_live_structure (b, 0.1, o{:}, "rows", [1, 0; 0, 1; -1, 1], "equipment", rampwise_system ("period", 1:4, "damping", 0.05), "point", 2);
%! assert ([s.inputs, s.rows, s.pieces], [1, 3, 4]);
%! c = s;
%! clear s
%! assert (__rampwise__ ("objects"), before + 1);
%! old = c.object;
%! clear c
%! assert (__rampwise__ ("objects"), before);
%! s = rampwise_live_structure (b, 0.1, o{:});
%! assert (s.object != old);
%!error <Invalid call> rampwise_live_structure (b)
%!error <B must come from> rampwise_live_structure (struct (), 1, o{:})
%!error <no option 'roof'> rampwise_live_structure (b, 1, o{:}, "roof", 1)
%!error <DT must be a scalar> rampwise_live_structure (b, [1, 2], o{:})
%!error id=rampwise:interval rampwise_live_structure (b, -1, o{:})
%!error <'modes' must be from 1 to 2> rampwise_live_structure (b, 1, o{:}, "modes", 3)
%!error <'modes' must be from 1 to 2> rampwise_live_structure (b, 1, o{:}, "modes", 0)
%!error <option 'modes' must be a whole number> rampwise_live_structure (b, 1, o{:}, "modes", 1.5)
%!error <are for classical damping> rampwise_live_structure (rampwise_structure (eye (2), [1, 0; 0, 0], [2, -1; -1, 1]), 1, o{:}, "modes", 1)
%!error <are for classical damping> rampwise_live_structure (rampwise_structure (eye (2), [1, 0; 0, 0], [2, -1; -1, 1]), 1, o{:}, "static_correction", true)
%!error <'static_correction' must be true or false> rampwise_live_structure (b, 1, o{:}, "static_correction", "yes")
%!error <'displacement' must have 2 finite elements> rampwise_live_structure (b, 1, o{:}, "displacement", 1)
%!error <'velocity' must have 2 finite elements> rampwise_live_structure (b, 1, o{:}, "velocity", [1, NaN])
%!shared b, o, e
%! b = rampwise_structure (eye (2), [], [20, -10; -10, 10], "damping", 0.05); o = {"input", "base acceleration"};
%! e = rampwise_system ("period", [1, 2], "damping", 0.05);
%!error <'equipment' must be a struct of mass> rampwise_live_structure (b, 1, o{:}, "equipment", 1, "point", 1)
%!error <'point' must have one element> rampwise_live_structure (b, 1, o{:}, "equipment", e)
%!error <'point' must have one element> rampwise_live_structure (b, 1, o{:}, "equipment", e, "point", [1, 1, 1])
%!error <'point' must have one element> rampwise_live_structure (b, 1, o{:}, "point", 1)
%!error <'point' must have one element> rampwise_live_structure (b, 1, o{:}, "point", [1, 2])
%!error <'point' must be numbers of rows, from 1 to 2> rampwise_live_structure (b, 1, o{:}, "equipment", e, "point", NaN)
%!error <'point' must be numbers of rows, from 1 to 2> rampwise_live_structure (b, 1, o{:}, "equipment", e, "point", 3)
%!error <'point' must be numbers of rows, from 1 to 2> rampwise_live_structure (b, 1, o{:}, "equipment", e, "point", [1, 1.5])
%!error <option 'equipment': mass.2.> rampwise_live_structure (b, 1, o{:}, "equipment", struct ("mass", [1, -1], "damper", 0, "stiffness", 1), "point", 1)
%!error <too fast for peaks> rampwise_live_structure (b, 1, o{:}, "equipment", rampwise_system ("omega", 2000, "damping", 0), "point", 1)
%!error <too fast for peaks> rampwise_live_structure (b, 1000, o{:})
