## -*- texinfo -*-
## @deftypefn {} {} rampwise_live_structure_resume (@var{s}, @var{bytes})
## Puts everything that @code{rampwise_live_structure_save} gave into @var{s}, which goes on from there with the same bits.
## It must be made of the same structure with the same options. Where bytes are refused nothing has changed.
##
## The modes of a structure come from Octave's eigenvalue solver, whose last digits depend on the machine. What is to go on
## on another one is made there of the same struct of @code{rampwise_structure}, kept by @code{save}.
## @seealso{rampwise_live_structure_save}
## @end deftypefn

function rampwise_live_structure_resume (s, bytes)
  if (nargin != 2)
    print_usage ();
  endif
  caller = "rampwise_live_structure_resume";
  s = live_structure (caller, s);
  if (! isa (bytes, "uint8"))
    error ("rampwise:argument", "%s: BYTES must be of class uint8", caller);
  endif
  [status, fault] = __rampwise__ ("structure_resume", s.object, bytes);
  if (status == -20)
    error ("rampwise:different", "%s: BYTES are of another structure, or of one with other options", caller);
  endif
  check (caller, status, fault);
endfunction

%!function s = made (varargin)
%!  b = rampwise_structure (eye (2), [2, -1; -1, 1], [20, -10; -10, 10]);
%!  s = rampwise_live_structure (b, 0.1, "input", "base acceleration", "equipment", ...
%!                               rampwise_system ("period", [0.5, 1], "damping", 0.05), "point", 2, varargin{:});
%!endfunction
%!shared p
%! p = sin ((1:90).' .^ 1.3);
%!test # goes on with the same bits and peaks, in one not begun and in one that was elsewhere
%! a = made (); b = made (); c = made ();
%! rampwise_live_structure_push (a, p(1:40)); rampwise_live_structure_push (c, [9, 9]);
%! bytes = rampwise_live_structure_save (a);
%! rampwise_live_structure_resume (b, bytes); rampwise_live_structure_resume (c, bytes);
%! assert (rampwise_live_structure_read (b), rampwise_live_structure_read (a));
%! h = rampwise_live_structure_push (a, p(41:90));
%! assert (rampwise_live_structure_push (b, p(41:90)), h);
%! assert (rampwise_live_structure_push (c, p(41:90)), h);
%! assert (rampwise_live_structure_save (b), rampwise_live_structure_save (a));
%! assert (rampwise_live_structure_read (c), rampwise_live_structure_read (a));
%!test # damaged bytes, wherever, change nothing
%! s = made ();
%! rampwise_live_structure_push (s, [1, 2, 3]);
%! bytes = rampwise_live_structure_save (s);
%! rampwise_live_structure_push (s, [4, 5]);
%! before = rampwise_live_structure_save (s);
%! for i = [1:97:numel(bytes), numel(bytes)]
%!   wrong = bytes;
%!   wrong(i) = bitxor (wrong(i), 16);
%!   try
%!     rampwise_live_structure_resume (s, wrong);
%!     error ("not refused: %d", i);
%!   catch e
%!     assert (any (strcmp (e.identifier, {"rampwise:damaged", "rampwise:kind", "rampwise:edition"})));
%!   end_try_catch
%!   assert (rampwise_live_structure_save (s), before);
%! endfor
%!test # another structure's
%! a = made (); b = made ("peaks", false);
%! rampwise_live_structure_push (a, 1);
%! fail ("rampwise_live_structure_resume (b, rampwise_live_structure_save (a))", "of another structure");
%! fail ("rampwise_live_structure_read (b)", "no sample was pushed yet");
%!error id=rampwise:damaged rampwise_live_structure_resume (made (), uint8 ([]))
%!error id=rampwise:damaged rampwise_live_structure_resume (made (), uint8 (1:10))
%!error <must be of class uint8> rampwise_live_structure_resume (made (), 1)
%!error <Invalid call> rampwise_live_structure_resume (1)
