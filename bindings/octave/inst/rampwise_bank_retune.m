## -*- texinfo -*-
## @deftypefn {} {} rampwise_bank_retune (@var{bank}, @var{i}, @dots{})
## Makes oscillator @var{i} of @var{bank} another one, described as in @code{rampwise_system} or by option "system".
## Its displacement and velocity stay.
## @seealso{rampwise_bank}
## @end deftypefn

function rampwise_bank_retune (bank, i, varargin)
  if (nargin < 3)
    print_usage ();
  endif
  caller = "rampwise_bank_retune";
  [object, ending] = bank_object (caller, bank);
  options = parse (caller, rmfield (describe (), {"input", "between"}), varargin);
  s = systems (caller, options);
  if (columns (s) != 1)
    error ("rampwise:argument", "%s: one oscillator is retuned at a time", caller);
  endif
  [status, fault] = __rampwise__ (["bank_retune" ending], object, scalar (caller, "I", i), s, bank.dt, bank.kinds{:});
  check (caller, status, fault);
endfunction

%!test
%! b = rampwise_bank (0.1, "omega", [1, 2], "damping", 0.05, "input", "force");
%! rampwise_bank_push (b, [1, 4]);
%! s = rampwise_bank_read (b).state;
%! rampwise_bank_retune (b, 2, "omega", 7, "damping", 0.1);
%! assert (rampwise_bank_read (b).state, s);
%! c = rampwise_bank (0.1, "omega", [1, 7], "damping", [0.05, 0.1], "input", "force");
%! rampwise_bank_set (c, s);
%! assert (rampwise_bank_push (b, [2, 3], 1:2), rampwise_bank_push (c, [2, 3], 1:2));
%!shared b
%! b = rampwise_bank (0.1, "omega", [1, 2], "damping", 0, "input", "force");
%!error <Invalid call> rampwise_bank_retune (b, 1)
%!error id=rampwise:count rampwise_bank_retune (b, 3, "omega", 1, "damping", 0)
%!error id=rampwise:count rampwise_bank_retune (b, 0.5, "omega", 1, "damping", 0)
%!error <one oscillator is retuned> rampwise_bank_retune (b, 1, "omega", [1, 2], "damping", 0)
