## -*- texinfo -*-
## @deftypefn  {} {@var{b} =} rampwise_structure (@var{M}, @var{C}, @var{K})
## @deftypefnx {} {@var{b} =} rampwise_structure (@var{M}, @var{C}, @var{K}, "damping", @var{zeta})
## @deftypefnx {} {@var{b} =} rampwise_structure (@var{M}, @var{C}, @var{K}, "rayleigh", [@var{f1}, @var{zeta1}; @var{f2}, @var{zeta2}])
## The modes of the structure @code{M u'' + C u' + K u = forces}, for @code{rampwise_structure_response}.
##
## @var{M}, @var{C} and @var{K} are symmetric, @var{M} positive definite, @var{K} without negative eigenvalues. As many modes
## are rigid bodies as K, scaled to ones on its diagonal, has eigenvalues within 4 n eps of 0, of n masses. Where a rounding
## of K moves an @code{omega^2} by more than 1e-6 of it, that is refused: condense the structure, or soften its stiffest
## spring. The damping is the matrix @var{C}; one of the following, where that is empty; or both, added:
##
## @table @asis
## @item "damping"
## damping ratios of the modes, one for all or one each, slowest first; rigid-body modes have none;
## @item "rayleigh"
## @code{a M + b K} with damping ratios @var{zeta1} and @var{zeta2} at the frequencies @var{f1} and @var{f2}, in
## cycles. A negative @code{a} or @code{b} is refused.
## @end table
##
## Modes are those without damping. A mode that the damping ties to no other one is an ordinary oscillator; where all are,
## damping is classical. The others go by the complex pairs of roots and shapes that they have together. What ties is an
## element of the modal damping matrix @code{shapes' C shapes}, off its diagonal. It is 0 within 32 n eps of the largest;
## among modes of omega^2 below 1e-6 of the largest, of @code{abs (shapes)' abs (C) abs (shapes)}.
##
## Where two of the roots coincide without a shape of their own each, as in critical damping, responses are refused: move a
## damper by 1e-7 of it. Within 1e-6 of where they coincide responses lose digits.
##
## @var{b} is a struct of columns, slowest mode first, @code{omega}, @code{frequency}, @code{period} and @code{damping} (that
## of the diagonal, NaN for a rigid-body mode, which has omega 0); @code{shapes}, a column each, of modal mass 1; @code{roots},
## of the damped structure; @code{classical}, true or false; and @code{provenance} and what the package needs.
##
## Results support, and never replace, the governing code and a licensed engineer's judgement.
## @seealso{rampwise_structure_response, rampwise_participation, rampwise_floor_spectrum, rampwise_live_structure,
## rampwise_combine}
## @end deftypefn

function b = rampwise_structure (M, C, K, varargin)
  if (nargin < 3)
    print_usage ();
  endif
  caller = "rampwise_structure";
  options = parse (caller, struct ("damping", [], "rayleigh", []), varargin);
  M = symmetric (caller, "M", M, rows (M));
  K = symmetric (caller, "K", K, rows (M));
  given = ! [isempty(options.damping), isempty(options.rayleigh)];
  if (all (given) || (! any (given) && isempty (C)))
    error ("rampwise:option", "%s: give C, 'damping' or 'rayleigh', or C and one of the two", caller);
  endif
  [shapes, k, slow] = undamped_modes (caller, M, K);
  D = zeros (rows (M));
  if (given(1))
    D = diag (2 * ratios (caller, options.damping, k) .* sqrt (k));
  elseif (given(2))
    ab = rayleigh (caller, options.rayleigh);
    D = diag (ab(1) + ab(2) * k);
  endif
  if (! isempty (C))
    [shapes, D] = add_dampers (shapes, k, slow, symmetric (caller, "C", C, rows (M)), D);
  endif
  coupled = any (D != 0 & ! eye (rows (D)), 2);
  omega = sqrt (k);
  zeta = diag (D) ./ (2 * omega);
  zeta(k == 0) = NaN;
  [roots, root_shapes] = roots_of (k(coupled), D(coupled,coupled));
  alone = arrayfun (@(d, k) quadratic (d, k), diag (D)(! coupled), k(! coupled), "UniformOutput", false);
  b = struct ("omega", omega, "frequency", omega / (2 * pi), "period", 2 * pi ./ omega, "damping", zeta, "shapes", shapes,
              "roots", [roots; vertcat(alone{:})], "classical", ! any (coupled), "provenance", provenance (),
              "mass", M, "modal_damper", D, "modal_stiffness", k, "coupled", coupled, "coupled_roots", roots,
              "coupled_shapes", root_shapes);
endfunction

function A = symmetric (caller, name, A, n)
  A = numbers (caller, name, A);
  if (isempty (A) || any (size (A) != n))
    error ("rampwise:argument", "%s: M, C and K must be square and of one size", caller);
  endif
  if (! all (isfinite (A(:))) || any (any (abs (A - A.') > 1e-12 * max (abs (A(:))))))
    error ("rampwise:argument", "%s: %s must be finite and symmetric", caller, name);
  endif
  A = (A + A.') / 2;
endfunction

## The modal damping matrix D with C added, 0 where roundings may have left what it is; and shapes of coinciding
## frequencies, which are free to turn, turned to what it does not tie. Slow modes bring no more roundings than C
## has where they move.
function [shapes, D] = add_dampers (shapes, k, slow, C, D)
  n = numel (k);
  D += shapes.' * C * shapes;
  D = (D + D.') / 2;
  groups = cumsum ([1; diff(k) > min(32 * n * eps * max (k), 1e-9 * k(2:end))]);
  for group = 1:groups(end)
    g = groups == group;
    if (sum (g) > 1)
      [V, own] = eig (D(g,g));
      shapes(:,g) = shapes(:,g) * V;
      D(g,:) = V.' * D(g,:);
      D(:,g) = D(:,g) * V;
      D(g,g) = own;
    endif
  endfor
  lost = max (abs (D(:))) * ones (n);
  X = abs (shapes(:,1:slow));
  lost(1:slow,1:slow) = X.' * abs (C) * X;
  D = (D + D.') / 2;
  D(abs (D) <= 32 * n * eps * lost) = 0;
endfunction

function z = ratios (caller, z, k)
  z = numbers (caller, "option 'damping'", z)(:);
  if (! all (isfinite (z)) || any (z < 0) || ! any (numel (z) == [1, numel(k)]))
    error ("rampwise:option", "%s: option 'damping' must be ratios, 0 or more, one for all modes or one for each", caller);
  endif
  if (any (z > 2))
    error ("rampwise:damping", "%s: damping ratio %g is above 2: is it in per cent?", caller, max (z));
  endif
endfunction

## a and b of zeta = a / (2 omega) + b omega / 2, at two frequencies.
function ab = rayleigh (caller, x)
  x = numbers (caller, "option 'rayleigh'", x);
  if (! size_equal (x, eye (2)) || ! all (isfinite (x(:))) || any (x(:,1) <= 0) || x(1,1) == x(2,1))
    error ("rampwise:option", "%s: option 'rayleigh' must be [f1, zeta1; f2, zeta2] with two frequencies", caller);
  endif
  w = 2 * pi * x(:,1);
  ab = [1 ./ (2 * w), w / 2] \ x(:,2);
  if (any (ab < 0))
    error ("rampwise:option", "%s: option 'rayleigh' makes negative damping at other frequencies", caller);
  endif
endfunction

function [roots, shapes] = roots_of (k, D)
  n = numel (k);
  [V, roots] = eig ([zeros(n), eye(n); -diag(k), -D], "vector");
  shapes = V(1:n,:);
endfunction

function r = quadratic (d, k)
  s = sqrt (complex (d ^ 2 - 4 * k));
  r = [-d - s; -d + s] / 2;
endfunction

%!shared M, K
%! M = diag ([2, 2, 1]); k = 600; K = k * [2, -1, 0; -1, 2, -1; 0, -1, 1];
%!test # a uniform shear building with half a mass on top: omega^2 = 2 k/m (1 - cos ((2 j - 1) pi / 2 n))
%! b = rampwise_structure (M, [], K, "damping", [0.02, 0.05, 0.1]);
%! assert (b.omega .^ 2, 600 * (1 - cos ([1; 3; 5] * pi / 6)), 1e-11);
%! assert (b.damping, [0.02; 0.05; 0.1], 1e-14);
%! assert (b.shapes.' * M * b.shapes, eye (3), 1e-14);
%! assert (b.classical);
%! assert (sort (abs (b.roots)), sort ([b.omega; b.omega]), 1e-12);
%!test # Rayleigh: the two ratios at the two frequencies, and the matrix by hand
%! f = rampwise_structure (M, [], K, "damping", 0).frequency;
%! b = rampwise_structure (M, [], K, "rayleigh", [f(1), 0.03; f(3), 0.05]);
%! assert (b.damping([1, 3]), [0.03; 0.05], 1e-13);
%! w = 2 * pi * f([1, 3]); ab = 2 * [1 ./ w, w] \ [0.03; 0.05];
%! c = rampwise_structure (M, 4 * ab(1) * M + 4 * ab(2) * K, K);
%! assert (c.classical);
%! assert (c.damping, b.damping, 1e-13);
%!test # roots of any damping are those of det (root^2 M + root C + K)
%! C = 3 * [2, -1, 0; -1, 1, 0; 0, 0, 0];
%! b = rampwise_structure (M, C, K);
%! assert (! b.classical);
%! assert (numel (b.roots), 6);
%! for r = b.roots.'
%!   s = svd (r ^ 2 * M + r * C + K);
%!   assert (s(end) < 1e-12 * s(1));
%! endfor
%!test # frequencies that coincide: shapes that the damping does not tie exist
%! b = rampwise_structure (eye (2), [3, 1; 1, 3], 100 * eye (2));
%! assert (b.classical);
%! assert (sort (b.damping), [0.1; 0.2], 1e-14);
%!test # rigid bodies stay
%! b = rampwise_structure (eye (2), [1, -1; -1, 1], 9 * [1, -1; -1, 1]);
%! assert (b.omega, [0; sqrt(18)], 1e-14);
%! assert (isnan (b.damping), [true; false]);
%!function [M, K] = beam (n)
%!  ## n elements of cubic shapes, length 1, bending stiffness 1, mass 1: deflection and slope of each node.
%!  l = 1 / n; [M, K] = deal (zeros (2 * n + 2));
%!  k = [12, 6*l, -12, 6*l; 6*l, 4*l^2, -6*l, 2*l^2; -12, -6*l, 12, -6*l; 6*l, 2*l^2, -6*l, 4*l^2] / l^3;
%!  m = [156, 22*l, 54, -13*l; 22*l, 4*l^2, 13*l, -3*l^2; 54, 13*l, 156, -22*l; -13*l, -3*l^2, -22*l, 4*l^2] * l / 420;
%!  for i = 1:2:2 * n
%!    K(i:i+3,i:i+3) += k; M(i:i+3,i:i+3) += m;
%!  endfor
%!endfunction
%!test # beams, free and clamped at one end: sqrt (omega) are the zeros of cosh x cos x = 1 and -1. Elements of length l are
%! # too stiff by (x l)^4/720 of omega^2; 1e-6 is what roundings may move
%! for n = [4, 50, 200]
%!   [A, S] = beam (n);
%!   x = fzero (@(x) cos (x) - 1 / cosh (x), [4.5, 5]); y = fzero (@(x) cos (x) + 1 / cosh (x), [1.5, 2]);
%!   b = rampwise_structure (A, [], S, "damping", 0.02);
%!   assert (sum (b.omega == 0), 2);
%!   assert (b.omega(3), x ^ 2, -(x / n) ^ 4 / 300 - 1e-6);
%!   assert (b.shapes.' * A * b.shapes, eye (2 * n + 2), 1e-12);
%!   b = rampwise_structure (A(3:end,3:end), [], S(3:end,3:end), "damping", 0.02);
%!   assert (b.omega(1), y ^ 2, -(y / n) ^ 4 / 300 - 1e-6);
%! endfor
%!test # a chain on a support by a stiff spring: omega^2 = 2 k/m (1 - cos ((2 j - 1) pi / (2 n - 1))) where that is rigid
%! n = 20; S = 100 * (2 * eye (n) - diag (ones (n - 1, 1), 1) - diag (ones (n - 1, 1), -1)); S(end,end) = 100; S(1,1) += 1e16;
%! b = rampwise_structure (eye (n), [], S, "damping", 0.02);
%! assert (b.omega(1:n-1) .^ 2, 200 * (1 - cos ((1:2:2*n-3).' * pi / (2 * n - 1))), -1e-12);
%!test # dampers beside modal damping: those of the sum, by hand; and by "rayleigh"
%! C = zeros (3); C(1,1) = 5; z = [0.02; 0.05; 0.1];
%! x = rampwise_structure (M, [], K, "damping", z);
%! sum_of = rampwise_structure (M, C + M * x.shapes * diag (2 * z .* x.omega) * x.shapes.' * M, K);
%! b = rampwise_structure (M, C, K, "damping", z);
%! assert (! b.classical);
%! assert (cplxpair (b.roots), cplxpair (sum_of.roots), 1e-12);
%! assert (b.damping, sum_of.damping, 1e-14);
%! x = rampwise_structure (M, 0.3 * M + 0.002 * K, K); w = x.omega(1:2);
%! b = rampwise_structure (M, C, K, "rayleigh", [w / (2 * pi), x.damping(1:2)]);
%! assert (cplxpair (b.roots), cplxpair (rampwise_structure (M, C + 0.3 * M + 0.002 * K, K).roots), 1e-11);
%!test # dashpots of soft modes stay beside a stiff spring: roots are those of the two masses that it leaves free, to 1/stiff
%! for stiff = [1e8, 3e9, 1e12, 1e16]
%!   for c = [0, 0.01]
%!     S = [2, -1, 0; -1, 2, -1; 0, -1, 1 + stiff]; C = c * S; C(1,1) += 0.5;
%!     b = rampwise_structure (eye (3), C, S);
%!     assert (b.coupled, [true; true; false]);
%!     x = rampwise_structure (eye (2), C(1:2,1:2), S(1:2,1:2)).roots;
%!     assert (cplxpair (b.coupled_roots, 1e-12), cplxpair (x, 1e-12), 4 / stiff + 1e-14);
%!   endfor
%! endfor
%!test # but damping by K alone is classical, of fine meshes and of rigid bodies, which it leaves undamped
%! [A, S] = beam (100);
%! b = rampwise_structure (A, 1e-6 * S, S);
%! assert (b.classical);
%! assert (diag (b.modal_damper)(1:2), [0; 0]);
%! assert (b.damping(3:end), b.omega(3:end) * 5e-7, -1e-6);
%! F = [50, -50, 0; -50, 120, -70; 0, -70, 70];
%! assert (rampwise_structure (diag ([1.3, 1.7, 1.1]), 0.01 * F, F).modal_damper(1,1), 0);
%!test # what is left between two springs of 1e10 and one of 1 is known to 1e-6 only
%! fail ('rampwise_structure (eye (2), [], [1e10 + 1, -1e10; -1e10, 1e10], "damping", 0)', "soften its stiffest spring");
%! b = rampwise_structure (eye (2), [], [1e8 + 1, -1e8; -1e8, 1e8], "damping", 0);
%! assert (b.omega(1) ^ 2, 0.5, 1e-7);
%!error <Invalid call> rampwise_structure (M, M)
%!error <or C and one of the two> rampwise_structure (M, [], K, "damping", 0.1, "rayleigh", [1, 0.1; 2, 0.1])
%!error <or C and one of the two> rampwise_structure (M, [], K)
%!error <M must be positive definite> rampwise_structure (-M, [], K, "damping", 0)
%!error <no negative eigenvalue> rampwise_structure (M, [], -K, "damping", 0)
%!error <K must be finite and symmetric> rampwise_structure (M, [], K + [0, 1, 0; 0, 0, 0; 0, 0, 0], "damping", 0)
%!error <C must be finite and symmetric> rampwise_structure (M, NaN (3), K)
%!error <of one size> rampwise_structure (M, [], eye (2), "damping", 0)
%!error <of one size> rampwise_structure (ones (2, 3), [], eye (2), "damping", 0)
%!error id=rampwise:argument rampwise_structure ({}, [], K, "damping", 0)
%!error <ratios, 0 or more> rampwise_structure (M, [], K, "damping", [0.1, 0.2])
%!error <ratios, 0 or more> rampwise_structure (M, [], K, "damping", NaN)
%!error <per cent> rampwise_structure (M, [], K, "damping", 5)
%!error <must be .f1, zeta1> rampwise_structure (M, [], K, "rayleigh", [1, 2])
%!error <negative damping> rampwise_structure (M, [], K, "rayleigh", [1, 0.05; 2, 0.01])
