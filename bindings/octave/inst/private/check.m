## check (CALLER, STATUS, FAULT, SIZE_OF_P): an error where the library's STATUS is one: the identifier
## "rampwise:WORD", the argument at fault, the library's text. FAULT counts from 1 over the samples where the data
## are wrong, else over the oscillators.
function check (caller, status, fault, size_of_p = [1, 1])
  if (status == 0)
    return;
  endif
  [word, argument, over] = words (status);
  if (strcmp (over, "samples") && size_of_p(2) > 1)
    [i, j] = ind2sub (size_of_p, fault);
    argument = sprintf ("%s(%d,%d)", argument, i, j);
  elseif (! isempty (over))
    argument = sprintf ("%s(%d)", argument, fault);
  endif
  error (["rampwise:" word], "%s: %s: %s", caller, argument, __rampwise__ ("status_text", status));
endfunction

## The library's numbers (status.h), a word for each, the argument to blame, and what its index counts.
function [word, argument, over] = words (status)
  persistent table = {
    -12, "input", "'input'", ""
    -14, "between", "'between'", ""
    -16, "impulses", "'between'", ""
    -17, "frame", "'frame'", ""
    -20, "different", "states", ""
    -24, "memory", "oscillators", ""
    -26, "count", "number", ""
    -30, "mass", "mass", "oscillators"
    -32, "damper", "damping", "oscillators"
    -34, "stiffness", "stiffness", "oscillators"
    -36, "frequency", "natural frequency or period", "oscillators"
    -38, "interval", "DT", ""
    -40, "step_length", "oscillator", "oscillators"
    -42, "coefficient", "oscillator", "oscillators"
    -45, "percent", "PERCENT", ""
    -46, "no_rest", "'start'", ""
    -48, "defective", "M, C, K", ""
    -50, "weight", "outputs", ""
    -52, "roots", "M, C, K", ""
    -60, "sample", "P", "samples"
    -62, "state", "initial state", ""
    -64, "time", "T", "samples"
    -66, "gap", "P", "samples"
    -70, "damaged", "BYTES", ""
    -72, "kind", "BYTES", ""
    -74, "edition", "BYTES", ""
    -80, "overflow", "response to P", "samples"
    -90, "fused", "library", ""
    -92, "arithmetic", "library", ""
  };
  at = find ([table{:,1}] == status);
  if (isempty (at))
    [word, argument, over] = deal ("other", sprintf ("status %d", status), "");
  else
    [word, argument, over] = table{at,2:4};
  endif
endfunction
