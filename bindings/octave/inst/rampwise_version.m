## -*- texinfo -*-
## @deftypefn {} {@var{v} =} rampwise_version ()
## Which library this is, and which bits it gives.
##
## @var{v} is a struct: @code{version}, text; @code{arithmetic_edition}, a number that changes whenever any bit of
## any result may change, so that stored results of one edition may be compared bit for bit; @code{instructions},
## the set of machine instructions in use (results do not depend on it); @code{self_test}, "passed", or what the
## library's known answers say on this machine.
## @seealso{rampwise_response}
## @end deftypefn

function v = rampwise_version ()
  [version, edition, instructions, status] = __rampwise__ ("version");
  sets = {"BASELINE", "AVX2", "AVX512", "NEON"};
  numbers = cellfun (@(s) __rampwise__ ("constant", ["RAMPWISE_" s]), sets);
  v = struct ("version", version, "arithmetic_edition", edition, "instructions", lower (sets{numbers == instructions}),
              "self_test", "passed");
  if (status != 0)
    v.self_test = __rampwise__ ("status_text", status);
  endif
endfunction

%!test
%! v = rampwise_version ();
%! assert (regexp (v.version, '^\d+\.\d+\.\d+$'), 1);
%! assert (v.self_test, "passed");
%! assert (v.arithmetic_edition >= 1);
%! assert (any (strcmp (v.instructions, {"baseline", "avx2", "avx512", "neon"})));
%!error <called with too many inputs> rampwise_version (1)
