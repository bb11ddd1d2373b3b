# Error against cost for every method, PNG and SVG:
#
#     gnuplot -c cost.gnuplot bench_cost.csv PICTURE
#
# writes PICTURE.png and PICTURE.svg. Each method is a point with its name beside it; where many have the same
# error, some have. Kinds are told apart by shape as well as by colour.

if (ARGC != 2) { print "usage: gnuplot -c cost.gnuplot COST.csv PICTURE"; exit status 2 }
costs = ARG1
picture = ARG2

set datafile separator comma
set datafile columnheaders
set encoding utf8
set logscale xy
set format x "%g"
set format y "10^{%L}"
set xrange [0.1:1e5]
set yrange [1e-16:5]
set border 3 linecolor "#555555"
set tics nomirror scale 0.5
set ytics 100
set xtics 10
set grid xtics ytics linetype 1 linecolor "#dddddd" linewidth 0.6
set xlabel "nanoseconds for one oscillator over one sample, on this machine"
set ylabel "largest error of displacement, of the peak"
unset key
set lmargin at screen 0.085
set rmargin at screen 0.97
set tmargin at screen 0.90

# Told apart by every kind of eye.
ours = "#0072b2"
book = "#d55e00"
scipy = "#007a5a"
gsl = "#555555"

set label 1 "What a step costs, and how far it is off" at screen 0.5, 0.965 center
set label 2 "Blue: rampwise. Orange: formulas from books. Green: SciPy. Grey: GSL's drivers at two tolerances." \
    at screen 0.5, 0.925 center
set label 3 "better: quicker and nearer" at graph 0.012, 0.03 left textcolor rgb "#777777"

begins(id, what) = strstrt(id, what) == 1
of(what, x) = begins(strcol(1), what) ? x : NaN

# The text beside a point; none where a neighbour speaks for it.
tolerance(id) = id[strlen(id) - 1:] eq "10" ? " 1e-10" : " 1e-6"
to_the_right(id) = \
    begins(id, "gsl_rkf45") ? "rkf45".tolerance(id) : \
    begins(id, "gsl_msadams") ? "msadams".tolerance(id) : \
    id eq "newmark" ? "average acceleration (Newmark)" : \
    id eq "scipy_lfilter" ? "lfilter" : \
    id eq "scipy_lsim" ? "lsim" : ""
to_the_left(id) = \
    begins(id, "gsl_rk8pd") ? "rk8pd".tolerance(id) : \
    id eq "printed_double" ? "printed formulas, double" : \
    id eq "printed_single" ? "printed formulas, single" : ""
above(id) = \
    id eq "bank_1000_largest" ? "banks of 64 to 10,000" : \
    id eq "bank_8_largest" ? "bank of 8" : \
    id eq "run_frames" ? "64 channels" : \
    id eq "run_history" ? "rampwise_run, rampwise_step inline" : \
    id eq "inline_step_plain" ? "no hardware fma in the code" : ""
below(id) = id eq "bank_1000_avx2" ? "AVX2" : id eq "bank_1_largest" ? "bank of 1" : ""

do for [kind in "png svg"] {
    if (kind eq "png") { set terminal pngcairo size 1100,700 font "sans,11" background "white"; title_font = ",14"; dot = 1.5 }
    if (kind eq "svg") { set terminal svg size 1100,700 font "sans,14" background "white"; title_font = ",18"; dot = 0.9 }
    set label 1 font title_font
    set output picture.".".kind
    plot for [what in "gsl_rkf45 gsl_rk8pd gsl_msadams"] costs using (of(what, $3)):4 with lines linewidth 1.2 linecolor rgb gsl, \
         costs using (of("gsl", $3)):4 with points pointtype 9 pointsize dot linecolor rgb gsl, \
         costs using (of("scipy", $3)):4 with points pointtype 13 pointsize dot*1.2 linecolor rgb scipy, \
         for [what in "printed newmark"] costs using (of(what, $3)):4 with points pointtype 5 pointsize dot linecolor rgb book, \
         for [what in "bank run inline"] costs using (of(what, $3)):4 with points pointtype 7 pointsize dot linecolor rgb ours, \
         costs using 3:4:(to_the_right(strcol(1))) with labels left offset 1,0 noenhanced, \
         costs using 3:4:(to_the_left(strcol(1))) with labels right offset -1,0 noenhanced, \
         costs using 3:4:(above(strcol(1))) with labels left rotate by 25 offset 0.2,0.9 textcolor rgb ours noenhanced, \
         costs using 3:4:(below(strcol(1))) with labels center offset 0,-1 textcolor rgb ours noenhanced
    set output
}
