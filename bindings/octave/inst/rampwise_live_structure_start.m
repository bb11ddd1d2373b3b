## -*- texinfo -*-
## @deftypefn {} {} rampwise_live_structure_start (@var{s})
## Begins the structure @var{s} anew: the next sample pushed is its first one, at which it is as it was made, at rest or with
## its "displacement" and "velocity". Peaks begin anew too.
## @seealso{rampwise_live_structure, rampwise_live_structure_push}
## @end deftypefn

function rampwise_live_structure_start (s)
  if (nargin != 1)
    print_usage ();
  endif
  caller = "rampwise_live_structure_start";
  [status, fault] = __rampwise__ ("structure_start", live_structure (caller, s).object);
  check (caller, status, fault);
endfunction

%!test
%! b = rampwise_structure (eye (2), [], [20, -10; -10, 10], "damping", 0.05);
%! s = rampwise_live_structure (b, 0.1, "input", "base acceleration", "displacement", [1, 2]);
%! h = rampwise_live_structure_push (s, [5, 6, 7]);
%! assert (h.displacement(1,:), [1, 2], 1e-15);
%! peaks = rampwise_live_structure_read (s).peaks;
%! rampwise_live_structure_push (s, 99);
%! rampwise_live_structure_start (s);
%! fail ("rampwise_live_structure_read (s)", "no sample was pushed yet");
%! assert (rampwise_live_structure_push (s, [5, 6, 7]), h);
%! assert (rampwise_live_structure_read (s).peaks, peaks);
%!error <Invalid call> rampwise_live_structure_start ()
%!error <S must come from> rampwise_live_structure_start ("s")
