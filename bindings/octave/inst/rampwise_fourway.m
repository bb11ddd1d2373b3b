## -*- texinfo -*-
## @deftypefn  {} {} rampwise_fourway (@var{s})
## @deftypefnx {} {} rampwise_fourway (@var{s}, @var{units})
## @deftypefnx {} {@var{h} =} rampwise_fourway (@dots{})
## A four-way plot of the response spectrum @var{s} into the present axes: pseudo-velocity over the natural period, both
## logarithmic, where lines of equal displacement fall and lines of equal pseudo-acceleration rise.
##
## A curve is drawn for each damping ratio, of the first channel; a rigid mass is left out. @var{units} is a cell array
## of the units of time, displacement, velocity and acceleration as they are to be written, for example
## @code{@{"s", "m", "m/s", "m/s^2"@}}. @var{h} are the handles of the curves.
## @seealso{rampwise_spectrum}
## @end deftypefn

function h = rampwise_fourway (s, units = {"", "", "", ""})
  if (nargin < 1)
    print_usage ();
  endif
  caller = "rampwise_fourway";
  if (! isstruct (s) || ! isscalar (s) || ! all (isfield (s, {"period", "damping", "PSV"})))
    error ("rampwise:argument", "%s: S must come from rampwise_spectrum", caller);
  endif
  if (! iscellstr (units) || numel (units) != 4)
    error ("rampwise:argument", "%s: UNITS must be a cell array of four strings", caller);
  endif
  shown = s.period > 0 & isfinite (s.period) & all (s.PSV(:,:,1) > 0 & isfinite (s.PSV(:,:,1)), 2);
  if (! any (shown))
    error ("rampwise:argument", "%s: no oscillator of S can be shown on logarithmic axes", caller);
  endif
  T = s.period(shown);
  V = s.PSV(shown,:,1);
  across = decades (T);
  up = decades (V(:));
  ## On axes that the lines were drawn into first, the curves lie over them.
  set (gca (), "xscale", "log", "yscale", "log", "nextplot", "add", "box", "on", "layer", "top",
       "gridcolor", [0.85, 0.85, 0.85], "xlim", across, "ylim", up, "plotboxaspectratio", [diff(log10 (across)), diff(log10 (up)), 1]);
  grid ("on");
  slanted (across, up, 1, units{4});
  slanted (across, up, -1, units{2});
  curves = loglog (T, V, "linewidth", 1.5);
  legend (curves, arrayfun (@(z) sprintf ("damping %g", z), s.damping, "UniformOutput", false), "location",
          "south");
  xlabel (label_of ("natural period", units{1}));
  ylabel (label_of ("pseudo-velocity", units{3}));
  if (nargout > 0)
    h = curves;
  endif
endfunction

## Whole decades around X, one at least.
function limits = decades (x)
  limits = 10 .^ [floor(log10 (min (x))), ceil(log10 (max (x)))];
  if (limits(1) == limits(2))
    limits(2) *= 10;
  endif
endfunction

function text = label_of (what, unit)
  text = what;
  if (! isempty (unit))
    text = sprintf ("%s (%s)", what, unit);
  endif
endfunction

## Lines V = a T / (2 pi) of equal acceleration a (SLOPE 1), or V = 2 pi d / T of equal displacement d (SLOPE -1), for
## every power of ten that meets the axes, each with its value.
function slanted (across, up, slope, unit)
  at = @(value, T) value * (T / (2 * pi)) .^ slope;
  first = up(1) / max (at (1, across));
  last = up(2) / min (at (1, across));
  for value = 10 .^ (ceil (log10 (first)):floor (log10 (last)))
    T = [max(across(1), min ((2 * pi) * (up / value) .^ slope)), min(across(2), max ((2 * pi) * (up / value) .^ slope))];
    line (T, at (value, T), "color", [0.75, 0.75, 0.75], "linestyle", "-", "handlevisibility", "off");
    ## Rising lines are named where they end, falling ones where they begin.
    named = T(1) ^ 0.88 * T(2) ^ 0.12;
    if (slope > 0)
      named = T(1) ^ 0.12 * T(2) ^ 0.88;
    endif
    if (T(2) > 3 * T(1))
      text (named, at (value, named), strtrim (sprintf ("%g %s", value, unit)), "rotation", 45 * slope, "fontsize", 8,
            "color", [0.4, 0.4, 0.4], "horizontalalignment", "center", "verticalalignment", "bottom");
    endif
  endfor
endfunction

%!demo
%! dt = 0.005;
%! floor = 1.5 * sin (2 * pi * 2 * (0:dt:5).');
%! s = rampwise_spectrum (floor, dt, "period", rampwise_list (0.05, 5, 200), "damping", [0.02, 0.05, 0.2]);
%! rampwise_fourway (s, {"s", "m", "m/s", "m/s^2"});

%!test # the curves are the spectrum's, and a line of equal acceleration goes through what has it
%! s = rampwise_spectrum (sin (0:0.1:9), 0.1, "period", [0, 0.5, 1, 2], "damping", [0.05, 0.1]);
%! f = figure ("visible", "off");
%! unwind_protect
%!   h = rampwise_fourway (s, {"s", "m", "m/s", "m/s^2"});
%!   assert (numel (h), 2);
%!   assert (get (h(2), "xdata")(:), [0.5; 1; 2]);
%!   assert (get (h(2), "ydata")(:), s.PSV(2:4,2));
%!   assert (get (gca (), "xscale"), "log");
%!   lines = findall (gca (), "type", "line", "handlevisibility", "off");
%!   slope = arrayfun (@(l) diff (log (get (l, "ydata"))) / diff (log (get (l, "xdata"))), lines);
%!   assert (abs (slope), ones (size (slope)), 1e-9);
%!   rising = lines(slope > 0);
%!   a = arrayfun (@(l) get (l, "ydata")(1) * 2 * pi / get (l, "xdata")(1), rising);
%!   assert (log10 (a), round (log10 (a)), 1e-9);
%! unwind_protect_cleanup
%!   close (f);
%! end_unwind_protect
%!error <Invalid call> rampwise_fourway ()
%!error <must come from> rampwise_fourway (3)
%!error <four strings> rampwise_fourway (struct ("period", 1, "damping", 1, "PSV", 1), {"s"})
%!error <logarithmic axes> rampwise_fourway (struct ("period", 0, "damping", 1, "PSV", 1))
