## -*- texinfo -*-
## @deftypefn {} {@var{bytes} =} rampwise_live_structure_save (@var{s})
## How the structure @var{s} stands, with its equipment and peaks, as a column of class uint8, to be kept and gone on with,
## here or on any other machine, with the same bits: @code{rampwise_live_structure_resume}. A sample at least was pushed.
## @seealso{rampwise_live_structure_resume}
## @end deftypefn

function bytes = rampwise_live_structure_save (s)
  if (nargin != 1)
    print_usage ();
  endif
  caller = "rampwise_live_structure_save";
  [status, fault, bytes] = __rampwise__ ("structure_save", live_structure (caller, s).object);
  if (status == -18)
    error ("rampwise:not_made", "%s: no sample was pushed yet", caller);
  endif
  check (caller, status, fault);
endfunction

%!test # saving changes nothing
%! s = rampwise_live_structure (rampwise_structure (1, 0.1, 9), 0.1, "input", "base acceleration");
%! fail ("rampwise_live_structure_save (s)", "no sample was pushed yet");
%! rampwise_live_structure_push (s, [1, 2, 3]);
%! bytes = rampwise_live_structure_save (s);
%! assert (class (bytes), "uint8");
%! assert (columns (bytes), 1);
%! assert (rampwise_live_structure_save (s), bytes);
%!error <Invalid call> rampwise_live_structure_save ()
%!error <S must come from> rampwise_live_structure_save (uint8 (1))
