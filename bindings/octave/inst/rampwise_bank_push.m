## -*- texinfo -*-
## @deftypefn  {} {} rampwise_bank_push (@var{bank}, @var{p})
## @deftypefnx {} {@var{h} =} rampwise_bank_push (@var{bank}, @var{p}, @var{chosen})
## Takes all oscillators of @var{bank} over the next samples, the vector @var{p}.
##
## @var{h} is a struct of the histories of the oscillators @var{chosen}, numbers from 1 (none unless given): matrices
## @code{displacement}, @code{velocity}, @code{acceleration} and @code{total_acceleration} of a row each sample and a
## column each oscillator chosen, NaN from where one overflows; and @code{largest}, the largest displacement in size at
## these samples, of every oscillator. The bits do not depend on how a record is cut into chunks.
## @seealso{rampwise_bank, rampwise_bank_read}
## @end deftypefn

function h = rampwise_bank_push (bank, p, chosen = [])
  if (nargin < 2)
    print_usage ();
  endif
  caller = "rampwise_bank_push";
  [object, ending, as_class] = bank_object (caller, bank);
  p = as_class (numbers (caller, "P", p));
  chosen = numbers (caller, "CHOSEN", chosen);
  if (! isvector (p) && ! isempty (p))
    error ("rampwise:argument", "%s: P must be a vector: one input for all oscillators", caller);
  endif
  if (numel (unique (chosen)) != numel (chosen))
    error ("rampwise:count", "%s: CHOSEN must be different numbers", caller);
  endif
  [status, fault, u, v, a, total, largest] = ...
    __rampwise__ (["bank_run" ending], object, p, chosen, ones (1, 4) * (nargout > 0));
  if (status == -80)
    warning ("rampwise:overflow", "%s: response to P(%d): %s; oscillators are stopped", caller, fault,
             __rampwise__ ("status_text", status));
  elseif (status == -26)
    error ("rampwise:count", "%s: CHOSEN must be different numbers from 1 to %d", caller, bank.count);
  else
    check (caller, status, fault);
  endif
  if (nargout > 0)
    h = struct ("displacement", u, "velocity", v, "acceleration", a, "total_acceleration", total, "largest", largest);
  endif
endfunction

%!shared p, o
%! p = sin ((1:90).' .^ 1.3); o = {"frequency", [0.4; 1; 2.5], "damping", [0.01, 0.05, 0.4], "input", "base acceleration"};
%!test # the bits of the whole record, in any chunks
%! b = rampwise_bank (0.05, o{:});
%! h1 = rampwise_bank_push (b, p(1:17), [3, 1]);
%! h2 = rampwise_bank_push (b, p(18), [3, 1]);
%! h3 = rampwise_bank_push (b, p(19:90), [3, 1]);
%! r = rampwise_response (p, 0.05, o{:}, "start", "ramp");
%! for f = {"displacement", "velocity", "acceleration", "total_acceleration"}
%!   assert ([h1.(f{1}); h2.(f{1}); h3.(f{1})], r.(f{1})(:,[3, 1]));
%! endfor
%! assert (max ([h1.largest, h2.largest, h3.largest], [], 2), max (abs (r.displacement)).');
%!test # none chosen, none wanted, no samples
%! b = rampwise_bank (0.05, o{:});
%! h = rampwise_bank_push (b, p.');
%! assert (size (h.velocity), [90, 0]);
%! rampwise_bank_push (b, []);
%! assert (rampwise_bank_read (b).displacement, rampwise_response (p, 0.05, o{:}, "start", "ramp").displacement(end,:).');
%!test # a refused sample changes nothing
%! b = rampwise_bank (0.05, o{:});
%! rampwise_bank_push (b, p);
%! before = rampwise_bank_read (b);
%! try
%!   rampwise_bank_push (b, [1, 2, NaN]);
%!   error ("not refused");
%! catch e
%!   assert (e.identifier, "rampwise:sample");
%!   assert (! isempty (strfind (e.message, "P(3)")));
%! end_try_catch
%! assert (rampwise_bank_read (b), before);
%!test # overflow stops one oscillator, with a warning, and the other goes on
%! b = rampwise_bank (1, "omega", [0.1, 1], "damping", [0, 0.5], "input", "force");
%! warning ("off", "rampwise:overflow", "local");
%! h = rampwise_bank_push (b, 1e307 * ones (30, 1), [1, 2]);
%! assert (isnan (h.displacement(end,:)), [true, false]);
%! assert (rampwise_bank_read (b).stopped, 1);
%!warning id=rampwise:overflow rampwise_bank_push (rampwise_bank (1, "omega", 0.1, "damping", 0, "input", "force"), 1e307 * ones (30, 1));
%!error <Invalid call> rampwise_bank_push (1)
%!error <must come from rampwise_bank> rampwise_bank_push (1, 2)
%!error <P must be a vector> rampwise_bank_push (rampwise_bank (0.05, o{:}), ones (3))
%!error id=rampwise:count rampwise_bank_push (rampwise_bank (0.05, o{:}), p, 4)
%!error id=rampwise:count rampwise_bank_push (rampwise_bank (0.05, o{:}), p, [1, 1])
%!error id=rampwise:count rampwise_bank_push (rampwise_bank (0.05, o{:}), p, 1.5)
%!error id=rampwise:count rampwise_bank_push (rampwise_bank (0.05, o{:}), p, NaN)
%!test # freed by hand
%! b = rampwise_bank (0.05, o{:});
%! __rampwise__ ("object_free", b.object);
%! fail ("rampwise_bank_push (b, 1)", "there is no such bank");
