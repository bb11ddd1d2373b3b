# The floor spectra of floor_spectra as a picture, PNG and SVG:
#
#     gnuplot -c floor_spectra.gnuplot SPECTRA.csv PICTURE "TITLE"
#
# writes PICTURE.png and PICTURE.svg: total acceleration of light equipment against its natural period, a line for each
# floor with its name beside the line, and below how far a spectrum of the floor's sampled history is off.

if (ARGC != 3) { print "usage: gnuplot -c floor_spectra.gnuplot SPECTRA.csv PICTURE TITLE"; exit status 2 }
spectra = ARG1
picture = ARG2
picture_title = ARG3

set datafile separator comma
set encoding utf8

# A column for the period, then the exact and the sampled spectrum of each floor. The first row has the names.
stats spectra skip 5 nooutput
n_floors = (STATS_columns - 1)/2
array Name[n_floors]
do for [f = 1:n_floors] {
    stats spectra using (heading = strcol(2*f), 0) every ::0::0 nooutput
    Name[f] = heading[1:strstrt(heading, " (m/s") - 1]
}
set datafile columnheaders
stats spectra using 1 nooutput
first = STATS_min
last = STATS_max

# Told apart by lightness as well, so that no eye depends on the hue.
array Palette[4] = ["#123c73", "#b84300", "#1f9a8a", "#7a3f98"]
array Largest[n_floors]
array At[n_floors]
reach = 0
do for [f = 1:n_floors] {
    stats spectra using 1:2*f nooutput
    Largest[f] = STATS_max_y
    At[f] = STATS_pos_max_y
    reach = STATS_max_y > reach ? STATS_max_y : reach
}

set logscale x
set xrange [first:last]
set xtics (0.01, 0.02, 0.05, 0.1, 0.2, 0.5, 1, 2, 5, 10)
set grid xtics ytics linetype 1 linecolor "#dddddd" linewidth 0.6
set border 3 linecolor "#555555"
set tics nomirror scale 0.5
set lmargin at screen 0.085
set rmargin at screen 0.97
set style textbox opaque fillcolor rgb "white" noborder margins 0,0
unset key

do for [kind in "png svg"] {
    if (kind eq "png") { set terminal pngcairo size 1100,760 font "sans,11" background "white"; title_font = ",14"; name_font = ",12"; dot = 0.9 }
    if (kind eq "svg") { set terminal svg size 1100,760 font "sans,14" background "white"; title_font = ",18"; name_font = ",16"; dot = 0.6 }
    set output picture.".".kind
    set multiplot
    set label picture_title at screen 0.5,0.97 center font title_font noenhanced
    set label "One line for each floor, named at its largest value (dot)." at screen 0.5,0.935 center
    set label "largest total acceleration of light equipment" at graph 0,1.04 left
    set label "m/s²" at screen 0.025, graph 0.5 center rotate by 90
    do for [f = 1:n_floors] {
        set label Name[f] at At[f], Largest[f] + 0.05*reach center front boxed \
            font name_font textcolor rgb Palette[f] noenhanced
    }
    set tmargin at screen 0.87
    set bmargin at screen 0.40
    set yrange [0:1.13*reach]
    set format x ""
    unset xlabel
    plot for [f = 1:n_floors] spectra using 1:2*f with lines linewidth 2 linecolor rgb Palette[f], \
         for [f = 1:n_floors] "+" using (At[f]):(Largest[f]) every ::0::0 \
             with points pointtype 7 pointsize dot linecolor rgb Palette[f]
    unset label
    set label "spectrum of the floor's sampled history, against this" at graph 0,1.07 left
    set label "%" at screen 0.025, graph 0.5 center rotate by 90
    set tmargin at screen 0.33
    set bmargin at screen 0.09
    set autoscale y
    set format x "%g"
    set xlabel "natural period of the equipment (s)"
    plot for [f = 1:n_floors] spectra using 1:(100*(column(2*f + 1)/column(2*f) - 1)) \
             with lines linewidth 1.4 linecolor rgb Palette[f]
    unset label
    unset multiplot
    set output
}
