## first_response [PICTURE]: what the pump skid of the invented pump hall does in the synthetic base shake, as a table of
## the largest values and a picture of the histories.
examples = fileparts (fileparts (mfilename ("fullpath")));
shake = dlmread (fullfile (examples, "pump_hall_shake.csv"), ",", 3, 0);
dt = 0.005;

r = rampwise_response (shake(:,2), dt, "frequency", 2.4, "damping", 0.05, "input", "base acceleration");

[d, i] = max (abs (r.displacement));
[a, j] = max (abs (r.total_acceleration));
printf ("pump skid, 2.4 Hz, 5 %% damped\n");
printf ("largest displacement  %8.2f mm    at %6.3f s\n", 1000 * d, r.time(i));
printf ("largest acceleration  %8.3f m/s^2 at %6.3f s\n", a, r.time(j));

f = figure ("visible", "off", "position", [0, 0, 900, 600]);
subplot (2, 1, 1);
plot (r.time, r.displacement * 1000, "linewidth", 1);
ylabel ("displacement (mm)");
title ("Pump skid, 2.4 Hz, 5 % damped, in a synthetic base shake");
grid on
set (gca (), "gridcolor", [0.85, 0.85, 0.85]);
subplot (2, 1, 2);
plot (r.time, [shake(:,2), r.total_acceleration], "linewidth", 1);
legend ("floor", "pump skid");
xlabel ("time (s)");
ylabel ("acceleration (m/s^2)");
grid on
set (gca (), "gridcolor", [0.85, 0.85, 0.85]);
if (! isempty (argv ()))
  print (f, argv (){end}, "-dpng", "-r100");
endif
