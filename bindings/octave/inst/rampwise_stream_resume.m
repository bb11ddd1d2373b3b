## -*- texinfo -*-
## @deftypefn {} {} rampwise_stream_resume (@var{stream}, @var{bytes})
## Puts everything that @code{rampwise_stream_save} gave into @var{stream}, which goes on from there with the same bits.
## It must have the same watches, made in the same order with the same windows and events. Where bytes are refused
## nothing has changed. A new watch must wait for @code{rampwise_stream_retune} then, which may name the same oscillator:
## bytes can come from a stream that was retuned.
## @seealso{rampwise_stream_save}
## @end deftypefn

function rampwise_stream_resume (stream, bytes)
  if (nargin != 2)
    print_usage ();
  endif
  caller = "rampwise_stream_resume";
  [object, ending] = stream_object (caller, stream);
  if (! isa (bytes, "uint8"))
    error ("rampwise:argument", "%s: BYTES must be of class uint8", caller);
  endif
  [status, fault] = __rampwise__ (["stream_resume" ending], object, bytes);
  check (caller, status, fault);
endfunction

%!function s = made ()
%!  s = rampwise_stream (0.1, "omega", 3, "damping", 0.05, "input", "base acceleration");
%!  rampwise_stream_watch (s, "displacement", "level", 0.1, "window", 6, "latch", true);
%!  rampwise_stream_watch (s, "velocity");
%!endfunction
%!test # the same bits, watches and events go on
%! p = sin ((1:70).' .^ 1.3);
%! a = made (); b = made ();
%! rampwise_stream_push (a, [p(1:30); NaN]);
%! rampwise_stream_resume (b, rampwise_stream_save (a));
%! assert (rampwise_stream_push (b, p(31:70)), rampwise_stream_push (a, p(31:70)));
%! assert (rampwise_stream_read (b), rampwise_stream_read (a));
%! assert (rampwise_stream_events (b, 1), rampwise_stream_events (a, 1));
%! assert (rampwise_stream_save (b), rampwise_stream_save (a));
%!test # damaged bytes, wherever, change nothing
%! s = made ();
%! rampwise_stream_push (s, [1, 2, 3]);
%! bytes = rampwise_stream_save (s);
%! rampwise_stream_push (s, [4, 5]);
%! before = rampwise_stream_save (s);
%! for i = [1:53:numel(bytes), numel(bytes)]
%!   wrong = bytes;
%!   wrong(i) = bitxor (wrong(i), 16);
%!   try
%!     rampwise_stream_resume (s, wrong);
%!     error ("not refused: %d", i);
%!   catch e
%!     assert (any (strcmp (e.identifier, {"rampwise:damaged", "rampwise:kind", "rampwise:edition"})));
%!   end_try_catch
%!   assert (rampwise_stream_save (s), before);
%! endfor
%!error id=rampwise:damaged rampwise_stream_resume (made (), uint8 ([]))
%!error id=rampwise:damaged rampwise_stream_resume (made (), uint8 (1:10))
%!error <must be of class uint8> rampwise_stream_resume (made (), 1)
%!error <Invalid call> rampwise_stream_resume (1)
