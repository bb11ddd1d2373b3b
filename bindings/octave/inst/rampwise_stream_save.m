## -*- texinfo -*-
## @deftypefn {} {@var{bytes} =} rampwise_stream_save (@var{stream})
## All of @var{stream} and its watches as a column of class uint8, to be kept and gone on with, here or on any other
## machine, with the same bits: @code{rampwise_stream_resume}.
## @seealso{rampwise_stream_resume}
## @end deftypefn

function bytes = rampwise_stream_save (stream)
  if (nargin != 1)
    print_usage ();
  endif
  caller = "rampwise_stream_save";
  [object, ending] = stream_object (caller, stream);
  [status, fault, bytes] = __rampwise__ (["stream_save" ending], object);
  check (caller, status, fault);
endfunction

%!test # saving changes nothing
%! s = rampwise_stream (0.1, "omega", 1, "damping", 0, "input", "force");
%! rampwise_stream_watch (s, "velocity", "level", 1);
%! rampwise_stream_push (s, [1, 2, 3]);
%! bytes = rampwise_stream_save (s);
%! assert (class (bytes), "uint8");
%! assert (columns (bytes), 1);
%! assert (rampwise_stream_save (s), bytes);
%!error <Invalid call> rampwise_stream_save ()
%!error <must come from> rampwise_stream_save (uint8 (1))
