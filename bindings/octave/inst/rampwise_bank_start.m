## -*- texinfo -*-
## @deftypefn {} {} rampwise_bank_start (@var{bank}, @var{p0})
## Begins anew: all oscillators of @var{bank} are at rest at this sample, under the input @var{p0} from now on.
##
## To push a whole record @code{@var{p}} that is given from its first sample on, start at @code{@var{p}(1)} and push
## the others.
## @seealso{rampwise_bank, rampwise_bank_set}
## @end deftypefn

function rampwise_bank_start (bank, p0)
  if (nargin != 2)
    print_usage ();
  endif
  caller = "rampwise_bank_start";
  [object, ending] = bank_object (caller, bank);
  [status, fault] = __rampwise__ (["bank_start" ending], object, scalar (caller, "P0", p0));
  check (caller, status, fault);
endfunction

%!test
%! o = {"omega", [1, 2], "damping", 0.05, "input", "base acceleration"};
%! b = rampwise_bank (0.1, o{:});
%! rampwise_bank_push (b, 7);
%! rampwise_bank_start (b, 2);
%! rampwise_bank_push (b, [3, 4]);
%! assert (rampwise_bank_read (b).displacement, rampwise_response ([2, 3, 4], 0.1, o{:}).displacement(end,:).');
%!error <Invalid call> rampwise_bank_start (1)
%!error id=rampwise:sample rampwise_bank_start (rampwise_bank (0.1, "omega", 1, "damping", 0, "input", "force"), NaN)
%!error id=rampwise:argument rampwise_bank_start (rampwise_bank (0.1, "omega", 1, "damping", 0, "input", "force"), [1, 2])
