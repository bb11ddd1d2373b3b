## undamped_modes (CALLER, M, K): shapes of unit modal mass, a column each, and the squares of omega, slowest first; and how
## many of them are slow. A solver's roundings are some eps of the largest omega^2: more than all of the lowest, where
## elements are short or stiffnesses differ much. Rigid bodies are therefore counted by K scaled to a unit diagonal, and
## slow modes found once more.
function [shapes, k, count] = undamped_modes (caller, M, K)
  [R, failed] = chol (M);
  if (failed)
    error ("rampwise:argument", "%s: M must be positive definite", caller);
  endif
  B = R.' \ K / R;
  [V, k] = eig ((B + B.') / 2, "vector");
  [k, order] = sort (k);
  shapes = R \ V(:,order);
  d = sqrt (abs (diag (K)));
  d(d == 0) = 1;
  rigid = rigid_bodies (caller, M, K, d);
  count = max (columns (rigid), sum (k <= 1e-6 * max (k))); # of the others roundings are 1e-9 or so
  slow = 1:count;
  [~, ~, V] = svd (rigid.' * M * shapes(:,slow));
  [elastic, lowest] = inverse_iteration (caller, M, K, rigid, d, shapes(:,slow) * V(:,columns (rigid)+1:end));
  shapes(:,slow) = [rigid, elastic];
  shapes = unit_mass (caller, M, shapes); # in this order: the slow ones keep their places
  k(slow) = [zeros(columns (rigid), 1); lowest];
endfunction

## The shapes of unit modal mass that K does not resist. Scaling K leaves the signs of eigenvalues (Sylvester's law of
## inertia), and roundings of what stiff springs add to are then some eps of 1.
function X = rigid_bodies (caller, M, K, d)
  K = K ./ (d * d.');
  [V, scaled] = eig (K, "vector");
  zero = 4 * numel (d) * eps;
  if (any (scaled < -zero))
    error ("rampwise:argument", "%s: K must have no negative eigenvalue", caller);
  endif
  R = chol (K + 2 * zero * eye (size (K)));
  X = R \ (R.' \ V(:,scaled <= zero)) ./ d; # once more, without what is left in them of the lowest other
  X = unit_mass (caller, M, X);
endfunction

## The elastic shapes in the space of X, and their squares of omega, by two steps of inverse iteration, where rigid bodies
## stand on springs. Cholesky's errors are some eps of the diagonal, whatever its scale. Refused where the second step, or a
## rounding of every element of K (the root of the sum of its squares), moves an omega^2 by more than 1e-6 of it.
function [X, k] = inverse_iteration (caller, M, K, rigid, d, X)
  k = zeros (0, 1);
  if (isempty (X))
    return;
  endif
  m = M * rigid;
  spring = min ((d .^ 2 ./ diag (M))(diag (K) > 0));
  [R, failed] = chol ((K + spring * (m * m.')) ./ (d * d.'));
  if (failed)
    refuse (caller);
  endif
  for step = 1:2
    Y = (R \ (R.' \ (M * X ./ d))) ./ d;
    H = X.' * M * Y;
    [V, inverse] = eig ((H + H.') / 2, "vector");
    [inverse, order] = sort (inverse, "descend");
    before = k;
    k = 1 ./ inverse;
    X = Y * V(:,order) .* k.';
    X -= rigid * (m.' * X);
    X = unit_mass (caller, M, X);
  endfor
  squares = (d .* X) .^ 2;
  rounding = eps * sqrt (sum (squares .* ((K ./ (d * d.')) .^ 2 * squares), 1)).';
  if (! all (max (abs (k - before), rounding) <= 1e-6 * k))
    refuse (caller);
  endif
endfunction

## The columns of X made of unit modal mass, each apart from those before it.
function X = unit_mass (caller, M, X)
  if (isempty (X))
    return; # of 0 x 0 chol returns no second value
  endif
  [R, failed] = chol (X.' * M * X);
  if (failed)
    refuse (caller);
  endif
  X = X / R;
endfunction

function refuse (caller)
  error ("rampwise:stiffness", ["%s: the slowest modes are lost in the roundings of K: condense it, or soften its " ...
                                "stiffest spring"], caller);
endfunction
