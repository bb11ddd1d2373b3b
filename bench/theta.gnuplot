# A coefficient set against theta = w h, PNG and SVG: its error above, its cost below.
#
#     gnuplot -c theta.gnuplot bench_theta.csv PICTURE
#
# writes PICTURE.png and PICTURE.svg.

if (ARGC != 2) { print "usage: gnuplot -c theta.gnuplot THETA.csv PICTURE"; exit status 2 }
thetas = ARG1
picture = ARG2

set datafile separator comma
set datafile columnheaders
set encoding utf8
set logscale x
set format x "10^{%L}"
set xrange [1e-9:1e6]
set xtics 10
set border 3 linecolor "#555555"
set tics nomirror scale 0.5
set grid xtics ytics linetype 1 linecolor "#dddddd" linewidth 0.6
unset key
set lmargin at screen 0.085
set rmargin at screen 0.97

# Told apart by every kind of eye, and by dashes.
set style line 1 linecolor rgb "#0072b2" linewidth 2.6
set style line 2 linecolor rgb "#d55e00" linewidth 2 dashtype 1
set style line 3 linecolor rgb "#a06a00" linewidth 2 dashtype (8, 5)

# Two everyday cases: 1 Hz sampled at 1 kHz, and a period of 10 s sampled at 10 kHz.
everyday = 2*pi*1e-3
slow = 2*pi*1e-5

# Beyond 100 % an error says nothing more.
shown(error) = error < 1 ? error : 1

do for [kind in "png svg"] {
    if (kind eq "png") { set terminal pngcairo size 1100,860 font "sans,11" background "white"; title_font = ",14" }
    if (kind eq "svg") { set terminal svg size 1100,860 font "sans,14" background "white"; title_font = ",18" }
    set output picture.".".kind
    set multiplot

    set label 1 "The coefficients of a step, 5 % damped" at screen 0.5, 0.972 center font title_font
    set label 2 "Blue: rampwise. Orange: the formulas that books print, in double (solid) and in single precision (dashed)." \
        at screen 0.5, 0.94 center
    do for [i = 1:2] {
        theta = i == 1 ? everyday : slow
        set arrow i from theta, graph 0 to theta, graph 1 nohead linecolor rgb "#888888" dashtype (3, 4)
    }
    set tmargin at screen 0.905
    set bmargin at screen 0.42
    set logscale y
    set format y "10^{%L}"
    set yrange [1e-17:100]
    set ytics 1000
    set ylabel "largest error of a coefficient, of its largest value"
    set label 3 "1 Hz at 1 kHz" at everyday*1.15, 10 left textcolor rgb "#555555"
    set label 4 "10 s at 10 kHz" at slow*1.15, 10 left textcolor rgb "#555555"
    set label 5 "rampwise" at 1e-6, 1.2e-15 center textcolor rgb "#0072b2"
    set label 6 "printed, double" at 3e-5, 1e-5 right textcolor rgb "#d55e00"
    set label 7 "printed, single" at 0.06, 1e-2 left textcolor rgb "#a06a00"
    set label 8 "100 % and more: no digit left" at 8e5, 10 right textcolor rgb "#555555"
    plot thetas using 1:(shown($2)) with lines linestyle 1, "" using 1:(shown($4)) with lines linestyle 2, \
         "" using 1:(shown($6)) with lines linestyle 3

    unset label
    set label 1 "rampwise" at 1e-6, first 700 center textcolor rgb "#0072b2"
    set label 2 "printed, double and single" at 1e-6, first 160 center textcolor rgb "#d55e00"
    set tmargin at screen 0.37
    set bmargin at screen 0.075
    unset logscale y
    set format y "%g"
    set yrange [0:*]
    set ytics autofreq
    set xlabel "θ = natural circular frequency times interval between samples"
    set ylabel "ns a set, on this machine"
    plot thetas using 1:3 with lines linestyle 1, "" using 1:5 with lines linestyle 2, "" using 1:7 with lines linestyle 3
    unset xlabel
    unset label
    unset arrow
    unset multiplot
    set output
}
