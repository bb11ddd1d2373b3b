## -*- texinfo -*-
## @deftypefn {} {@var{bank} =} rampwise_bank (@var{dt}, "frequency", @var{f}, "damping", @var{zeta}, "input", @var{kind})
## Many oscillators under one input, which is pushed in chunks of any length, samples @var{dt} apart.
##
## The oscillators are described as in @code{rampwise_system}, or by option "system"; options "input" and "between"
## are those of @code{rampwise_response}. They are numbered from 1 in the order given, and are at rest under zero
## input, so that the first sample pushed ends a ramp up from zero over one @var{dt}; @code{rampwise_bank_start} begins
## otherwise. Option "precision" is "double" (default) or "single": all inputs are rounded to single precision then, and
## answers are of that class.
##
## @var{bank} is a struct of @code{dt}, @code{count}, @code{provenance} and what the package needs. Copies of it are the
## same bank, which is freed with the last of them.
##
## An oscillator whose response overflows is stopped, with a warning; the others go on.
## @seealso{rampwise_bank_push, rampwise_bank_read, rampwise_bank_start, rampwise_bank_set, rampwise_bank_retune}
## @end deftypefn

function bank = rampwise_bank (dt, varargin)
  if (nargin < 1)
    print_usage ();
  endif
  caller = "rampwise_bank";
  defaults = describe ();
  defaults.precision = "double";
  options = parse (caller, defaults, varargin);
  ending = ending_of (caller, options);
  s = systems (caller, options);
  [input, between] = kinds (caller, options);
  [status, fault, object] = __rampwise__ (["bank_make" ending], s, scalar (caller, "DT", dt), input, between);
  check (caller, status, fault);
  bank = struct ("dt", dt, "count", columns (s), "provenance", provenance (), "kinds", {{input, between}}, "object", object,
                 "ending", ending, "guard", onCleanup (@() __rampwise__ ("object_free", object)));
endfunction

%!test # made, copied, freed with the last copy
%! before = __rampwise__ ("objects");
%! a = rampwise_bank (0.1, "frequency", 1:5, "damping", 0.05, "input", "force");
%! b = a;
%! assert (a.count, 5);
%! assert (__rampwise__ ("objects"), before + 1);
%! clear a
%! assert (__rampwise__ ("objects"), before + 1);
%! clear b
%! assert (__rampwise__ ("objects"), before);
%!test # many at a time, freed in any order; a number never comes again
%! banks = cell (1, 50);
%! for i = 1:50
%!   banks{i} = rampwise_bank (0.1, "omega", i, "damping", 0, "input", "force");
%! endfor
%! old = banks{7}.object;
%! banks([7, 50, 20]) = {[]};
%! c = rampwise_bank (0.1, "omega", 99, "damping", 0, "input", "force");
%! assert (! any (cellfun (@(b) ! isempty (b) && b.object == c.object, banks)));
%! assert (c.object != old);
%! rampwise_bank_push (banks{49}, 1);
%! h = rampwise_bank_read (banks{49});
%! c = rampwise_coefficients (0.1, "omega", 49, "damping", 0, "input", "force");
%! assert (h.displacement, c.D);
%!test # single precision: the bits of single records, all answers of the class
%! p = single (sin ((1:40).' .^ 1.3)); o = {"omega", [1, 3], "damping", 0.05, "input", "base acceleration"};
%! b = rampwise_bank (0.1, o{:}, "precision", "single");
%! h = [rampwise_bank_push(b, double (p(1:9)), [2, 1]), rampwise_bank_push(b, p(10:40), [2, 1])];
%! r = rampwise_response (p, 0.1, o{:}, "start", "ramp");
%! for f = {"displacement", "velocity", "acceleration", "total_acceleration"}
%!   assert (vertcat (h.(f{1})), r.(f{1})(:,[2, 1]));
%!   assert (class (h(1).(f{1})), "single");
%! endfor
%! now = rampwise_bank_read (b);
%! assert (now.velocity, r.velocity(end,:).');
%! assert (class (now.state), "single");
%! c = rampwise_bank (0.1, "omega", [9, 3], "damping", 0.05, "input", "base acceleration", "precision", "single");
%! rampwise_bank_retune (c, 1, "omega", 1, "damping", 0.05);
%! rampwise_bank_set (c, now.state);
%! assert (rampwise_bank_push (c, 2, 1:2), rampwise_bank_push (b, 2, 1:2));
%! rampwise_bank_start (b, 1);
%! assert (rampwise_bank_push (b, 0:3, 1).displacement,
%!         rampwise_response (single ([1, 0:3]), 0.1, "omega", 1, o{3:end}).displacement(2:end));
%! fail ('rampwise_bank_push (b, 1e39)', "P.1.");
%!error <'precision' must be one of: double, single> rampwise_bank (1, "period", 1, "damping", 0.05, "input", "force", "precision", "half")
%!error <Invalid call> rampwise_bank ()
%!error id=rampwise:interval rampwise_bank (NaN, "period", 1, "damping", 0.05, "input", "force")
%!error id=rampwise:impulses rampwise_bank (1, "period", 1, "damping", 0.05, "input", "base velocity", "between", "hold")
%!error <oscillator.2.> rampwise_bank (1, "omega", [1, 1e40], "damping", 0, "input", "force")
