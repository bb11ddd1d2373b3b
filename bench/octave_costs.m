## What the Octave binding costs beside C: the same four histories of one oscillator; Octave makes new arrays each time.
## And a sample, or a block of them, pushed into a stream of one output. Times are of the processor, the best of seven
## rounds. Called by bench/octave_costs with the C program.
1;

function each = seconds (work, calls)
  each = Inf;
  for round = 1:7
    start = cputime ();
    for i = 1:calls
      work ();
    endfor
    each = min (each, (cputime () - start) / calls);
  endfor
endfunction

program = argv (){end};
stream = rampwise_stream (0.01, "period", 0.7, "damping", 0.05, "input", "force", "outputs", "displacement");
printf ("%9s %11s %11s %8s %10s %14s\n", "samples", "C, s", "Octave, s", "ratio", "more, us", "stream push, s");
for n = [1, 1e3, 1e6]
  calls = max (3, ceil (2000 / n));
  p = mod ((0:n-1).' * 7919, 2000) / 1000 - 1;
  [status, out] = system (sprintf ("%s %d %d", program, n, max (3, ceil (1e6 / n))));
  c = sscanf (out, "%g");
  ours = seconds (@() rampwise_response (p, 0.01, "period", 0.7, "damping", 0.05, "input", "force"), calls);
  push = seconds (@() rampwise_stream_push (stream, p), calls);
  printf ("%9d %11.3e %11.3e %8.3g %10.1f %14.3e\n", n, c, ours, ours / c, 1e6 * (ours - c), push);
endfor
