## floor_spectra [PICTURE]: the invented pump hall as a small frame: its modes, floor spectra at two floors, and what the
## instrument cabinet has to bear.
examples = fileparts (fileparts (mfilename ("fullpath")));
shake = dlmread (fullfile (examples, "pump_hall_shake.csv"), ",", 3, 0)(:,2);
dt = 0.005;

spring = [62e6, 48e6, 29e6]; # N/m, of the columns below each storey
stiffness = diag (spring + [spring(2:3), 0]) - diag (spring(2:3), 1) - diag (spring(2:3), -1);
frame = rampwise_structure (diag ([42e3, 38e3, 21e3]), [], stiffness, "damping", 0.04);
m = rampwise_participation (frame);
printf ("mode  frequency   mass taken so far\n");
printf ("%4d%8.3f Hz%12.1f %%\n", [1:3; frame.frequency.'; 100 * m.share.']);

r = rampwise_structure_response (frame, shake, dt, "input", "base acceleration", "rows", [0, 0, 1]);
printf ("largest displacement of the roof: %.3f mm, all modes together\n", 1000 * abs (r.peaks.displacement.largest));
modal = frame.shapes(3,:).' .* m.participation .* rampwise_spectrum (shake, dt, "omega", frame.omega, "damping", 0.04).SD;
printf ("square root of the sum of squares: %.3f mm, from the spectrum of the ground alone\n",
        1000 * rampwise_combine (modal, "root of squares"));

floors = {"rows", [1, 0, 0; 0, 0, 1]};
names = {"on the first floor", "on the roof"};
cabinet = rampwise_floor_spectrum (frame, shake, dt, "frequency", 7.5, "damping", 0.04, floors{:});
cabinets = rampwise_system ("frequency", [7.5, 7.5], "damping", 0.04);
after = rampwise_structure_response (frame, shake, dt, "input", "base acceleration", floors{:}, "equipment", cabinets, ...
                                     "point", [1, 2], "part", "residual").equipment.peaks.total_acceleration;
for i = 1:2
  printf ("cabinet %s: %.3f m/s^2 (the floor: %.3f), after the shake %.3f, its feet stretch by %.3f mm\n", names{i},
          cabinet.SA(i), abs (cabinet.floor.largest(i)), abs (after.largest(i)), 1000 * cabinet.SD(i));
endfor

f = rampwise_floor_spectrum (frame, shake, dt, "period", rampwise_list (0.02, 2, 120), "damping", 0.04, floors{:});
printf ("spectra of the floors' sampled histories are off by up to %.2f %%\n", 100 * max (abs (f.sampled_error(:))));
puts ("Results support, and never replace, the governing code and a licensed engineer's judgement.\n");

h = figure ("visible", "off", "position", [0, 0, 900, 480]);
semilogx (f.period, [squeeze(f.SA), rampwise_spectrum(shake, dt, "period", f.period, "damping", 0.04).SA], "linewidth", 1.5);
hold on
plot (1 / 7.5, squeeze (cabinet.SA), "ko");
xlabel ("natural period of the equipment (s)");
ylabel ("largest total acceleration (m/s^2)");
title ("Light equipment in the pump hall, 4 % damped");
legend (names{:}, "on the ground", "the cabinet");
xlim ([0.02, 2]);
grid on
set (gca (), "gridcolor", [0.85, 0.85, 0.85], "xminorgrid", "off");
if (! isempty (argv ()))
  print (h, argv (){end}, "-dpng", "-r100");
endif
