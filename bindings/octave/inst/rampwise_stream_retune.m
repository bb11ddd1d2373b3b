## -*- texinfo -*-
## @deftypefn {} {} rampwise_stream_retune (@var{stream}, @dots{})
## Makes the oscillator of @var{stream} another one, described as in @code{rampwise_system} or by option "system", from the
## next step on. Its displacement and velocity stay; named outputs and watches follow, weights stay.
## @seealso{rampwise_stream}
## @end deftypefn

function rampwise_stream_retune (stream, varargin)
  if (nargin < 2)
    print_usage ();
  endif
  caller = "rampwise_stream_retune";
  [object, ending] = stream_object (caller, stream);
  options = parse (caller, rmfield (describe (), {"input", "between"}), varargin);
  s = systems (caller, options);
  if (columns (s) != 1)
    error ("rampwise:argument", "%s: a stream has one oscillator", caller);
  endif
  [status, fault] = __rampwise__ (["stream_retune" ending], object, s, stream.dt, stream.kinds{:});
  check (caller, status, fault);
endfunction

%!test # from the state where it stands, as the other oscillator
%! p = sin ((1:20).'); dt = 0.1; first = {"omega", 3, "damping", 0.05, "input", "force"};
%! for precision = {"double", "single"}
%!   s = rampwise_stream (dt, first{:}, "precision", precision{1});
%!   rampwise_stream_push (s, p(1:8));
%!   now = double (rampwise_stream_read (s).state);
%!   rampwise_stream_retune (s, "omega", 5, "damping", 0.2);
%!   rampwise_stream_watch (s, "spring force");
%!   h = rampwise_stream_push (s, p(9:20));
%!   r = rampwise_response (p(8:20), dt, "omega", 5, "damping", 0.2, "input", "force", "displacement", now(1), ...
%!                          "velocity", now(2));
%!   tolerance = 20 * eps (precision{1}); # some steps' roundings of values below 1
%!   assert (double (h.velocity), r.velocity(2:13), tolerance);
%!   assert (double (h.total_acceleration), r.total_acceleration(2:13), 25 * tolerance); # k/m = 25
%!   seen = rampwise_stream_read (s).watches.since_start;
%!   assert (seen.high >= 25 * max (h.displacement) * (1 - eps (precision{1}) * 4));
%! endfor
%!test # a new watch waits for it after a resumption
%! s = rampwise_stream (1, "omega", 1, "damping", 0, "input", "force");
%! rampwise_stream_resume (s, rampwise_stream_save (s));
%! fail ('rampwise_stream_watch (s, "load")', "rampwise_stream_retune comes first");
%! rampwise_stream_retune (s, "omega", 1, "damping", 0);
%! assert (rampwise_stream_watch (s, "load"), 1);
%!shared s
%! s = rampwise_stream (0.1, "omega", 1, "damping", 0, "input", "force");
%!error <Invalid call> rampwise_stream_retune (s)
%!error <must come from rampwise_stream> rampwise_stream_retune (1, "omega", 1, "damping", 0)
%!error <a stream has one oscillator> rampwise_stream_retune (s, "omega", [1, 2], "damping", 0)
%!error id=rampwise:frequency rampwise_stream_retune (s, "omega", NaN, "damping", 0)
%!error <no option 'input'> rampwise_stream_retune (s, "omega", 1, "damping", 0, "input", "force")
