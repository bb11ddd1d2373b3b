## -*- texinfo -*-
## @deftypefn  {} {@var{s} =} rampwise_spectrum (@var{p}, @var{dt}, "period", @var{T}, "damping", @var{zeta})
## @deftypefnx {} {@var{s} =} rampwise_spectrum (@var{p}, @var{dt}, "frequency", @var{f}, "damping", @var{zeta}, @dots{})
## The response spectrum of the record @var{p}, samples @var{dt} apart: the largest responses of oscillators at rest
## at the first sample, true between the samples too.
##
## @var{p} is a vector, or a matrix of a column each channel. Exactly one of "period", "frequency" and "omega" is
## given, a vector, and "damping", the damping ratios, 0.05 unless given. Results are arrays of a row each period, a
## column each damping ratio, and a page each channel. Period 0, or an infinite frequency, is the rigid mass that goes
## with its base.
##
## Further options:
##
## @table @asis
## @item "input"
## "base acceleration" (default), "base velocity", "base displacement", or "force" on a mass of 1.
## @item "between"
## "ramp" (default): a straight line from sample to sample. "hold": constant until the next sample.
## @item "part"
## "primary" (default): from the first to the last sample. "residual": the free motion after it. "maximax": both.
## @item "at_samples"
## true: look at the samples only. Default: false.
## @item "evidence"
## true: estimate, beside, what the sampling of the record has cost. For straight lines between the samples, and not for
## base displacement. Default: false.
## @end table
##
## @var{s} is a struct:
##
## @table @asis
## @item @code{period}, @code{frequency}, @code{omega}, @code{damping}
## the oscillators: columns, and a row;
## @item @code{SD}, @code{SV}, @code{SA}
## the largest displacement and velocity of the mass against its base, and its largest total acceleration, which is
## against a fixed frame; in size;
## @item @code{PSV}, @code{PSA}
## pseudo-velocity omega SD and pseudo-acceleration omega^2 SD, in size; of a rigid mass 0, and SA;
## @item @code{displacement}, @code{velocity}, @code{total_acceleration}
## structs of what lies behind SD, SV and SA: @code{high} and @code{low}, the greatest and the least value;
## @code{sign}, on which side the larger is, 1 or -1 (0 where nothing moves); and the instants @code{time} of the larger,
## @code{high_time} and @code{low_time}, counted from the first sample, infinite for a limit that is never reached;
## @item @code{evidence}, if wanted
## a struct of @code{SD}, @code{SV} and @code{SA}, structs of @code{error}, the estimated error of the larger value, with
## its sign; @code{corrected}, the larger value less that, in size; and @code{share}, the size of the error over that of
## the value. Likewise @code{displacement}, @code{velocity} and @code{total_acceleration} have @code{error_high} and
## @code{error_low} then. And @code{abrupt_start} and @code{abrupt_end}, true for each channel whose record begins or ends
## abruptly: at the start, estimates are worth nothing, at the end those of the last samples and of residuals. Estimates
## hold for loads that are smooth between their samples, and not for loads of straight lines;
## @item @code{provenance}
## the library, and the edition of its arithmetic.
## @end table
##
## Results support, and never replace, the governing code and a licensed engineer's judgement.
## @seealso{rampwise_fourway, rampwise_list, rampwise_response}
## @end deftypefn

function s = rampwise_spectrum (p, dt, varargin)
  if (nargin < 2)
    print_usage ();
  endif
  caller = "rampwise_spectrum";
  options = parse (caller, defaults (), varargin);
  p = samples (caller, p);
  dt = scalar (caller, "DT", dt);
  [s, way, value, zeta] = grid_of (caller, options);
  [input, between] = kinds (caller, options);
  part = part_number (caller, options.part);
  at_samples = truth (caller, "at_samples", options.at_samples) * constant ("AT_SAMPLES");
  evidence = truth (caller, "evidence", options.evidence);

  rigid = isinf (s.omega) & s.omega > 0;
  six = zeros (6, numel (value), numel (zeta), 3, columns (p));
  three = zeros (3, numel (value), numel (zeta), 3, columns (p));
  if (any (rigid))
    if (between != constant ("RAMP"))
      error ("rampwise:option", "%s: a rigid mass needs option 'between' to be 'ramp'", caller);
    endif
    [status, fault, x, e] = __rampwise__ ("rigid_peaks", dt, input, p, part + at_samples, evidence + 0);
    check (caller, status, fault, size (p));
    spread = @(x) reshape (x, [], 1, 1, 3, columns (p)) .* ones (1, sum (rigid), numel (zeta));
    six(:,rigid,:,:,:) = spread (x);
    if (evidence)
      three(:,rigid,:,:,:) = spread (e);
    endif
  endif
  if (! all (rigid))
    [v, z] = ndgrid (value(! rigid), zeta);
    [status, fault, made] = __rampwise__ ("system", way, v, z);
    check (caller, status, mod (fault - 1, rows (v)) + 1);
    run = at_samples + evidence * constant ("EVIDENCE");
    [status, fault, x, e] = __rampwise__ ("peaks", made, dt, input, between, p, run, part);
    check (caller, status, fault, size (p));
    six(:,! rigid,:,:,:) = reshape (x, 6, sum (! rigid), numel (zeta), 3, columns (p));
    if (evidence)
      three(:,! rigid,:,:,:) = reshape (e, 3, sum (! rigid), numel (zeta), 3, columns (p));
    endif
  endif
  s = results (s, six, rigid);
  if (evidence)
    s = with_evidence (s, six, three);
  endif
  s.provenance = provenance ();
endfunction

function options = defaults ()
  options = rmfield (describe (), {"mass", "system"});
  options.damping = 0.05;
  options.input = "base acceleration";
  options.part = "primary";
  options.at_samples = false;
  options.evidence = false;
endfunction

## SIX is {larger, its time, high, its time, low, its time} x periods x dampings x quantities x channels.
function s = results (s, six, rigid)
  quantities = {"displacement", "SD"; "velocity", "SV"; "total_acceleration", "SA"};
  for q = 1:3
    [s.(quantities{q,1}), s.(quantities{q,2})] = peak_pages (reshape (six(:,:,:,q,:), size (six)([1, 2, 3, 5:end])));
  endfor
  s.PSV = s.omega .* s.SD;
  s.PSA = s.omega .* s.PSV;
  s.PSV(rigid,:,:) = 0;
  s.PSA(rigid,:,:) = s.SA(rigid,:,:);
endfunction

## THREE is {error of high, of low, abrupt} beside SIX.
function s = with_evidence (s, six, three)
  pick = @(of, k, q) reshape (of(k,:,:,q,:), size (of)([2, 3, 5:end]));
  quantities = {"displacement", "SD"; "velocity", "SV"; "total_acceleration", "SA"};
  for q = 1:3
    [high, low, larger] = deal (pick (three, 1, q), pick (three, 2, q), pick (six, 1, q));
    s.(quantities{q,1}).error_high = high;
    s.(quantities{q,1}).error_low = low;
    e = high;
    from_low = larger != pick (six, 3, q);
    e(from_low) = low(from_low);
    share = abs (e) ./ abs (larger);
    share(e == 0) = 0;
    s.evidence.(quantities{q,2}) = struct ("error", e, "corrected", abs (larger - e), "share", share);
  endfor
  abrupt = reshape (three(3,1,1,1,:), 1, []);
  s.evidence.abrupt_start = bitand (abrupt, constant ("ABRUPT_START")) != 0;
  s.evidence.abrupt_end = bitand (abrupt, constant ("ABRUPT_END")) != 0;
endfunction

%!demo
%! ## The spectrum of a floor that swings ten times at 2 Hz, for three damping ratios
%! dt = 0.005;
%! floor = 1.5 * sin (2 * pi * 2 * (0:dt:5).');
%! s = rampwise_spectrum (floor, dt, "period", rampwise_list (0.02, 4, 200), "damping", [0.02, 0.05, 0.2]);
%! loglog (s.period, s.PSA);
%! xlabel ("natural period (s)"); ylabel ("pseudo-acceleration (m/s^2)"); legend ("2 %", "5 %", "20 %");

%!shared p, dt
%! dt = 0.02; t = (0:150).' * dt; p = sin (7 * t) .* t .* exp (-t) + 0.3 * cos (31 * t);
%!test # a step force on an undamped mass: twice the static displacement after half a period
%! s = rampwise_spectrum (ones (151, 1), 0.01, "period", [1.6; 2], "damping", 0, "input", "force");
%! assert (s.SD, 2 ./ s.omega .^ 2, 1e-12);
%! assert (s.displacement.time, s.period / 2, 1e-6); # flat at the peak: half the digits
%! assert (s.displacement.sign, [1; 1]);
%!test # half-sine base pulse shorter than the period: the residual spectrum, in closed form
%! n = 4000; h = 1 / n; pulse = sin (pi * (0:n).' * h);
%! s = rampwise_spectrum (pulse, h, "period", [3; 5], "damping", 0, "part", "residual");
%! b = s.period / 2; # a_g = sin (pi t) for 1: SD w^2 = 2 b cos (pi / 2 / b) / (b^2 - 1) with b = T / 2
%! exact = abs (2 * b .* cos (pi ./ (2 * b)) ./ (1 - b .^ 2));
%! assert (s.PSA, exact, 1e-6); # the chord of a sine over h is short by (pi h)^2 / 8
%!test # at samples: the largest of the histories, bit for bit
%! s = rampwise_spectrum (p, dt, "frequency", [0.5, 3], "damping", [0.02, 0.3], "at_samples", true);
%! for j = 1:2
%!   r = rampwise_response (p, dt, "frequency", [0.5, 3], "damping", s.damping(j), "input", "base acceleration");
%!   assert (s.SD(:,j), max (abs (r.displacement)).');
%!   assert (s.SV(:,j), max (abs (r.velocity)).');
%!   assert (s.SA(:,j), max (abs (r.total_acceleration)).');
%!   assert (s.displacement.high(:,j), max (r.displacement).');
%!   assert (s.total_acceleration.low(:,j), min (r.total_acceleration).');
%! endfor
%!test # true peaks: those of a record refined 64 times, from below
%! fine = interp1 ((0:150).', p, (0:150*64).' / 64);
%! s = rampwise_spectrum (p, dt, "period", [0.1, 0.7], "damping", 0.05);
%! f = rampwise_spectrum (fine, dt / 64, "period", [0.1, 0.7], "damping", 0.05, "at_samples", true);
%! assert (all (f.SD <= s.SD * (1 + 1e-12)));
%! assert (f.SD, s.SD, -2e-5); # (w h / 64)^2 / 8 = 5e-6 for the shorter period
%! assert (s.SD .* s.omega .^ 2, s.PSA, -4 * eps);
%! assert (abs (s.displacement.time - f.displacement.time) <= dt / 64);
%!test # pages, rows and columns
%! s = rampwise_spectrum ([p, -2*p], dt, "omega", [1, 2, 3], "damping", [0.01, 0.05]);
%! assert (size (s.SA), [3, 2, 2]);
%! assert (s.SV(:,:,2), 2 * s.SV(:,:,1));
%! assert (s.displacement.sign(:,:,2), -s.displacement.sign(:,:,1));
%! q = rampwise_spectrum (p, dt, "omega", 3, "damping", 0.05);
%! assert (s.SD(3,2,1), q.SD);
%!test # the rigid mass
%! s = rampwise_spectrum (p, dt, "period", [0, 1], "damping", 0.05);
%! assert ([s.SD(1), s.SV(1), s.PSV(1)], [0, 0, 0]);
%! assert ([s.SA(1), s.PSA(1)], max (abs (p)) * [1, 1]);
%! assert (rampwise_spectrum (p, dt, "frequency", Inf, "damping", [0.01, 0.05]).SA, max (abs (p)) * [1, 1]);
%!test # an undamped mass swings on for ever; both times are the larger of the two
%! o = {"period", [0.3, 1.7], "damping", 0.02};
%! a = rampwise_spectrum (p, dt, o{:}); b = rampwise_spectrum (p, dt, o{:}, "part", "residual");
%! c = rampwise_spectrum (p, dt, o{:}, "part", "maximax");
%! assert (c.SD, max (a.SD, b.SD));
%! assert (all (b.displacement.time >= 150 * dt - 1e-12));
%!test # evidence: a smooth load sampled coarsely; the true spectrum is that of samples 32 times as close
%! t = (0:200).' / 200; f = (0:200*32).' / (200*32);
%! load = @(t) sin (pi * t) .^ 8 .* (cos (2 * pi * 20 * t) + sin (2 * pi * 9 * t)); # Hann-like ends, 10 samples a cycle
%! o = {"period", [0.08; 0.3], "damping", [0.02, 0.1], "evidence", true};
%! s = rampwise_spectrum (load (t), 1/200, o{:});
%! x = rampwise_spectrum (load (f), 1/200/32, o{1:4});
%! assert (! any ([s.evidence.abrupt_start, s.evidence.abrupt_end]));
%! wrong = abs (s.SD - x.SD);
%! assert (all (abs (s.evidence.SD.corrected - x.SD) < 0.2 * wrong)); # the header's fifth (rampwise/evidence.h)
%! assert (s.evidence.SD.share, abs (s.evidence.SD.error) ./ s.SD, eps);
%! e = s.displacement;
%! assert (s.evidence.SD.error, merge (e.sign .* s.SD == e.high, e.error_high, e.error_low));
%! q = rampwise_spectrum (load (t), 1/200, o{1:4});
%! assert (q.SD, s.SD);
%! assert (! isfield (q, "evidence"));
%!test # channels of evidence; abrupt ends; the rigid mass
%! s = rampwise_spectrum ([p, flipud(p), sin(pi*(0:150).'/150).^4], dt, "period", [0, 1], "evidence", true);
%! assert (s.evidence.abrupt_start, [true, true, false]);
%! assert (s.evidence.abrupt_end(3), false);
%! assert (size (s.evidence.SA.error), [2, 1, 3]);
%! assert (squeeze (s.evidence.SD.share(1,1,:)), zeros (3, 1));
%!error id=rampwise:input rampwise_spectrum (p, dt, "period", 1, "input", "base displacement", "evidence", true)
%!error id=rampwise:between rampwise_spectrum (p, dt, "period", 1, "between", "hold", "evidence", true)
%!error <'evidence' must be true or false> rampwise_spectrum (p, dt, "period", 1, "evidence", "yes")
%!error <Invalid call> rampwise_spectrum (1)
%!error <exactly one of> rampwise_spectrum (1, 1, "damping", 0.05)
%!assert (rampwise_spectrum (p, dt, "period", 1).damping, 0.05)
%!error <per cent> rampwise_spectrum (1, 1, "period", 1, "damping", 5)
%!error <rampwise_spectrum: P.3.: A sample> rampwise_spectrum ([1; 2; NaN], 1, "period", 1, "damping", 0.05)
%!error <P.2,2.> rampwise_spectrum ([1, 2; 1, Inf], 1, "period", 1, "damping", 0.05)
%!error <P.2,2.> rampwise_spectrum ([1, 2; 1, Inf], 1, "period", 0, "damping", 0.05)
%!error <natural frequency or period.2.> rampwise_spectrum (1, 1, "period", [1, -1], "damping", [0.01, 0.02])
%!error id=rampwise:damper rampwise_spectrum (1, 1, "period", 0, "damping", NaN)
%!error id=rampwise:interval rampwise_spectrum (1, 0, "period", 1, "damping", 0.05)
%!error id=rampwise:interval rampwise_spectrum (1, 0, "period", 0, "damping", 0.05)
%!error id=rampwise:frequency rampwise_spectrum (1, 1, "period", 0, "damping", 0.05, "input", "base displacement")
%!error <needs option 'between'> rampwise_spectrum (1, 1, "period", 0, "damping", 0.05, "between", "hold")
%!error <'part' must be one of> rampwise_spectrum (1, 1, "period", 1, "damping", 0.05, "part", "all")
%!error <no option 'mass'> rampwise_spectrum (1, 1, "period", 1, "damping", 0.05, "mass", 2)
