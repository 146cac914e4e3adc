"""A ring and a bar as a bitmap of 200 by 160 dots, for potrace 1.16:
python3 potrace_sign.py; potrace -s bitmap.pbm -o potrace.svg; potrace -b dxf bitmap.pbm -o potrace.dxf"""
rows = []
for y in range(160):
    rows.append(" ".join("1" if (40 <= ((x - 80)**2 + (y - 80)**2)**.5 < 60) or (150 <= x < 180 and 20 <= y < 140) else "0" for x in range(200)))
open("bitmap.pbm", "w").write("P1\n200 160\n" + "\n".join(rows) + "\n")
