## -*- texinfo -*-
## @deftypefn {} {} rampwise_bank_set (@var{bank}, @var{state})
## Puts all oscillators of @var{bank} into the states @var{state}, as @code{rampwise_bank_read} gives them: a matrix
## of a column @code{[u; v; p; p_before]} each oscillator. As the input is one, p is the same in all columns, and
## p_before too. In single precision two rows more follow, the low parts of u and v.
## @seealso{rampwise_bank, rampwise_bank_read}
## @end deftypefn

function rampwise_bank_set (bank, state)
  if (nargin != 2)
    print_usage ();
  endif
  caller = "rampwise_bank_set";
  [object, ending, as_class] = bank_object (caller, bank);
  state = as_class (numbers (caller, "STATE", state));
  count = __rampwise__ (["bank_count" ending], object);
  height = 4 + 2 * ! isempty (ending);
  if (! size_equal (state, zeros (height, count)))
    error ("rampwise:argument", "%s: STATE must be a matrix of %d rows and %d columns", caller, height, count);
  endif
  [status, fault] = __rampwise__ (["bank_set" ending], object, state);
  check (caller, status, fault);
endfunction

%!test # kept and gone on with, in another bank
%! o = {"omega", [1, 2, 5], "damping", 0.05, "input", "base velocity"};
%! a = rampwise_bank (0.1, o{:}); b = rampwise_bank (0.1, o{:});
%! rampwise_bank_push (a, [1, 4, 2]);
%! rampwise_bank_set (b, rampwise_bank_read (a).state);
%! assert (rampwise_bank_push (a, [3, -1], 1:3), rampwise_bank_push (b, [3, -1], 1:3));
%! assert (rampwise_bank_read (a), rampwise_bank_read (b));
%!shared b
%! b = rampwise_bank (0.1, "omega", [1, 2], "damping", 0, "input", "force");
%!error <Invalid call> rampwise_bank_set (1)
%!error <4 rows and 2 columns> rampwise_bank_set (b, ones (4, 3))
%!error id=rampwise:state rampwise_bank_set (b, [1, NaN; 0, 0; 1, 1; 1, 1])
%!error id=rampwise:different rampwise_bank_set (b, [1, 0; 0, 0; 1, 2; 1, 1])
