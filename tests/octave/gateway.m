## The gateway bears anything: good arguments with some replaced by nonsense answer or refuse, and Octave goes on.
## Every command is tried; random cases print their seed, RAMPWISE_SEED repeats it.
1;

function c = good_calls (bank, single_bank, stream, structure)
  s = [1; 0.1; 9];
  p = sin (1:7).';
  force = 11;
  ramp = 21;
  c = {{"bank_count", bank}, {"bank_make", [s, s], 0.1, force, ramp}, {"bank_read", bank}, {"bank_retune", bank, 1, s, 0.1, force, ramp}, ...
       {"bank_run", bank, p, [2, 1], ones(1, 4)}, {"bank_set", bank, ones(4, 2)}, {"bank_start", bank, 1}, ...
       {"bank_count_f32", single_bank}, {"bank_make_f32", [s, s], 0.1, force, ramp}, {"bank_read_f32", single_bank}, ...
       {"bank_retune_f32", single_bank, 1, s, 0.1, force, ramp}, {"bank_run_f32", single_bank, single(p), [2, 1], ones(1, 4)}, ...
       {"bank_set_f32", single_bank, ones(6, 2, "single")}, {"bank_start_f32", single_bank, 1}, ...
       {"coefficients", [s, s], 0.1, force, ramp}, {"directions", 0.1, p, p + 1, force, [1, 2], [0, 0.1], 31, 0, [50; 100]}, ...
       {"energies", [s, s], 0.1, force, ramp, 71, [0, 1], [1, 0], p}, {"energy_spectrum", 0.1, p, force, 72, [1, 2], [0, 0.1]}, {"constant", "RAMPWISE_RAMP"}, {"combine", "complete quadratic", p, p, p, 0.3}, ...
       {"structure_make", [s, s], 0.1, force, ramp, ones(1, 2), ones(3, 2), ones(3, 2), ones(3, 2), ones(3, 1), 1, [s, s, s], [1, 3, 2], [0, 1], [2, 0]}, ...
       {"structure_run", structure, [p, p].', 1}, {"structure_read", structure, 4, 1000}, {"structure_save", structure}, {"structure_start", structure}, ...
       {"structure_resume", structure, saved_bytes("structure_save", structure)}, {"mass_share", [s, s], 0.1, force, ramp, ones(2, 2), [3, 4]}, ...
       {"static_correction", [s, s], 0.1, force, ramp, ones(1, 2), ones(3, 2), ones(3, 1)}, ...
       {"roots_to_modes", 1, 2, [-1, -1; 3, -3], [1, 1; 0, 0], 1, 1, 0}, {"list_log", 1, 2, 5}, ...
       {"list_octaves", 1, 9, 3}, {"objects"}, {"peaks", [s, s], 0.1, force, ramp, [p, p], 0, 4}, {"percentiles_over_angle", p, p + 1, [0, 50]}, ...
       {"response", s, 0.1, force, ramp, 0, [1, 2], [1, 2], [p, p], ones(1, 8), []}, ...
       {"response", [s, s], 0.1, force, ramp, 2, [0, 0], [0, 0], p, [0, 1, 0, 1, 0, 0, 1, 0], (1:7).^2}, ...
       {"response_f32", s, 0.1, force, ramp, 2, [0, 0], [0, 0], single([p, p]), ones(1, 8), []}, ...
       {"rigid_peaks", 0.1, force, p, 0, 1}, {"status_text", -10}, ...
       {"stream_make", s, 0.1, force, ramp, 61, 65, 68, 10, 1, [-Inf, Inf], [31, 38; 0, 1; 0, 2; 0, 3; 0, 4], [1, 0, 9]}, {"stream_put", stream, p, []}, {"stream_put", stream, int32(p), []}, {"stream_retune", stream, s, 0.1, force, ramp}, ...
       {"stream_put", stream, p, int64(1:7) + intmax("int64") - 8}, {"stream_read", stream}, {"stream_save", stream}, ...
       {"stream_resume", stream, saved_bytes("stream_save", stream)}, {"stream_skip", stream, 3}, {"stream_start", stream, [1, 2, 3, 4], 9}, ...
       {"stream_watch", stream, [31; 0; 0; 0; 0], [1; 0.1; 1; 1], 3, 4}, {"watch_events", stream, 1}, ...
       {"watch_read", stream, 1}, {"watch_release", stream, 1, 1}, {"watch_reset", stream, 1}, ...
       {"system", "period", [1, 2], [0, 0.1]}, {"version"}};
endfunction

## The same of a stream in single precision, given as NAME_f32.
function c = single_calls (stream)
  c = {{"stream_make_f32", [1; 0.1; 9], 0.1, 11, 21, 61, 65, 68, 10, 1, [-Inf, Inf], [31; 0; 0; 0; 0], [1, 0, 9]}, ...
       {"stream_put_f32", stream, single(1:7), []}, {"stream_put_f32", stream, int32(1:7), int64(1:7) + intmax("int64") - 8}, ...
       {"stream_read_f32", stream}, {"stream_save_f32", stream}, {"stream_skip_f32", stream, 3}, ...
       {"stream_start_f32", stream, single(1:6), 9}, {"stream_retune_f32", stream, [1; 0.1; 9], 0.1, 11, 21}, ...
       {"stream_watch_f32", stream, [31; 0; 0; 0; 0], [1; 0.1; 1; 1], 3, 4}, {"stream_resume_f32", stream, uint8(1:9)}, ...
       {"watch_events_f32", stream, 1}, {"watch_read_f32", stream, 1}, {"watch_release_f32", stream, 1, 1}, {"watch_reset_f32", stream, 1}};
endfunction

function bytes = saved_bytes (command, object)
  [status, fault, bytes] = __rampwise__ (command, object);
endfunction

## One watch, as before a call that may have made more: those would slow down what comes.
function stream = new_stream (ending)
  [status, fault, stream] = __rampwise__ (["stream_make" ending], [1; 0.1; 9], 0.1, 11, 21, 61, 65, 68, 10, 1, ...
                                          [-Inf, Inf], [31, 33; zeros(4, 2)], [1, 0, 9]);
  __rampwise__ (["stream_watch" ending], stream, [31; 0; 0; 0; 0], [1, -1; 0, 0; 1, -1; 0, 1], 5, 5);
endfunction

## Of two inputs, with equipment, and after a sample.
function structure = new_structure ()
  s = [1; 0.1; 9];
  [status, fault, structure] = __rampwise__ ("structure_make", [s, s], 0.1, 11, 21, ones (2, 2), ones (3, 2), ones (3, 2), ...
                                             ones (3, 2), ones (3, 2), 1, [s, s], [1, 3], [0, 1], [2, 0]);
  __rampwise__ ("structure_run", structure, [1; 2], 0);
endfunction

function junk = nonsense ()
  junk = {[], {}, "", "text", ["two"; "row"], NaN, Inf, -Inf, -1, 0, 1, 2, 2.5, 1e300, 2^31, -2^31, single(1), int8(3), ...
          uint64(0), uint64(2)^63, int64(1:7), int64(7:-1:1), uint8(1:9),  true, 1i, complex(1, 0), sparse(1), sparse(3, 3), struct(), struct("a", {1, 2}), ...
          @sin, {1}, zeros(0, 3), zeros(3, 0), ones(1, 3), ones(3, 1), ones(3, 2), ones(3, 3, 2), NaN(3, 1), ones(7, 1), ...
          ones(4, 2), 1:5, eye(2), 21, 11, containers.Map()};
endfunction

function survives (call)
  answers = cell (1, randi ([0, 8]));
  try
    [answers{:}] = __rampwise__ (call{:});
  catch e
    if (isempty (e.message))
      error ("an error without a message");
    endif
  end_try_catch
endfunction

seed = str2double (getenv ("RAMPWISE_SEED"));
if (isnan (seed))
  seed = 20;
endif
printf ("seed %d\n", seed);
rand ("twister", seed);

before = __rampwise__ ("objects");
[passed, failed] = deal (0, 0);

## The good ones are good.
[status, fault, bank] = __rampwise__ ("bank_make", [1, 1; 0, 0; 4, 9], 0.1, 11, 21);
[status, fault, single_bank] = __rampwise__ ("bank_make_f32", [1, 1; 0, 0; 4, 9], 0.1, 11, 21);
stream = new_stream ("");
single_stream = new_stream ("_f32");
structure = new_structure ();
calls = [good_calls(bank, single_bank, stream, structure), single_calls(single_stream)];
junk = nonsense ();
for call = calls
  try
    answer = __rampwise__ (call{1}{:});
    passed++;
  catch e
    printf ("%s: %s\n", call{1}{1}, e.message);
    failed++;
  end_try_catch
endfor

for repeat = 1:2000
  if (mod (repeat, 50) == 0)
    __rampwise__ ("object_free", stream);
    __rampwise__ ("object_free", single_stream);
    stream = new_stream ("");
    single_stream = new_stream ("_f32");
    __rampwise__ ("object_free", structure);
    structure = new_structure ();
    calls = [good_calls(bank, single_bank, stream, structure), single_calls(single_stream)];
  endif
  call = calls{randi(numel (calls))};
  for i = 1:randi (2)
    call{max(1, randi(numel (call) + 1) - (rand () < 0.9))} = junk{randi(numel (junk))};
  endfor
  survives (call);
endfor
passed++;

## What is refused is named.
refused = {{}, {1}, {"nothing"}, {"version", 1}, {"bank_read", 1}, {"bank_read", uint64([1, 2])}, {"coefficients", ones(2), 1, 11, 21}, ...
           {"constant", 1}, {"list_log", 1, 2, 2e9}, {"response", ones(3, 2), 1, 11, 21, 0, 0, 0, ones(4, 3), ones(1, 8), []}, ...
           {"structure_read", structure, 3, 1}, {"structure_read", structure, 4, -1}};
for call = refused
  try
    __rampwise__ (call{1}{:});
    failed++;
    printf ("not refused: %s\n", disp (call{1}));
  catch e
    passed += strcmp (e.identifier, "rampwise:gateway");
    failed += ! strcmp (e.identifier, "rampwise:gateway");
  end_try_catch
endfor

## A freed object stays freed, also where its place is taken again.
__rampwise__ ("object_free", bank);
[status, fault, other] = __rampwise__ ("bank_make", [1; 0; 4], 0.1, 11, 21);
for gone = {bank, uint64(99) + bank, intmax("uint64")}
  try
    __rampwise__ ("bank_read", gone{1});
    failed++;
  catch e
    passed += strcmp (e.identifier, "rampwise:freed");
    failed += ! strcmp (e.identifier, "rampwise:freed");
  end_try_catch
endfor

## It stays loaded while objects live.
clear -f
clear __rampwise__
[count, stopped] = __rampwise__ ("bank_count", other);
passed += count == 1;
failed += count != 1;
printf ("%d passed, %d failed\n", passed, failed);
exit (failed > 0);
