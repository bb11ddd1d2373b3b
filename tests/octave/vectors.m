## The shared vectors, which C and Python read too: every bit as tests/vectors has it. They come from MPFR, not from the
## library (tests/vectors/make_vectors.c).
1;

## Texts like "-0x1.8000000000000p-3", one or a cell array, as a column of doubles, exactly.
function x = hexadecimal (texts)
  texts = cellstr (texts)(:);
  parts = reshape ([regexp(texts, '0x([01])\.([0-9a-f]{13})p([+-]\d+)$', "tokens", "once"){:}], 3, []).';
  digits = hex2dec (parts(:,2)) + str2double (parts(:,1)) * 2^52; # below 2^53: exact
  power = str2double (parts(:,3)) - 52;
  x = digits .* 2 .^ max (power, -1000) .* 2 .^ min (power + 1000, 0);
  negative = strncmp (texts, "-", 1);
  x(negative) = -x(negative);
endfunction

function same = same_bits (x, texts)
  same = isequal (num2hex (x(:)), num2hex (hexadecimal (texts)));
endfunction

function s = system_of (v)
  s = struct ("mass", hexadecimal (v.mass), "damper", hexadecimal (v.damper), "stiffness", hexadecimal (v.stiffness));
endfunction

function options = options_of (v)
  words = @(name) strrep (lower (strrep (name, "RAMPWISE_", "")), "_", " ");
  options = {"system", system_of(v), "input", words(v.input), "between", words(v.between)};
endfunction

function same = check_system (v)
  s = rampwise_system (v.way, hexadecimal (v.given), "damping", hexadecimal (v.damping), "allow_strong_damping", true);
  same = same_bits ([s.mass, s.damper, s.stiffness], v.system);
endfunction

function same = check_coefficients (v)
  c = rampwise_coefficients (hexadecimal (v.dt), options_of (v){:});
  made = [c.A, c.B, c.C, c.D, c.Ap, c.Bp, c.Cp, c.Dp, c.A_minus_1, c.Bp_minus_1];
  same = same_bits (made, v.coefficients) && same_bits (c.acceleration, v.acceleration) ...
         && same_bits (c.total_acceleration, v.total);
endfunction

function same = same_histories (r, v)
  same = same_bits (r.displacement, v.u) && same_bits (r.velocity, v.v) && same_bits (r.acceleration, v.a) ...
         && same_bits (r.total_acceleration, v.total);
endfunction

function options = start_of (v)
  options = {"displacement", hexadecimal(v.u0), "velocity", hexadecimal(v.v0)};
endfunction

function same = check_steps (v)
  r = rampwise_response (hexadecimal (v.p), hexadecimal (v.dt), options_of (v){:}, start_of (v){:});
  same = same_histories (r, v);
endfunction

## The same records through a bank, in two pieces.
function same = check_bank (v)
  p = hexadecimal (v.p);
  bank = rampwise_bank (hexadecimal (v.dt), options_of (v){:});
  rampwise_bank_set (bank, [hexadecimal(v.u0); hexadecimal(v.v0); p(1); p(1)]);
  a = rampwise_bank_push (bank, p(2:20), 1);
  b = rampwise_bank_push (bank, p(21:end), 1);
  same = same_bits ([a.displacement; b.displacement], v.u(2:end)) ...
         && same_bits ([a.total_acceleration; b.total_acceleration], v.total(2:end));
endfunction

function same = check_times (v)
  r = rampwise_response_at (hexadecimal (v.t), hexadecimal (v.p), options_of (v){:}, start_of (v){:});
  same = same_histories (r, v);
endfunction

root = argv (){end};
[passed, failed] = deal (0, 0);
checks = {"systems", 50, @check_system; "coefficients", 150, @check_coefficients; "steps", 15, @check_steps
          "steps", 15, @check_bank; "times", 5, @check_times};
assert (hexadecimal ({"0x1.0000000000001p+0", "-0x1.8000000000000p-3", "0x0.0000000000001p-1022"}), ...
        [1 + eps; -0.1875; 2^-1074]);
for i = 1:rows (checks)
  vectors = jsondecode (fileread (fullfile (root, "tests/vectors", [checks{i,1} ".json"])));
  same = arrayfun (checks{i,3}, vectors);
  passed += sum (same);
  failed += sum (! same);
  if (numel (same) < checks{i,2} || ! all (same))
    printf ("%s: %d vectors, these differ: %s\n", checks{i,1}, numel (same), mat2str (find (! same)));
    failed += numel (same) < checks{i,2};
  endif
endfor
printf ("%d passed, %d failed\n", passed, failed);
exit (failed > 0);
