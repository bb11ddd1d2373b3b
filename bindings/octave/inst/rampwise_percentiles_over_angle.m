## -*- texinfo -*-
## @deftypefn  {} {@var{value} =} rampwise_percentiles_over_angle (@var{x}, @var{y})
## @deftypefnx {} {@var{value} =} rampwise_percentiles_over_angle (@var{x}, @var{y}, @var{percent})
## Percentiles, over all directions in their plane, of the largest value of two histories at right angles, vectors of as
## many elements: of the largest @code{abs (@var{x} * cos (phi) + @var{y} * sin (phi))} over angles @code{phi}.
##
## @var{percent} is a vector of 0 to 100, @code{[50, 100]} unless given, and @var{value} a column of as many elements. At
## the samples; @code{rampwise_directions} sees responses between them.
## @seealso{rampwise_directions}
## @end deftypefn

function value = rampwise_percentiles_over_angle (x, y, percent = [50, 100])
  if (nargin < 2)
    print_usage ();
  endif
  caller = "rampwise_percentiles_over_angle";
  [x, y] = two_histories (caller, x, y, "X and Y");
  percent = numbers (caller, "PERCENT", percent);
  [status, fault, value] = __rampwise__ ("percentiles_over_angle", x, y, percent);
  check (caller, status, fault);
endfunction

%!test # one point: its distance times |cos|, whose percentiles are sin (pi/2 percent)
%! assert (rampwise_percentiles_over_angle (3, 4, [0, 50, 100]), [0; 5*sqrt(0.5); 5], 1e-14);
%!test # against many angles
%! k = (1:200).'; x = sin (k .^ 1.3); y = 2 * cos (k .^ 1.1);
%! s = max (abs (x * cos ((0.5:3600) * pi / 3600) + y * sin ((0.5:3600) * pi / 3600)));
%! assert (rampwise_percentiles_over_angle (x, y), [median(s); max(s)], pi / 7200 * max (s)); # half a step, slopes up to S
%! assert (rampwise_percentiles_over_angle (x, y, 100), max (hypot (x, y)), 1e-12);
%!error <Invalid call> rampwise_percentiles_over_angle (1)
%!error <X and Y must be vectors> rampwise_percentiles_over_angle (1, [1, 2])
%!error id=rampwise:argument rampwise_percentiles_over_angle ({}, 1)
%!error id=rampwise:sample rampwise_percentiles_over_angle ([1, Inf], [1, 2])
%!error id=rampwise:percent rampwise_percentiles_over_angle (1, 1, -1)
