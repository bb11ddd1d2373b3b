## peak_pages (SIX): the gateway's peaks, {larger; its time; high; its time; low; its time} along the first dimension, as a
## struct of arrays without it, and their size.
function [s, sizes] = peak_pages (six)
  pick = @(i) reshape (six(i,:), [size(six)(2:end), 1]);
  s = struct ("sign", sign (pick (1)), "time", pick (2), "high", pick (3), "high_time", pick (4), "low", pick (5), "low_time",
              pick (6));
  sizes = abs (pick (1));
endfunction
