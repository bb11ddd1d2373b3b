## -*- texinfo -*-
## @deftypefn  {} {@var{s} =} rampwise_floor_spectrum (@var{b}, @var{p}, @var{dt}, "period", @var{T}, "damping", @var{zeta})
## @deftypefnx {} {@var{s} =} rampwise_floor_spectrum (@var{b}, @var{p}, @var{dt}, "frequency", @var{f}, "damping", @var{zeta}, @dots{})
## The largest motions of light equipment on points of the structure @var{b}, of @code{rampwise_structure}, that the record
## @var{p} shakes: exact for the record as it is sampled, @var{dt} apart and straight in between, and true between the
## samples. The structure does not feel the equipment.
##
## Exactly one of "period", "frequency" and "omega" of the equipment is given, a vector, finite and above 0, and "damping",
## its damping ratios, 0.05 unless given. Results are arrays of a row each period, a column each damping ratio, and a page
## each point. Further options:
##
## @table @asis
## @item "rows"
## The points, a row of weights on the masses each: the unit matrix, every mass, unless given.
## @item "input", "on", "modes"
## as in @code{rampwise_structure_response}, but that "input" is "base acceleration" unless given.
## @item "part"
## "primary" (default): from the first to the last sample. "maximax": in the free motion of structure and equipment after it
## too, as in @code{rampwise_live_structure_read}.
## @end table
##
## @var{s} is a struct:
##
## @table @asis
## @item @code{period}, @code{frequency}, @code{omega}, @code{damping}
## the equipment: columns, and a row;
## @item @code{SD}, @code{SA}, @code{PSA}
## its largest displacement against its point and its largest total acceleration, in size; and omega^2 SD;
## @item @code{displacement}, @code{total_acceleration}
## structs of what lies behind SD and SA, as in @code{rampwise_spectrum}; of "maximax" with a field @code{later} as in
## @code{rampwise_live_structure_read};
## @item @code{floor}
## the peaks of the points' own total acceleration, as in @code{rampwise_structure_response};
## @item @code{sampled}
## what the usual way finds, by @code{rampwise_spectrum}: the points' accelerations at the samples taken for straight in
## between, which they are not. It loses @code{1 - (sin (x) / x)^2}, @code{x = pi/N}, in a motion of N samples a
## cycle: 3.2 % of one of ten. For "maximax" it goes over zeros after the record, to the last instant of a peak; where the
## record does not end with a zero, the line down to the first of them is one more difference;
## @item @code{sampled_error}
## by which share SA of the usual way is off, negative where it is too small;
## @item @code{provenance}
## the library, and the edition of its arithmetic.
## @end table
##
## Equipment and modes of more than 2 radians a step cost time: every step is looked into for peaks.
##
## Results support, and never replace, the governing code and a licensed engineer's judgement.
## @seealso{rampwise_structure, rampwise_structure_response, rampwise_spectrum, rampwise_list}
## @end deftypefn

function s = rampwise_floor_spectrum (b, p, dt, varargin)
  if (nargin < 3)
    print_usage ();
  endif
  caller = "rampwise_floor_spectrum";
  options = parse (caller, defaults (), varargin);
  [s, way, value, zeta] = grid_of (caller, options);
  if (! all (s.omega > 0 & isfinite (s.omega)))
    error ("rampwise:frequency", "%s: option '%s' must be finite and above 0: equipment is neither rigid nor free", caller, way);
  endif
  part = part_number (caller, options.part, {"primary", "maximax"});
  live = equipped (caller, b, dt, options, way, value, zeta);
  [h, status, fault] = push_structure (caller, live, p, false);
  n = rows (h.total_acceleration);
  check (caller, status, fault, [n, live.inputs]);
  if (n < 2)
    error ("rampwise:argument", "%s: P must hold two samples or more", caller);
  endif
  [status, fault, ~, ~, ~, of_floor, of_displacement, of_total] = ...
    __rampwise__ ("structure_read", live.object, part, free_steps ());
  check (caller, status, fault);
  pages = @(peaks) reshape (peaks, rows (peaks), numel (value), numel (zeta), live.rows);
  [s.displacement, s.SD] = peak_pages (pages (of_displacement));
  [s.total_acceleration, s.SA] = peak_pages (pages (of_total));
  s.PSA = s.omega .* (s.omega .* s.SD);
  s.floor = peak_rows (of_floor);
  floors = h.total_acceleration;
  if (part != 0)
    floors = [floors; over_zeros(caller, live, last_sample (s, dt) + 1 - n)];
  endif
  s.sampled = rampwise_spectrum (floors, dt, way, value, "damping", zeta, "allow_strong_damping", true);
  s.sampled_error = s.sampled.SA ./ s.SA - 1;
  s.provenance = provenance ();
endfunction

function options = defaults ()
  options = struct ("period", [], "frequency", [], "omega", [], "damping", 0.05, "allow_strong_damping", false, "input",
                    "base acceleration", "on", [], "rows", [], "modes", [], "part", "primary");
endfunction

## The structure with a piece of equipment for each period, damping ratio and point, in this order.
function s = equipped (caller, b, dt, options, way, value, zeta)
  whole = structure_options ();
  for name = {"input", "on", "rows", "modes"}
    whole.(name{1}) = options.(name{1});
  endfor
  points = rows (modes_of (caller, b).mass);
  if (! isempty (options.rows))
    points = rows (options.rows);
  endif
  [v, z, on] = ndgrid (value, zeta, 1:points);
  whole.point = on(:);
  whole.equipment = rampwise_system (way, v(:), "damping", z(:), "allow_strong_damping", true);
  s = make_structure (caller, b, dt, whole, 4);
endfunction

## The first sample that no peak of the equipment comes after, but for those that are never reached.
function last = last_sample (s, dt)
  instants_of = @(peaks) [peaks.high_time(:); peaks.low_time(:)];
  instants = [instants_of(s.displacement); instants_of(s.total_acceleration)];
  last = ceil (max ([0; instants(isfinite (instants))]) / dt);
endfunction

## The floors' accelerations under so many zeros more.
function a = over_zeros (caller, live, count)
  [h, status, fault] = push_structure (caller, live, zeros (max (count, 0), live.inputs), false);
  check (caller, status, fault);
  a = h.total_acceleration;
endfunction

%!demo
%! ## Floor spectra of an invented three-storey rack on a floor that swings six times at 2 Hz
%! M = diag ([2, 2, 1]); K = 3000 * [2, -1, 0; -1, 2, -1; 0, -1, 1];
%! b = rampwise_structure (M, [], K, "damping", 0.03);
%! dt = 0.01; p = 1.5 * sin (2 * pi * 2 * (0:dt:3).');
%! s = rampwise_floor_spectrum (b, p, dt, "period", rampwise_list (0.06, 2, 40), "damping", 0.05);
%! semilogx (s.period, squeeze (s.SA)); xlabel ("natural period (s)"); ylabel ("total acceleration (m/s^2)");
%! legend ("1st", "2nd", "3rd");

%!shared b, p, dt, o
%! M = diag ([2, 2, 1]); K = 600 * [2, -1, 0; -1, 2, -1; 0, -1, 1]; b = rampwise_structure (M, 0.3 * M + 0.002 * K, K);
%! dt = 0.04; p = sin ((0:200).' .^ 1.2) + 0.5; o = {"period", [0.3; 0.8], "damping", [0.02, 0.1, 0.5]};
%!test # pages, columns and rows: those of single pieces, bit for bit
%! f = rampwise_floor_spectrum (b, p, dt, o{:}, "rows", [0, 1, 0; 0, 0, 1]);
%! assert (size (f.SA), [2, 3, 2]);
%! e = rampwise_system ("period", 0.8, "damping", 0.1);
%! r = rampwise_structure_response (b, p, dt, "input", "base acceleration", "equipment", e, "point", 3);
%! x = r.equipment.peaks;
%! assert ([f.SD(2,2,2), f.SA(2,2,2)], abs ([x.displacement.largest, x.total_acceleration.largest]));
%! assert ([f.displacement.high(2,2,2), f.displacement.high_time(2,2,2)], [x.displacement.high, x.displacement.high_time]);
%! assert ([f.total_acceleration.low(2,2,2), f.total_acceleration.sign(2,2,2)], ...
%!         [x.total_acceleration.low, sign(x.total_acceleration.largest)]);
%! assert (f.PSA, (2 * pi ./ f.period) .^ 2 .* f.SD, -1e-14);
%! assert (f.floor.high, r.peaks.total_acceleration.high(2:3));
%! assert (f.sampled.SA(2,2,2), rampwise_spectrum (r.total_acceleration(:,3), dt, "period", 0.8, "damping", 0.1).SA);
%! assert (f.sampled_error, (f.sampled.SA - f.SA) ./ f.SA, 1e-14);
%!test # the usual way on samples 32 times as close comes to it; at the record's own it is off
%! q = p(1:61); fine = interp1 ((0:60).', q, (0:60*32).' / 32);
%! f = rampwise_floor_spectrum (b, q, dt, o{:});
%! x = rampwise_floor_spectrum (b, fine, dt / 32, o{:});
%! assert (x.SA, f.SA, -1e-10);
%! assert (max (abs (x.sampled_error(:))) < 5e-4); # 1 - sinc^2 = x^2/3, x = w dt / 64 = 0.02 for the fastest mode, w = 33
%! assert (max (abs (f.sampled_error(:))) > 0.01);
%!test # a floor that swings freely at N samples a cycle: sinc^2 (1/N) of it, in tuned equipment
%! for N = [4, 10, 20]
%!   b1 = rampwise_structure (1, 0, (2 * pi / N) ^ 2); q = [1; zeros(60 * N, 1)];
%!   f = rampwise_floor_spectrum (b1, q, 1, "period", N, "damping", 0.001);
%!   assert (f.sampled_error, (sin (pi / N) / (pi / N)) ^ 2 - 1, 2e-4);
%! endfor
%!test # forces, fewer modes
%! f = rampwise_floor_spectrum (b, [p, cos(p)], dt, "omega", 7, "input", "force", "on", [0, 1; 2, 0; 0, -3], "modes", 2, "rows", [0, 0, 1]);
%! r = rampwise_structure_response (b, [p, cos(p)], dt, "input", "force", "on", [0, 1; 2, 0; 0, -3], "modes", 2, ...
%!                                  "equipment", rampwise_system ("omega", 7, "damping", 0.05), "point", 3);
%! assert (f.SA, abs (r.equipment.peaks.total_acceleration.largest));
%!test # maximax: those of pieces in a list, bit for bit
%! q = [p(1:61); 0]; g = {"rows", [0, 0, 1], "part", "maximax"};
%! f = rampwise_floor_spectrum (b, q, dt, o{:}, g{:}); first = rampwise_floor_spectrum (b, q, dt, o{:}, g{1:2});
%! e = rampwise_system ("period", [0.3, 0.8, 0.3, 0.8, 0.3, 0.8], "damping", [0.02, 0.02, 0.1, 0.1, 0.5, 0.5]);
%! x = rampwise_structure_response (b, q, dt, "input", "base acceleration", "equipment", e, "point", 3, "part", "maximax");
%! for name = {"displacement", "total_acceleration"}
%!   for field = {"high", "low", "time", "later"}
%!     assert (f.(name{1}).(field{1})(:).', x.equipment.peaks.(name{1}).(field{1}));
%!   endfor
%! endfor
%! assert (f.floor.high, x.peaks.total_acceleration.high(3));
%! assert (all (f.SA(:) >= first.SA(:)));
%! assert (! isfield (first.displacement, "later"));
%!test # a floor that swings on for ever: tuned equipment comes to the steady state, sqrt (1 + 4 zeta^2) / (2 zeta) of it, the usual way too
%! f = rampwise_floor_spectrum (rampwise_structure (1, 0, (2 * pi / 10) ^ 2), [0; 1; 0], 1, "period", 10, "damping", 0.02, "part", "maximax");
%! assert (f.SA, f.floor.high * sqrt (1 + 4 * 0.02 ^ 2) / (2 * 0.02), -1e-10);
%! assert (f.sampled_error, (sin (pi / 10) / (pi / 10)) ^ 2 - 1, 2e-4);
%! assert (f.SA <= f.total_acceleration.later * (1 + 1e-11));
%!error <'part' must be one of: primary, maximax> rampwise_floor_spectrum (b, p, dt, o{:}, "part", "residual")
%!error <Invalid call> rampwise_floor_spectrum (b, p)
%!error <B must come from> rampwise_floor_spectrum (1, p, dt, o{:})
%!error <exactly one of> rampwise_floor_spectrum (b, p, dt)
%!error <per cent> rampwise_floor_spectrum (b, p, dt, "period", 1, "damping", 5)
%!error <'period' must be finite and above 0> rampwise_floor_spectrum (b, p, dt, "period", [1, 0])
%!error <'frequency' must be finite and above 0> rampwise_floor_spectrum (b, p, dt, "frequency", [0, 1])
%!error <P.2.> rampwise_floor_spectrum (b, [1; Inf], dt, o{:})
%!error <P must hold two samples> rampwise_floor_spectrum (b, [], dt, o{:})
%!error <P must hold two samples> rampwise_floor_spectrum (b, 1, dt, o{:})
%!error <no option 'between'> rampwise_floor_spectrum (b, p, dt, o{:}, "between", "hold")
%!error <'rows' must have 3 columns> rampwise_floor_spectrum (b, p, dt, o{:}, "rows", [1, 1])
%!error id=rampwise:interval rampwise_floor_spectrum (b, p, NaN, o{:})
