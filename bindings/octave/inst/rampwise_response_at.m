## -*- texinfo -*-
## @deftypefn {} {@var{r} =} rampwise_response_at (@var{t}, @var{p}, @dots{})
## The exact response of oscillators to the samples @var{p} at the times @var{t}, which may be any distance apart.
##
## @var{t} is a vector of as many times, strictly increasing, as @var{p} has rows. All else, options included, is as in
## @code{rampwise_response}, but the start is "at once" or "settled", and single samples are taken as doubles, which is
## exact. Steps as long as the median interval of @var{t} are the quickest.
##
## @code{time} of @var{r} is @var{t} as a column.
## @seealso{rampwise_response}
## @end deftypefn

function r = rampwise_response_at (t, p, varargin)
  if (nargin < 2)
    print_usage ();
  endif
  caller = "rampwise_response_at";
  options = parse (caller, whole (), varargin);
  t = numbers (caller, "T", t)(:);
  p = samples (caller, p);
  if (numel (t) != rows (p))
    error ("rampwise:argument", "%s: %d times T for %d rows of P", caller, numel (t), rows (p));
  endif
  if (strcmpi (options.start, "ramp"))
    error ("rampwise:option", "%s: a start by a ramp needs a sample before the first: put it into T and P", caller);
  endif
  r = respond (caller, t, p, usual_interval (t), options);
endfunction

## The coefficients for it are at hand first. Where there is none, or it is refused with its sample: any.
function dt = usual_interval (t)
  dt = median (diff (t));
  if (isempty (t) || ! isfinite (dt) || dt <= 0)
    dt = 1;
  endif
endfunction

%!shared o
%! o = {"omega", 3, "damping", 0.05, "input", "base acceleration"};
%!test # the bits of regular samples
%! p = cos ((0:50).'); t = (0:50).' / 8;
%! a = rampwise_response_at (t, p, o{:}); b = rampwise_response (p, 1/8, o{:});
%! assert (a, b);
%!test # a straight line needs no samples on it: leaving some out changes nothing but rounding
%! t = (0:0.125:20).'; p = interp1 ([0, 5, 12, 20], [0, 3, -2, 1], t);
%! keep = any (t == [0, 1, 1.5, 4, 5, 7.125, 12, 13, 19.875, 20], 2);
%! a = rampwise_response_at (t(keep), p(keep), o{:}); b = rampwise_response (p, 0.125, o{:});
%! assert (a.displacement, b.displacement(keep), 200 * eps); # 160 steps of values below 1
%! assert (a.time, t(keep));
%!test # velocities against a base at irregular times are over the intervals they are
%! p = [0; 3; 1; 1; 5]; t = [0; 0.1; 0.3; 0.4; 0.9];
%! r = rampwise_response_at (t, p, "omega", 3, "damping", 0.1, "input", "base displacement", ...
%!                           "outputs", {"velocity", "relative velocity"});
%! assert (r.relative_velocity, r.velocity - [0; diff(p) ./ diff(t)], 1e-13);
%!error <Invalid call> rampwise_response_at (1)
%!error <3 times T for 2 rows> rampwise_response_at ([1; 2; 3], [1; 2], o{:})
%!error <rampwise_response_at: T.3.: A time is not finite, or not later> rampwise_response_at ([1; 2; 2], [1; 2; 3], o{:})
%!error id=rampwise:time rampwise_response_at ([1; 1], [1; 2], o{:})
%!error <P.3.> rampwise_response_at ([1; 2; 3], [1; 2; NaN], o{:})
%!error <P.1.> rampwise_response_at ([1; 2; 3], [NaN; 2; 3], o{:})
%!error <put it into T and P> rampwise_response_at ([1; 2], [1; 2], o{:}, "start", "ramp")
