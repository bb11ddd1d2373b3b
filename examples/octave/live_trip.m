## live_trip [PICTURE]: the synthetic base shake as a sensor in the invented pump hall would send it, in packets, with a
## hole of 20 ms. The pump is to stop when the skid comes within its stops of 25 mm; the program is saved and resumed on
## the way. A trip that protects people needs certified equipment.
examples = fileparts (fileparts (mfilename ("fullpath")));
shake = dlmread (fullfile (examples, "pump_hall_shake.csv"), ",", 3, 0)(:,2);
shake(601:604) = NaN;
dt = 0.005;
stop = 0.025; # m

skid = rampwise_system ("frequency", 2.4, "damping", 0.05, "mass", 1850);
function [stream, trip] = begin (dt, skid, stop)
  stream = rampwise_stream (dt, "system", skid, "input", "base acceleration", "outputs", "displacement");
  trip = rampwise_stream_watch (stream, "displacement", "level", [stop, -stop], "direction", [1, -1], "latch", true);
endfunction

[stream, trip] = begin (dt, skid, stop);
u = [];
for packet = reshape (shake(1:4000), 50, [])
  h = rampwise_stream_push (stream, packet);
  u = [u; h.displacement];
  if (numel (u) == 2000) # the program ends, and another goes on
    bytes = rampwise_stream_save (stream);
    [stream, trip] = begin (dt, skid, stop);
    rampwise_stream_resume (stream, bytes);
  endif
endfor

events = rampwise_stream_events (stream, trip);
now = rampwise_stream_read (stream);
printf ("samples %d, missing %d, bridges %d\n", now.next, now.missing, now.bridges);
since_start = now.watches(trip).since_start;
printf ("tripped at %.4f s; stops passed %d times\n", events(1).time, sum (now.watches(trip).levels.passed));
printf ("greatest %.2f mm at %.4f s, least %.2f mm at %.4f s\n", 1000 * since_start.high, since_start.high_time,
        1000 * since_start.low, since_start.low_time);

f = figure ("visible", "off", "position", [0, 0, 900, 420]);
t = (0:numel (u) - 1) * dt;
plot (t, 1000 * u, "linewidth", 1, t([1, end]), 1000 * stop * [1, 1], "k--", t([1, end]), -1000 * stop * [1, 1], "k--", ...
      [events.time], 1000 * [events.value], "rx");
xlabel ("time (s)");
ylabel ("displacement (mm)");
title ("Pump skid on live data: stops, and the instants they are passed");
legend ("displacement", "stops", "", "passed");
grid on
set (gca (), "gridcolor", [0.85, 0.85, 0.85]);
if (! isempty (argv ()))
  print (f, argv (){end}, "-dpng", "-r100");
endif
