## -*- texinfo -*-
## @deftypefn  {} {@var{r} =} rampwise_response (@var{p}, @var{dt}, "frequency", @var{f}, "damping", @var{zeta}, "input", @var{kind})
## @deftypefnx {} {@var{r} =} rampwise_response (@var{p}, @var{dt}, "system", @var{s}, "input", @var{kind}, @dots{})
## The exact response of oscillators to the samples @var{p}, each @var{dt} after the one before.
##
## @var{p} is a vector, or a matrix of a column each channel. One oscillator answers every channel; as many oscillators
## as channels answer one each; many oscillators answer a single channel each. Samples of class
## single are answered in single precision, by the library's own steps for it; integers are taken as doubles.
##
## The oscillators are described by "period", "frequency" or "omega" with "damping" and perhaps "mass", or by
## "system", as in @code{rampwise_system}. Further options:
##
## @table @asis
## @item "input"
## What the samples are, always needed: "force"; "base acceleration" or "base velocity", where displacement and
## velocity are relative to the base; "base displacement", where they are absolute. A base acceleration is given as it
## is, without a mass or a minus sign.
## @item "between"
## "ramp" (default): a straight line from sample to sample. "hold": constant until the next sample.
## @item "start"
## "at once" (default): the input is @code{@var{p}(1)} from the first sample on. "ramp": the input rises from
## zero over the interval before it. "settled": at rest under @code{@var{p}(1)}, as if it had always been there.
## @item "displacement", "velocity"
## Of the mass at the first sample, for a start at once: 0 unless given; one value, or one for each column.
## @item "outputs"
## One word or a cell array of "displacement", "velocity", "acceleration" (the second derivative of the displacement),
## "total acceleration" (against a fixed frame), these four by default; "relative displacement" and "relative velocity"
## (against the base, what differs under a base displacement alone); "spring force" and "damper force" (stiffness and
## damper times these, positive in tension; in the unit that "mass", 1 unless given, brings).
## @end table
##
## @var{r} is a struct of @code{time}, a column that begins at 0; a matrix for each output, named like it with an
## underscore for a space, in the caller's units, a row each sample; and @code{provenance}. Where the slope of the base
## jumps at a sample, relative velocity and damper force are those before it.
##
## A sample that is NaN or infinite is refused with its index.
##
## Results support, and never replace, the governing code and a licensed engineer's judgement.
## @seealso{rampwise_response_at, rampwise_spectrum, rampwise_bank, rampwise_system}
## @end deftypefn

function r = rampwise_response (p, dt, varargin)
  if (nargin < 2)
    print_usage ();
  endif
  caller = "rampwise_response";
  options = parse (caller, whole (), varargin);
  r = respond (caller, [], p, scalar (caller, "DT", dt), options);
  r.time = (0:rows (r.(fieldnames (r){2})) - 1).' * dt;
endfunction

%!demo
%! ## A pump skid on springs, 2.4 Hz, 5 % damped, when its floor starts and stops
%! dt = 0.005;
%! t = (0:dt:3).';
%! floor = 1.5 * sin (2 * pi * 2 * t) .* (t < 1);
%! r = rampwise_response (floor, dt, "frequency", 2.4, "damping", 0.05, "input", "base acceleration");
%! plot (t, floor, r.time, r.total_acceleration);
%! xlabel ("time (s)"); ylabel ("acceleration (m/s^2)"); legend ("floor", "pump skid");

%!shared p, dt, o
%! p = sin ((0:40).' * 0.3); dt = 0.1; o = {"omega", 3, "damping", 0.05, "input", "force"};
%!test # free vibration, undamped: u = u0 cos w t + v0/w sin w t
%! r = rampwise_response (zeros (200, 1), 0.1, "omega", 2, "damping", 0, "input", "force", "displacement", 3, "velocity", 5);
%! t = (0:199).' * 0.1;
%! assert (r.time, t);
%! assert (r.displacement, 3 * cos (2*t) + 2.5 * sin (2*t), 1e-13); # 200 steps of at most eps * 4 each
%! assert (r.acceleration, -4 * r.displacement, 1e-14);
%!test # a constant force on a critically damped system: u = (1 - (1 + w t) exp (-w t)) / k
%! r = rampwise_response (ones (100, 1), 0.05, "omega", 3, "damping", 1, "mass", 2, "input", "force");
%! t = r.time;
%! assert (r.displacement, (1 - (1 + 3*t) .* exp (-3*t)) / 18, 1e-15);
%!test # settled: nothing moves; by a ramp: one step from rest ends at the first sample
%! r = rampwise_response (4 * ones (10, 1), dt, o{:}, "start", "settled");
%! assert (r.displacement, 4/9 * ones (10, 1), eps);
%! r = rampwise_response ([4; 4], dt, o{:}, "start", "ramp");
%! q = rampwise_response ([0; 4; 4], dt, o{:});
%! assert (r.displacement, q.displacement(2:3));
%!test # rows are columns; channels are answered as if alone
%! r = rampwise_response (p.', dt, o{:});
%! q = rampwise_response ([p, 2*p, -p], dt, o{:});
%! assert (size (r.displacement), [41, 1]);
%! assert (q.displacement(:,1), r.displacement);
%! assert (q.velocity(:,3), -r.velocity);
%! assert (q.displacement(:,2), 2 * r.displacement);
%!test # oscillators for each channel, and many for one
%! a = rampwise_response ([p, -p], dt, "omega", [3, 5], "damping", 0.05, "input", "force");
%! b = rampwise_response (p, dt, "omega", [3, 5], "damping", 0.05, "input", "force");
%! assert (b.displacement(:,1), a.displacement(:,1));
%! assert (b.displacement(:,2), -a.displacement(:,2));
%!test # integers are what they are as doubles
%! r = rampwise_response ([0; 100; -7], dt, o{:});
%! assert (rampwise_response (int16 ([0; 100; -7]), dt, o{:}), r);
%!test # single precision: answers of its class, within some of its digits of the double ones
%! for start = {"at once", "ramp", "settled"}
%!   r = rampwise_response (double (single (p)), dt, o{:}, "start", start{1});
%!   f = rampwise_response (single (p), dt, o{:}, "start", start{1});
%!   assert (class (f.displacement), "single");
%!   assert (size (f.velocity), [41, 1]);
%!   assert (double (f.displacement), r.displacement, 41 * eps ("single") * max (abs (r.displacement)));
%! endfor
%! f = rampwise_response (single ([p, -p]), dt, o{:}, "displacement", [1, 0], "velocity", [0, 2]);
%! g = rampwise_response (single (-p), dt, o{:}, "velocity", 2);
%! assert (f.total_acceleration(:,2), g.total_acceleration);
%!error <P.2.> rampwise_response (single ([1; NaN]), dt, o{:})
%!error id=rampwise:overflow rampwise_response (single (1e38) * ones (9, 1), 1, "omega", 0.1, "damping", 0, "input", "force")
%!test # one sample is the initial state
%! r = rampwise_response (5, dt, o{:}, "displacement", 1);
%! assert (r.displacement, 1);
%! assert (r.acceleration, 5 - 9);
%!test # total acceleration and provenance
%! r = rampwise_response (p, dt, "omega", 3, "damping", 0.05, "input", "base acceleration");
%! assert (r.total_acceleration, r.acceleration + p, 1e-14);
%! assert (r.provenance.arithmetic_edition, rampwise_version ().arithmetic_edition);
%!test # the spring carries what the mass's acceleration and the damper leave: m u'' + fd + fs = p
%! o8 = {"omega", 3, "damping", 0.2, "mass", 2, "outputs", {"spring force", "damper force", "acceleration"}};
%! r = rampwise_response (p, dt, o8{:}, "input", "force");
%! assert (fieldnames (r), {"time"; "spring_force"; "damper_force"; "acceleration"; "provenance"});
%! assert (r.spring_force + r.damper_force + 2 * r.acceleration, p, 1e-14); # a few roundings of values below 2
%!test # a moving base, given three ways: the same motion against it. x_g is of straight lines, so x_g' jumps
%! o8 = {"omega", 3, "damping", 0.2, "mass", 2, "input", "base displacement"};
%! words = {"relative displacement", "relative velocity", "spring force", "damper force"};
%! r = rampwise_response (p, dt, o8{:}, "outputs", [words, {"displacement", "velocity", "total acceleration"}]);
%! assert (r.relative_displacement, r.displacement - p, eps);
%! assert (r.relative_velocity, r.velocity - [0; diff(p)] / dt, 1e-14);
%! assert (r.spring_force, 18 * r.relative_displacement, 1e-14);
%! assert (r.damper_force, 2 * 2 * 0.2 * 3 * r.relative_velocity, 1e-14);
%! assert (r.spring_force + r.damper_force, -2 * r.total_acceleration, 1e-13);
%! f = rampwise_response (single (p), dt, o8{:}, "outputs", "damper force");
%! assert (class (f.damper_force), "single");
%! assert (double (f.damper_force), r.damper_force, 1e-5); # differences of p in single precision over dt, c = 2.4
%! a = rampwise_response (p, dt, o8{:}, "start", "ramp", "outputs", "relative velocity");
%! b = rampwise_response ([0; p], dt, o8{:}, "outputs", "relative velocity");
%! assert (a.relative_velocity, b.relative_velocity(2:end));
%!error <an output is named twice> rampwise_response (p, dt, o{:}, "outputs", {"velocity", "velocity"})
%!error <'output' must be one of> rampwise_response (p, dt, o{:}, "outputs", "load")
%!error id=rampwise:overflow rampwise_response (1e300, dt, "omega", 1e5, "damping", 0, "input", "force", "displacement", 1e300, "outputs", "spring force")
%!error <Invalid call> rampwise_response ()
%!error <Invalid call> rampwise_response (1)
%!error <rampwise_response: P.2.: A sample is not a finite number> rampwise_response ([1; NaN], dt, o{:})
%!error <P.2,3.> rampwise_response ([1, 1, 1; 1, 1, Inf], dt, o{:})
%!error id=rampwise:sample rampwise_response ([1; NaN], dt, o{:})
%!error <P holds no samples> rampwise_response ([], dt, o{:})
%!error id=rampwise:argument rampwise_response ({1}, dt, o{:})
%!error id=rampwise:argument rampwise_response ("abc", dt, o{:})
%!error id=rampwise:argument rampwise_response (sparse (p), dt, o{:})
%!error id=rampwise:argument rampwise_response (complex (p), dt, o{:})
%!error id=rampwise:argument rampwise_response (ones (2, 2, 2), dt, o{:})
%!error id=rampwise:argument rampwise_response (int64 (1), dt, o{:})
%!error id=rampwise:interval rampwise_response (p, -1, o{:})
%!error id=rampwise:no_rest rampwise_response (p + 1, dt, "omega", 0, "damping", 0, "input", "force", "start", "settled")
%!error id=rampwise:state rampwise_response (p, dt, o{:}, "velocity", Inf)
%!error id=rampwise:overflow rampwise_response (1e308 * ones (9, 1), 1, "omega", 0.1, "damping", 0, "input", "force")
%!error <2 oscillators and 3 columns> rampwise_response ([p, p, p], dt, "omega", [1, 2], "damping", 0, "input", "force")
%!error <belong to the start> rampwise_response (p, dt, o{:}, "start", "settled", "velocity", 1)
%!error <'velocity' must have one element> rampwise_response (p, dt, o{:}, "velocity", [1, 2])
%!error <'start' must be one of> rampwise_response (p, dt, o{:}, "start", 3)
