## -*- texinfo -*-
## @deftypefn {} {@var{s} =} rampwise_energy_spectrum (@var{p}, @var{dt}, "period", @var{T}, "damping", @var{zeta})
## Energies per unit mass of oscillators, at rest at the first sample, under the record @var{p}, samples @var{dt} apart.
##
## @var{p} and the oscillators are as in @code{rampwise_spectrum}, "input" too, but no mass is rigid; "frame" is as in
## @code{rampwise_energy}.
##
## @var{s} is a struct of @code{period}, @code{frequency}, @code{omega}, @code{damping}; arrays @code{input},
## @code{kinetic}, @code{strain} and @code{dissipated}, the energies at the last sample, and @code{greatest_input}, the
## greatest input energy at any sample, of a row each period, a column each damping ratio, and a page each channel;
## @code{equivalent_velocity}, @code{sqrt (2 * greatest_input)}; and @code{provenance}.
##
## Results support, and never replace, the governing code and a licensed engineer's judgement.
## @seealso{rampwise_energy, rampwise_spectrum}
## @end deftypefn

function s = rampwise_energy_spectrum (p, dt, varargin)
  if (nargin < 2)
    print_usage ();
  endif
  caller = "rampwise_energy_spectrum";
  defaults = rmfield (describe (), {"mass", "system", "between"});
  defaults.damping = 0.05;
  defaults.input = "base acceleration";
  defaults.frame = "relative";
  options = parse (caller, defaults, varargin);
  p = samples (caller, p);
  dt = scalar (caller, "DT", dt);
  s = grid_of (caller, options);
  options.between = "ramp";
  input = kinds (caller, options);
  [omega, zeta] = ndgrid (s.omega, s.damping);
  last = zeros ([4, size(omega), columns(p)]);
  s.greatest_input = zeros ([size(omega), columns(p)]);
  for j = 1:columns (p)
    [status, fault, x, greatest] = __rampwise__ ("energy_spectrum", dt, p(:,j), input, frame (caller, options), omega, zeta);
    if (status <= -60)
      fault += (j - 1) * rows (p);
    else
      fault = mod (fault - 1, rows (omega)) + 1;
    endif
    check (caller, status, fault, size (p));
    last(:,:,:,j) = reshape (x, [4, size(omega)]);
    s.greatest_input(:,:,j) = reshape (greatest, size (omega));
  endfor
  names = {"input", "kinetic", "strain", "dissipated"};
  for i = 1:4
    s.(names{i}) = reshape (last(i,:,:,:), [size(omega), columns(p)]);
  endfor
  s.equivalent_velocity = sqrt (2 * s.greatest_input);
  s.provenance = provenance ();
endfunction

%!shared p, dt
%! dt = 0.02; t = (0:150).' * dt; p = sin (7 * t) .* t .* exp (-t);
%!test # the energies of the histories
%! s = rampwise_energy_spectrum ([p, -2*p], dt, "omega", [2; 5; 9], "damping", [0.02, 0.1], "frame", "absolute");
%! assert (size (s.strain), [3, 2, 2]);
%! e = rampwise_energy (-2 * p, dt, "omega", 5, "damping", 0.1, "input", "base acceleration", "frame", "absolute");
%! for f = {"input", "kinetic", "strain", "dissipated"}
%!   assert (s.(f{1})(2,2,2), e.(f{1})(end), 1e-12 * max (abs (e.input)));
%! endfor
%! assert (s.greatest_input(2,2,2), max (e.input), -1e-12);
%! assert (s.equivalent_velocity .^ 2, 2 * s.greatest_input, -4 * eps);
%!error <Invalid call> rampwise_energy_spectrum (p)
%!error <P.2,2.> rampwise_energy_spectrum ([1, 2; 3, NaN], dt, "period", 1)
%!error <natural frequency or period.2.> rampwise_energy_spectrum (p, dt, "omega", [1, -1], "damping", [0, 0.1])
%!error id=rampwise:frequency rampwise_energy_spectrum (p, dt, "period", 0)
%!error id=rampwise:interval rampwise_energy_spectrum (p, NaN, "period", 1)
%!error id=rampwise:impulses rampwise_energy_spectrum (p, dt, "period", 1, "input", "base displacement")
%!error <'frame' must be one of> rampwise_energy_spectrum (p, dt, "period", 1, "frame", 1)
%!error id=rampwise:argument rampwise_energy_spectrum (sparse (p), dt, "period", 1)
