#!/bin/sh
# A moon over the sea, drawn by Inkscape 1.2.2 from inkscape_start.svg: text to paths, one circle less
# another, a clone turned, a group, a shape flipped and grown. Its own extension (beside it in
# share/inkscape/extensions, run with inkex) then writes the R14 DXF.
inkscape --batch-process --actions="select-by-id:word;object-to-path;select-clear;\
select-by-id:moon,bite;path-difference;select-clear;\
select-by-id:star;clone;transform-translate:100,-20;transform-rotate:12;select-clear;\
select-by-id:ring;object-to-path;select-clear;\
select-by-id:cloud;object-flip-horizontal;transform-scale:5;select-clear;\
select-by-id:wind,star;selection-group;select-clear;\
export-filename:inkscape.svg;export-do" inkscape_start.svg
python3 dxf_outlines.py --units=mm --layer_option=all --output=inkscape_r14.dxf inkscape.svg
