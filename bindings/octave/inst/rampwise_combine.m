## -*- texinfo -*-
## @deftypefn {} {@var{x} =} rampwise_combine (@var{peaks}, @var{rule}, @dots{})
## What the sum of modes reaches, roughly, where of each only the peak is known: a column of @var{peaks} is a response
## quantity, a row a mode, with signs: shape times participation factor times spectral value. @var{x} is a row.
##
## @table @asis
## @item "absolute sum"
## Never exceeded.
## @item "root of squares"
## The square root of the sum of squares (SRSS), for frequencies well apart.
## @item "complete quadratic"
## The complete quadratic combination (CQC) with options "omega" and "damping", a value each mode, "damping" perhaps one for
## all. (A. Der Kiureghian, Earthquake Engineering and Structural Dynamics 9(5), 419-435, 1981.)
## @item "share"
## Of directions: the largest in size and the option "share" times the sum of the others. The code that governs says which
## share.
## @end table
##
## The true peak of a record's response is in @code{rampwise_structure_response}.
## @seealso{rampwise_structure, rampwise_spectrum}
## @end deftypefn

function x = rampwise_combine (peaks, rule, varargin)
  if (nargin < 2)
    print_usage ();
  endif
  caller = "rampwise_combine";
  rules = {"absolute sum", "root of squares", "complete quadratic", "share"};
  which = choice (caller, "rule", rule, rules);
  options = parse (caller, struct ("omega", [], "damping", [], "share", []), varargin);
  peaks = numbers (caller, "PEAKS", peaks);
  if (isrow (peaks))
    peaks = peaks(:);
  endif
  n = rows (peaks);
  [omega, zeta, share] = deal (zeros (n, 1), zeros (n, 1), 0);
  given = ! cellfun (@isempty, {options.omega, options.damping, options.share});
  wanted = [which == 3, which == 3, which == 4];
  if (any (given != wanted))
    error ("rampwise:option", "%s: 'omega' and 'damping' go with the complete quadratic, 'share' with share", caller);
  endif
  if (which == 3)
    omega = numbers (caller, "option 'omega'", options.omega)(:);
    zeta = numbers (caller, "option 'damping'", options.damping)(:);
    if (numel (omega) != n || ! any (numel (zeta) == [1, n]) || any (! ([omega; zeta] >= 0)))
      error ("rampwise:option", "%s: 'omega' and 'damping' must be 0 or more, one for each of %d modes", caller, n);
    endif
    zeta = zeta .* ones (n, 1);
  elseif (which == 4)
    share = scalar (caller, "option 'share'", options.share);
  endif
  x = zeros (1, columns (peaks));
  for j = 1:columns (peaks)
    x(j) = __rampwise__ ("combine", rules{which}, peaks(:,j), omega, zeta, share);
  endfor
endfunction

%!assert (rampwise_combine ([3; -4], "absolute sum"), 7)
%!assert (rampwise_combine ([3, 5; -4, 12], "root of squares"), [5, 13], 1e-15)
%!assert (rampwise_combine ([3; -4; 1], "share", "share", 0.3), 5.2, 1e-15)
%!test # equal modes add up, modes far apart add squares; in between the formula
%! assert (rampwise_combine ([3; 4], "complete quadratic", "omega", [2; 2], "damping", 0.05), 7, 1e-14);
%! assert (rampwise_combine ([3; 4], "complete quadratic", "omega", [1e-6; 2], "damping", 0.05), 5, 1e-6);
%! r = 1.2; z = 0.05; rho = 8 * z^2 * (1 + r) * r^1.5 / ((1 - r^2)^2 + 4 * z^2 * r * (1 + r)^2); # equal damping
%! assert (rampwise_combine ([3; -4], "complete quadratic", "omega", [1; r], "damping", z), sqrt (25 - 24 * rho), 1e-14);
%!error <Invalid call> rampwise_combine (1)
%!error <'rule' must be one of> rampwise_combine (1, "sum")
%!error id=rampwise:argument rampwise_combine ({}, "share", "share", 1)
%!error <go with the complete quadratic> rampwise_combine ([1; 2], "complete quadratic")
%!error <go with the complete quadratic> rampwise_combine ([1; 2], "absolute sum", "share", 1)
%!error <must be 0 or more> rampwise_combine ([1; 2], "complete quadratic", "omega", [1; NaN], "damping", 0.1)
%!error <must be 0 or more> rampwise_combine ([1; 2], "complete quadratic", "omega", 1, "damping", 0.1)
%!error <must be 0 or more> rampwise_combine ([1; 2], "complete quadratic", "omega", [1; 2], "damping", [0.1, 0.1, 0.1])
