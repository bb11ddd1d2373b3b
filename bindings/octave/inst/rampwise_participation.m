## -*- texinfo -*-
## @deftypefn  {} {@var{m} =} rampwise_participation (@var{b})
## @deftypefnx {} {@var{m} =} rampwise_participation (@var{b}, @var{r})
## How the modes of the structure @var{b}, of @code{rampwise_structure}, take part when its base moves, and how many are
## needed.
##
## @var{r} is a column each direction: what the base's motion displaces rigidly, ones unless given. @var{m} is a struct of
## matrices of a row each mode, slowest first, and a column each direction: @code{participation}, the factors
## @code{shape' M r} of shapes of modal mass 1; @code{effective_mass}; and @code{share}, of the whole mass
## @code{r' M r}, that the modes up to this one take. Codes ask for 0.9 as a rule; the one that governs says. What the others
## carry can be given back by "static_correction" of @code{rampwise_structure_response}.
##
## @example
## @group
## m = rampwise_participation (b);
## r = rampwise_structure_response (b, p, dt, "input", "base acceleration", @dots{}
##                                  "modes", find (m.share > 0.9, 1), "static_correction", true);
## @end group
## @end example
## @seealso{rampwise_structure, rampwise_structure_response}
## @end deftypefn

function m = rampwise_participation (b, r = [])
  if (nargin < 1)
    print_usage ();
  endif
  caller = "rampwise_participation";
  b = modes_of (caller, b);
  r = numbers (caller, "R", r);
  if (isempty (r))
    r = ones (rows (b.mass), 1);
  endif
  if (rows (r) != rows (b.mass) || ! all (isfinite (r(:))))
    error ("rampwise:argument", "%s: R must have %d rows of finite numbers", caller, rows (b.mass));
  endif
  factors = b.shapes.' * b.mass * r;
  systems = [ones(1, numel (b.omega)); zeros(1, numel (b.omega)); b.modal_stiffness.'];
  dt = 1 / max ([b.omega; realmin]); # any that makes coefficients
  [status, fault, share] = __rampwise__ ("mass_share", systems, dt, constant ("FORCE"), constant ("RAMP"), factors.', ...
                                         sum (r .* (b.mass * r), 1));
  if (status == -30)
    error ("rampwise:mass", "%s: R: a direction moves no mass", caller);
  endif
  check (caller, status, fault);
  m = struct ("participation", factors, "effective_mass", factors .^ 2, "share", share.');
endfunction

%!test # two storeys by hand: shapes (1, 2) and (1, -1) of masses 2 and 1: (2 + 2)^2 / 6 and 1^2 / 3 of 3
%! b = rampwise_structure (diag ([2, 1]), [], [3, -1; -1, 1], "damping", 0.05);
%! m = rampwise_participation (b);
%! assert (m.effective_mass, [8; 1] / 3, 1e-14);
%! assert (abs (m.participation), sqrt ([8; 1] / 3), 1e-14);
%! assert (m.share, [8; 9] / 9, 1e-14);
%!test # directions; rigid bodies; damping that is no matter of modes
%! b = rampwise_structure (eye (3), [1, 0, 0; 0, 0, 0; 0, 0, 0], [1, -1, 0; -1, 2, -1; 0, -1, 1]);
%! m = rampwise_participation (b, [1, 0; 1, 3; 1, 0]);
%! assert (m.share(:,1), [1; 1; 1], 1e-14);
%! assert (m.share(:,2), [1; 1; 3] / 3, 1e-14); # shapes (1, 1, 1), (1, 0, -1) and (1, -2, 1): 1/3, 0, 2/3 of the middle one
%!error <Invalid call> rampwise_participation ()
%!error <B must come from> rampwise_participation (eye (3))
%!error <R must have 1 rows> rampwise_participation (rampwise_structure (1, 0, 1), [1; 1])
%!error <R must have 1 rows> rampwise_participation (rampwise_structure (1, 0, 1), NaN)
%!error <R: a direction moves no mass> rampwise_participation (rampwise_structure (1, 0, 1), [1, 0])
