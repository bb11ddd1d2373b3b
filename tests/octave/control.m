## Against Octave's control package: c2d with a first-order hold and lsim, straight lines between samples, and c2d with a
## zero-order hold, held ones. They work with a matrix exponential, nothing of ours. Where the package is not installed
## nothing is checked, and that is said.
1;

## m u'' + c u' + k u = p: displacement, velocity and total acceleration of a force; of a base acceleration with
## p = -m a_g the total acceleration is -(c v + k u)/m.
function plant = plant_of (s, input)
  A = [0, 1; -s.stiffness / s.mass, -s.damper / s.mass];
  if (strcmp (input, "force"))
    plant = ss (A, [0; 1 / s.mass], [eye(2); A(2,:)], [0; 0; 1 / s.mass]);
  else
    plant = ss (A, [0; -1], [eye(2); A(2,:)], [0; 0; 0]);
  endif
endfunction

## The largest difference over the largest value, of displacement, velocity and total acceleration.
function worst = difference (s, input, way, p, dt)
  plant = plant_of (s, input);
  options = {"system", s, "input", input};
  switch (way)
    case "c2d foh" # begins with a ramp from zero
      p(1) = 0;
      y = lsim (c2d (plant, dt, "foh"), p);
    case "c2d zoh"
      options = [options, {"between", "hold"}];
      y = lsim (c2d (plant, dt, "zoh"), p);
    otherwise
      options = [options, {"displacement", 0.3, "velocity", -2}];
      y = lsim (plant, p, (0:numel (p) - 1) * dt, [0.3; -2]);
  endswitch
  r = rampwise_response (p, dt, options{:});
  ours = [r.displacement, r.velocity, r.total_acceleration];
  worst = max (max (abs (ours - y)) ./ max (abs (y)));
endfunction

## A frame of three storeys under forces on two of them, moving at the first sample. It has equipment on its roof, which in
## lsim is two states more that the frame does not feel.
function worst = difference_of_frame (damper, p, dt)
  M = diag ([2, 2, 1]);
  K = 600 * [2, -1, 0; -1, 2, -1; 0, -1, 1];
  C = 0.3 * M + 0.002 * K + diag ([damper, 0, 0]);
  F = [0, 1; 2, 0; 0, -3];
  start = [0.02; -0.01; 0.03; 0.5; 0; -0.7];
  e = rampwise_system ("omega", 9, "damping", 0.05);
  b = rampwise_structure (M, C, K);
  r = rampwise_structure_response (b, p, dt, "input", "force", "on", F, "displacement", start(1:3), "velocity", start(4:6), ...
                                   "equipment", e, "point", 3, "peaks", false);
  A = [zeros(3), eye(3); -M\K, -M\C];
  B = [zeros(3, 2); M\F];
  A = [A, zeros(6, 2); zeros(1, 7), 1; -A(6,:), -e.stiffness, -e.damper];
  B = [B; 0, 0; -B(6,:)];
  y = lsim (ss (A, B, eye (8), zeros (8, 2)), p, (0:rows (p) - 1) * dt, [start; 0; 0]);
  ours = [r.displacement, r.velocity, r.equipment.displacement, r.equipment.velocity];
  worst = max (max (abs (ours - y)) ./ max (abs (y)));
endfunction

if (isempty (pkg ("list", "control")))
  puts ("Octave's control package is not installed: nothing is compared with it.\n");
  puts ("0 passed, 0 failed\n");
  exit (0);
endif
pkg load control

rand ("twister", 20);
dt = 0.05;
n = 400;
[passed, failed, largest] = deal (0, 0, 0);
for input = {"force", "base acceleration"}
  for way = {"c2d foh", "c2d zoh", "lsim"}
    for period = [0.3, 1, 7]
      for zeta = [0, 0.05, 0.7, 1.6]
        s = rampwise_system ("period", period, "damping", zeta, "mass", 3);
        p = 2 * rand (n, 1) - 1;
        worst = difference (s, input{1}, way{1}, p, dt);
        largest = max (largest, worst);
        ## Their matrix exponential is good to some 1e-15 of its norm (w dt up to 1, both rows), and an error of a step
        ## stays in a light oscillator for the other n: n * 10 * eps.
        ok = worst < n * 10 * eps;
        passed += ok;
        failed += ! ok;
        if (! ok)
          printf ("%s, %s, period %g, damping %g: %g\n", input{1}, way{1}, period, zeta, worst);
        endif
      endfor
    endfor
  endfor
endfor
for damper = [0, 5, 500] # classical; complex pairs; real roots too
  worst = difference_of_frame (damper, 2 * rand (n, 2) - 1, dt);
  largest = max (largest, worst);
  ok = worst < n * 10 * eps;
  passed += ok;
  failed += ! ok;
  if (! ok)
    printf ("frame, damper %g: %g\n", damper, worst);
  endif
endfor
printf ("largest difference from Octave's control package: %.2g of the peak\n", largest);
printf ("%d passed, %d failed\n", passed, failed);
exit (failed > 0);
