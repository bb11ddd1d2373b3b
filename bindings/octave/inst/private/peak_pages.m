## peak_pages (PEAKS): the gateway's peaks, {larger; its time; high; its time; low; its time} and perhaps a bound of later
## values along the first dimension, as a struct of arrays without it, and their size.
function [s, sizes] = peak_pages (peaks)
  pick = @(i) reshape (peaks(i,:), [size(peaks)(2:end), 1]);
  s = struct ("sign", sign (pick (1)), "time", pick (2), "high", pick (3), "high_time", pick (4), "low", pick (5), "low_time",
              pick (6));
  if (rows (peaks) > 6)
    s.later = pick (7);
  endif
  sizes = abs (pick (1));
endfunction
