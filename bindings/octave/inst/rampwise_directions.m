## -*- texinfo -*-
## @deftypefn {} {@var{s} =} rampwise_directions (@var{p1}, @var{p2}, @var{dt}, "period", @var{T}, "damping", @var{zeta})
## Response spectra of two components at right angles, over all directions in their plane.
##
## In every direction the two records @var{p1} and @var{p2}, vectors of as many samples, @var{dt} apart, have a largest
## response, which depends on how the sensor happened to be turned. Percentiles of it over the angle do not: 50 is
## the median, 100 the largest over all angles. No angles are tried; values fall short by less than 1e-6 of the largest.
## Source: D. M. Boore, Bulletin of the Seismological Society of America 100(4), 1830-1835, 2010.
##
## Exactly one of "period", "frequency" and "omega" is given, a vector, and "damping", 0.05 unless given. Further options:
##
## @table @asis
## @item "percent"
## Which percentiles, 0 to 100: @code{[50, 100]} unless given.
## @item "input", "at_samples"
## As in @code{rampwise_spectrum}; the records are straight lines between their samples.
## @end table
##
## @var{s} is a struct of @code{period}, @code{frequency}, @code{omega} and @code{damping}; @code{percent}, a column;
## arrays @code{SD}, @code{SV} and @code{SA} of a row each period, a column each damping ratio, and a page each percentile:
## displacement and velocity against the base and total acceleration; @code{PSV} and @code{PSA} of them; and
## @code{provenance}.
##
## Results support, and never replace, the governing code and a licensed engineer's judgement.
## @seealso{rampwise_spectrum, rampwise_percentiles_over_angle}
## @end deftypefn

function s = rampwise_directions (p1, p2, dt, varargin)
  if (nargin < 3)
    print_usage ();
  endif
  caller = "rampwise_directions";
  defaults = rmfield (describe (), {"mass", "system", "between"});
  defaults.damping = 0.05;
  defaults.input = "base acceleration";
  defaults.percent = [50, 100];
  defaults.at_samples = false;
  options = parse (caller, defaults, varargin);
  [p1, p2] = two_histories (caller, p1, p2, "P1 and P2");
  dt = scalar (caller, "DT", dt);
  s = grid_of (caller, options);
  options.between = "ramp";
  input = kinds (caller, options);
  s.percent = numbers (caller, "option 'percent'", options.percent)(:);
  flags = truth (caller, "at_samples", options.at_samples) * constant ("AT_SAMPLES");
  [omega, zeta] = ndgrid (s.omega, s.damping);
  for q = {"SD", "SV", "SA"; "DISPLACEMENT", "VELOCITY", "TOTAL_ACCELERATION"}
    [status, fault, x] = __rampwise__ ("directions", dt, p1, p2, input, omega, zeta, constant (q{2}), flags, s.percent);
    check (caller, status, fault - (fault - 1 - mod (fault - 1, rows (omega))) * (status > -60));
    s.(q{1}) = permute (reshape (x, [numel(s.percent), size(omega)]), [2, 3, 1]);
  endfor
  rigid = isinf (s.omega);
  s.PSV = s.omega .* s.SD;
  s.PSA = s.omega .* s.PSV;
  s.PSV(rigid,:,:) = 0;
  s.PSA(rigid,:,:) = s.SA(rigid,:,:);
  s.provenance = provenance ();
endfunction

%!shared p, q, dt
%! dt = 0.02; t = (0:300).' * dt; p = sin (7 * t) .* t .* exp (-t); q = cos (5 * t) .* t .* exp (-t / 2);
%!test # turned records have the same percentiles
%! c = 0.6; d = 0.8; o = {"period", [0; 0.4; 2], "damping", [0.02, 0.1], "percent", [0, 50, 84, 100]};
%! a = rampwise_directions (p, q, dt, o{:});
%! b = rampwise_directions (c * p - d * q, d * p + c * q, dt, o{:});
%! for f = {"SD", "SV", "SA", "PSA"}
%!   assert (size (a.(f{1})), [3, 2, 4]);
%!   assert (a.(f{1}), b.(f{1}), -1e-5); # either side falls short by 1e-6 of the largest, here below 10 of the least
%! endfor
%!test # the median of many angles, each by its own spectrum
%! s = rampwise_directions (p, q, dt, "period", 0.9, "damping", 0.05, "percent", [0, 50, 100]);
%! phi = (0.5:720) * pi / 720;
%! all = rampwise_spectrum (p * cos (phi) + q * sin (phi), dt, "period", 0.9).SD(:);
%! assert (squeeze (s.SD), [min(all); median(all); max(all)], pi / 1440 * max (all)); # half a step of the angle, slopes up to S
%! assert (s.SD(3), max (all), -1e-5); # flat there: (pi/1440)^2 / 2
%!test # one record: S (phi) = SD |cos phi|, whose percentiles are sin (pi/2 percent)
%! s = rampwise_directions (p, 0 * p, dt, "frequency", 2, "percent", [30, 100]);
%! r = rampwise_spectrum (p, dt, "frequency", 2);
%! assert (squeeze (s.SD), r.SD * [sin(0.15*pi); 1], -2e-6);
%!error <Invalid call> rampwise_directions (p, q)
%!error <P1 and P2 must be vectors of as many> rampwise_directions (p, 1, dt, "period", 1)
%!error <P1 and P2 must be vectors of as many> rampwise_directions ([p, p], [q, q], dt, "period", 1)
%!error id=rampwise:argument rampwise_directions ("text", "text", dt, "period", 1)
%!error id=rampwise:argument rampwise_directions ([], [], dt, "period", 1)
%!error <P.2.> rampwise_directions ([1, NaN], [1, 2], dt, "period", 1)
%!error id=rampwise:percent rampwise_directions (p, q, dt, "period", 1, "percent", 101)
%!error id=rampwise:percent rampwise_directions (p, q, dt, "period", 1, "percent", NaN)
%!error id=rampwise:interval rampwise_directions (p, q, 0, "period", 1)
%!error <natural frequency or period.2.> rampwise_directions (p, q, dt, "omega", [1, -1], "damping", [0, 0.1])
%!error <no option 'between'> rampwise_directions (p, q, dt, "period", 1, "between", "hold")
