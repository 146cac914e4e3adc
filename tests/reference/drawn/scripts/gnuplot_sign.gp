# A heart, a wave and a frame, gnuplot 5.4 patchlevel 4. Writes gnuplot.svg and gnuplot.dxf.
set samples 61
set parametric
set trange [0:2*pi]
set xrange [-20:20]
set yrange [-18:14]
unset key; unset border; unset tics
set size ratio -1
set title "HEART"
set label "open late" at 0,-17 center
set object 1 circle at 0,0 size 4 fs empty border rgb "#00a040"
set arrow 1 from -18,-16 to 18,-16 nohead lw 2 lc rgb "#0000ff"
heart(t) = 13*cos(t)-5*cos(2*t)-2*cos(3*t)-cos(4*t)
set terminal svg size 600,480 dynamic background rgb "white"
set output "gnuplot.svg"
plot 16*sin(t)**3, heart(t) with lines lw 3 lc rgb "#ff2040", \
     6*t-18, 1.5*sin(2*t)-15 with lines lw 2 lc rgb "#0000ff"
set terminal dxf
set output "gnuplot.dxf"
replot
set output
