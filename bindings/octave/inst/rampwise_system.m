## -*- texinfo -*-
## @deftypefn  {} {@var{s} =} rampwise_system ("period", @var{T}, "damping", @var{zeta})
## @deftypefnx {} {@var{s} =} rampwise_system ("frequency", @var{f}, "damping", @var{zeta})
## @deftypefnx {} {@var{s} =} rampwise_system ("omega", @var{w}, "damping", @var{zeta})
## @deftypefnx {} {@var{s} =} rampwise_system (@dots{}, "mass", @var{m})
## Spring-mass-damper systems, m u'' + c u' + k u = p, from what is known of them.
##
## Exactly one of natural period, frequency (cycles per unit of time) and circular frequency omega (radians per
## unit of time; 0 is a free mass) is given by name, and the damping ratio: 1 is critical, 0.05 is five per cent.
## A ratio above 2 is refused, as it looks like per cent, unless the option "allow_strong_damping" is true. The mass is
## 1 unless given. Values may be vectors of as many systems, or scalars, which hold for all.
##
## @var{s} is a struct of the rows @code{mass}, @code{damper} and @code{stiffness}, in the caller's units. It may be
## given to every function of the package as option "system", and may be filled by hand: the mass must be above 0,
## the others may be any numbers, zero and negative included.
## @seealso{rampwise_response, rampwise_coefficients}
## @end deftypefn

function s = rampwise_system (varargin)
  if (nargin == 0)
    print_usage ();
  endif
  defaults = rmfield (describe (), {"system", "input", "between"});
  options = parse ("rampwise_system", defaults, varargin);
  options.system = [];
  x = systems ("rampwise_system", options);
  s = struct ("mass", x(1,:), "damper", x(2,:), "stiffness", x(3,:));
endfunction

%!test # omega, zeta, m: c = 2 zeta omega m, k = omega^2 m
%! s = rampwise_system ("omega", [2, 4], "damping", 0.25, "mass", 8);
%! assert (s, struct ("mass", [8, 8], "damper", [8, 16], "stiffness", [32, 128]));
%!test # three names for one system
%! a = rampwise_system ("period", 0.5, "damping", 0.05);
%! b = rampwise_system ("frequency", 2, "damping", 0.05);
%! assert (a, b);
%! assert (a.stiffness, (4 * pi)^2, 4 * eps ((4 * pi)^2));
%!test # names in any case
%! assert (rampwise_system ("Omega", 1, "DAMPING", 0).stiffness, 1);
%!error <Invalid call> rampwise_system ()
%!error <exactly one of> rampwise_system ("damping", 0.05)
%!error <exactly one of> rampwise_system ("period", 1, "omega", 1, "damping", 0.05)
%!error <'damping' is needed> rampwise_system ("period", 1)
%!error <per cent> rampwise_system ("period", 1, "damping", 5)
%!test assert (rampwise_system ("omega", 1, "damping", 5, "allow_strong_damping", true).damper, 10);
%!error id=rampwise:damping rampwise_system ("period", 1, "damping", [0.05, 2.5])
%!error id=rampwise:frequency rampwise_system ("period", [1, 0], "damping", 0.05)
%!error <rampwise_system: natural frequency or period.2.: The frequency is negative> rampwise_system ("period", [1, -1], "damping", 0.05)
%!error id=rampwise:damper rampwise_system ("period", 1, "damping", NaN)
%!error id=rampwise:option rampwise_system ("perod", 1, "damping", 0.05)
%!error <given twice> rampwise_system ("period", 1, "Period", 2, "damping", 0.05)
%!error <pairs> rampwise_system ("period", 1, "damping")
%!error <argument 1 of the pairs> rampwise_system (1, 2)
%!error id=rampwise:argument rampwise_system ("period", "a", "damping", 0.05)
%!error id=rampwise:argument rampwise_system ("period", 1i, "damping", 0.05)
%!error id=rampwise:argument rampwise_system ("period", [1, 2, 3], "damping", [0.01, 0.02])
%!error <'allow_strong_damping' must be true or false> rampwise_system ("period", 1, "damping", 3, "allow_strong_damping", "x")
