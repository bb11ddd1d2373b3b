## -*- texinfo -*-
## @deftypefn {} {@var{c} =} rampwise_coefficients (@var{dt}, @dots{})
## The coefficients of one step of length @var{dt}:
##
## @example
## u1 = A  u0 + B  v0 + C  p0 + D  p1
## v1 = Ap u0 + Bp v0 + Cp p0 + Dp p1
## @end example
##
## The system is described by options, as in @code{rampwise_system} or by option "system", and what it is fed with by
## "input" and "between", as in @code{rampwise_response}.
##
## @var{c} is a struct of columns of one row each oscillator: @code{A}, @code{B}, @code{C}, @code{D}, @code{Ap},
## @code{Bp}, @code{Cp}, @code{Dp}, and with the digits that @code{A} and @code{Bp} have no room for when the step is
## short, @code{A_minus_1} and @code{Bp_minus_1}. @code{acceleration} and @code{total_acceleration} are u'' and the
## acceleration against a fixed frame as rows of factors of u, v, p, and the change of p over the last step.
## @seealso{rampwise_system, rampwise_response}
## @end deftypefn

function c = rampwise_coefficients (dt, varargin)
  if (nargin < 1)
    print_usage ();
  endif
  caller = "rampwise_coefficients";
  options = parse (caller, describe (), varargin);
  [input, between] = kinds (caller, options);
  [status, fault, x] = __rampwise__ ("coefficients", systems (caller, options), scalar (caller, "DT", dt), input, between);
  check (caller, status, fault);
  x = x.';
  names = {"A", "B", "C", "D", "Ap", "Bp", "Cp", "Dp", "A_minus_1", "Bp_minus_1"};
  c = cell2struct (mat2cell (x(:,1:10), rows (x), ones (1, 10)), names, 2);
  c.acceleration = x(:,11:14);
  c.total_acceleration = x(:,15:18);
endfunction

%!test # a free mass under a force: u = v h + p h^2/2, exactly
%! s = struct ("mass", 1, "damper", 0, "stiffness", 0);
%! c = rampwise_coefficients (0.5, "system", s, "input", "force", "between", "hold");
%! assert ([c.A, c.B, c.C, c.D, c.Ap, c.Bp, c.Cp, c.Dp], [1, 0.5, 0.125, 0, 0, 1, 0.5, 0]);
%! assert (c.acceleration, [0, 0, 1, 0]);
%!test # undamped: A = cos w h, B = sin (w h) / w
%! c = rampwise_coefficients (0.1, "omega", 3, "damping", 0, "input", "base acceleration");
%! assert ([c.A, c.B, c.Ap], [cos(0.3), sin(0.3)/3, -3*sin(0.3)], 4 * eps);
%! assert (c.A_minus_1, -2 * sin (0.15)^2, 4 * eps (0.1));
%!test # many at once, a row each
%! c = rampwise_coefficients (0.1, "period", [1, 2, 3], "damping", 0.05, "input", "force");
%! assert (size (c.A), [3, 1]);
%! assert (size (c.total_acceleration), [3, 4]);
%! d = rampwise_coefficients (0.1, "period", 2, "damping", 0.05, "input", "force");
%! assert (c.Dp(2), d.Dp);
%!error <Invalid call> rampwise_coefficients ()
%!error id=rampwise:interval rampwise_coefficients (0, "period", 1, "damping", 0.05, "input", "force")
%!error <rampwise_coefficients: DT must be a scalar> rampwise_coefficients ([1, 2], "period", 1, "damping", 0.05, "input", "force")
%!error id=rampwise:impulses rampwise_coefficients (1, "period", 1, "damping", 0.05, "input", "base velocity", "between", "hold")
%!error <'input' is needed> rampwise_coefficients (1, "period", 1, "damping", 0.05)
%!error <'input' must be one of> rampwise_coefficients (1, "period", 1, "damping", 0.05, "input", "ramp")
%!error id=rampwise:mass rampwise_coefficients (1, "system", struct ("mass", 0, "damper", 0, "stiffness", 1), "input", "force")
%!error id=rampwise:step_length rampwise_coefficients (1e20, "period", 1, "damping", 0.05, "input", "force")
%!error <either 'system' or> rampwise_coefficients (1, "system", struct ("mass", 1, "damper", 0, "stiffness", 1), "period", 1, "input", "force")
%!error id=rampwise:argument rampwise_coefficients (1, "system", struct ("mass", 1), "input", "force")
%!error id=rampwise:argument rampwise_coefficients (1, "system", 7, "input", "force")
