## -*- texinfo -*-
## @deftypefn {} {@var{now} =} rampwise_bank_read (@var{bank})
## What all oscillators of @var{bank} do at the present sample.
##
## @var{now} is a struct of columns of a row each oscillator: @code{displacement}, @code{velocity},
## @code{acceleration} and @code{total_acceleration}; @code{state}, a matrix of a column @code{[u; v; p; p_before]} each
## oscillator, all that is to be kept to go on later (@code{rampwise_bank_set}); and @code{stopped}, how many are
## stopped because they overflowed, whose accelerations are NaN.
## @seealso{rampwise_bank, rampwise_bank_set}
## @end deftypefn

function now = rampwise_bank_read (bank)
  if (nargin != 1)
    print_usage ();
  endif
  [object, ending] = bank_object ("rampwise_bank_read", bank);
  now = struct ();
  [now.displacement, now.velocity, now.acceleration, now.total_acceleration, now.state] = ...
    __rampwise__ (["bank_read" ending], object);
  [count, now.stopped] = __rampwise__ (["bank_count" ending], object);
endfunction

%!test
%! b = rampwise_bank (0.1, "omega", [1, 2], "damping", 0.05, "input", "base acceleration");
%! rampwise_bank_push (b, [0, 1, 3]);
%! now = rampwise_bank_read (b);
%! r = rampwise_response ([0, 0, 1, 3], 0.1, "omega", [1, 2], "damping", 0.05, "input", "base acceleration");
%! assert (now.velocity, r.velocity(end,:).');
%! assert (now.total_acceleration, r.total_acceleration(end,:).');
%! assert (now.state, [now.displacement.'; now.velocity.'; 3, 3; 1, 1]);
%! assert (now.stopped, 0);
%!error <Invalid call> rampwise_bank_read ()
%!error <must come from> rampwise_bank_read ("b")
