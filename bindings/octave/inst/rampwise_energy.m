## -*- texinfo -*-
## @deftypefn {} {@var{e} =} rampwise_energy (@var{p}, @var{dt}, "frequency", @var{f}, "damping", @var{zeta}, "input", @var{kind}, "frame", @var{frame})
## Where the energy goes, at every sample, exact for the input as it is given: input = kinetic + strain + dissipated, less
## kinetic and strain at the start.
##
## Columns of @var{p}, oscillators, "input" and "between" are as in @code{rampwise_response}; the start is "at once",
## with options "displacement" and "velocity". Energies are in force times length, per unit mass unless "mass" is given.
## The base of a given acceleration starts at rest, and nothing corrects its baseline.
##
## @table @asis
## @item "frame"
## Against what motion is measured: "relative" (default), the base; "absolute", a fixed frame, which is all there is for
## a base displacement. (C.-M. Uang and V. V. Bertero, Earthquake Engineering and Structural Dynamics 19, 77-90, 1990.)
## @end table
##
## @var{e} is a struct of @code{time}, a column that begins at 0; the matrices @code{input}, @code{kinetic},
## @code{strain} and @code{dissipated}, a row each sample; and @code{provenance}.
##
## Results support, and never replace, the governing code and a licensed engineer's judgement.
## @seealso{rampwise_energy_spectrum, rampwise_response}
## @end deftypefn

function e = rampwise_energy (p, dt, varargin)
  if (nargin < 2)
    print_usage ();
  endif
  caller = "rampwise_energy";
  defaults = describe ();
  defaults.frame = "relative";
  defaults.displacement = 0;
  defaults.velocity = 0;
  options = parse (caller, defaults, varargin);
  p = samples (caller, p);
  s = systems (caller, options);
  [input, between] = kinds (caller, options);
  n = pairs (caller, s, p);
  u0 = initial (caller, "displacement", options.displacement, n);
  v0 = initial (caller, "velocity", options.velocity, n);
  dt = scalar (caller, "DT", dt);
  e = struct ("time", (0:rows (p) - 1).' * dt);
  [status, fault, e.input, e.kinetic, e.strain, e.dissipated] = ...
    __rampwise__ ("energies", s, dt, input, between, frame (caller, options), u0, v0, p);
  check (caller, status, fault, size (p));
  e.provenance = provenance ();
endfunction

%!shared p, dt, o
%! p = sin ((0:80).' * 0.3); dt = 0.1; o = {"omega", 3, "damping", 0.05, "mass", 2};
%!test # kinetic and strain energy are those of the motion, and the balance closes
%! for input = {"force", "base acceleration", "base velocity"}
%!   e = rampwise_energy (p, dt, o{:}, "input", input{1}, "displacement", 0.2, "velocity", -1);
%!   r = rampwise_response (p, dt, o{:}, "input", input{1}, "displacement", 0.2, "velocity", -1);
%!   assert (e.kinetic, r.velocity .^ 2, 1e-14);
%!   assert (e.strain, 9 * r.displacement .^ 2, 1e-14);
%!   most = e.kinetic + e.strain;
%!   assert (e.input, most + e.dissipated - most(1), 1e-12); # 80 steps, 4 eps each of sums of some 10
%!   assert (all (diff (e.dissipated) >= 0));
%! endfor
%!test # the work of a force on a free mass, p = 1: (p t)^2 / 2m
%! e = rampwise_energy (ones (5, 1), 1, "omega", 0, "damping", 0, "mass", 2, "input", "force");
%! assert (e.input, (0:4).' .^ 2 / 4, 1e-14);
%! assert (e.time, (0:4).');
%!test # both frames differ by m v_g^2 / 2 + m y' v_g; v_g is the trapezoidal sum, exact for straight lines
%! q = p - p(1);
%! a = rampwise_energy (q, dt, o{:}, "input", "base acceleration", "frame", "absolute");
%! b = rampwise_energy (q, dt, o{:}, "input", "base acceleration");
%! r = rampwise_response (q, dt, o{:}, "input", "base acceleration");
%! base = cumtrapz (q) * dt;
%! assert (a.input - b.input, base .^ 2 + 2 * r.velocity .* base, 1e-12);
%! assert (a.dissipated, b.dissipated);
%!test # columns
%! e = rampwise_energy ([p, 2*p], dt, o{:}, "input", "base displacement", "frame", "absolute");
%! assert (e.input(:,2), 4 * e.input(:,1));
%!error <Invalid call> rampwise_energy (p)
%!error <'frame' must be one of: relative, absolute> rampwise_energy (p, dt, o{:}, "input", "force", "frame", "fixed")
%!error id=rampwise:impulses rampwise_energy (p, dt, o{:}, "input", "base displacement")
%!error <P.2,2.> rampwise_energy ([1, 2; 3, NaN], dt, o{:}, "input", "force")
%!error id=rampwise:interval rampwise_energy (p, -1, o{:}, "input", "force")
%!error id=rampwise:state rampwise_energy (p, dt, o{:}, "input", "force", "velocity", NaN)
%!error id=rampwise:overflow rampwise_energy (1e200 * p, dt, o{:}, "input", "force")
%!error id=rampwise:argument rampwise_energy ({}, dt, o{:}, "input", "force")
%!error <2 oscillators and 3 columns> rampwise_energy ([p, p, p], dt, "omega", [1, 2], "damping", 0, "input", "force")
