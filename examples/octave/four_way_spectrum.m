## four_way_spectrum [PICTURE]: the response spectrum of the synthetic base shake of the invented pump hall: what gear
## of any natural period has to bear.
examples = fileparts (fileparts (mfilename ("fullpath")));
shake = dlmread (fullfile (examples, "pump_hall_shake.csv"), ",", 3, 0);

s = rampwise_spectrum (shake(:,2), 0.005, "period", rampwise_list (0.02, 10, 300), "damping", [0.02, 0.05, 0.2]);

[largest, i] = max (s.PSA);
printf ("damping  largest pseudo-acceleration  at period\n");
printf ("%7g  %21.3f m/s^2  %7.3f s\n", [s.damping; largest; s.period(i).']);

f = figure ("visible", "off", "position", [0, 0, 1100, 560]);
subplot (1, 2, 1);
loglog (s.period, s.PSA, "linewidth", 1.5);
xlabel ("natural period (s)");
ylabel ("pseudo-acceleration (m/s^2)");
legend (arrayfun (@(z) sprintf ("damping %g", z), s.damping, "UniformOutput", false), "location", "southwest");
grid on
set (gca (), "gridcolor", [0.85, 0.85, 0.85]);
subplot (1, 2, 2);
rampwise_fourway (s, {"s", "m", "m/s", "m/s^2"});
if (! isempty (argv ()))
  print (f, argv (){end}, "-dpng", "-r100");
endif
