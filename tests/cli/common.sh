# What the command scripts share. Each runs in an empty folder of its own.
set -u

# A small plant: one outfall, BOD5 and flow, since 2025-01-01.
small_plant() {
    mkdir -p plant
    cat >plant/plant.csv <<END
field,value
name,Small Works
permit,XX0000001
receiving_water,Invented Creek
units,us
since,2025-01-01
END
    cat >plant/points.csv <<END
point,name,role,outfall
INF,Raw influent,influent,
EFF,Final effluent,effluent,001
END
    cat >plant/limits.csv <<END
outfall,point,parameter,basis,statistic,bound,limit,unit,samples
001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,1/week
001,EFF,BOD5,concentration,weekly-average,max,45,mg/L,
001,EFF,BOD5,removal,monthly-average,min,85,%,
END
}

# A book of it with four weeks of March 2025, named small.book.
small_book() {
    small_plant
    cat >march.csv <<END
date,time,point,parameter,value,unit
2025-03-04,,INF,BOD5,200,mg/L
2025-03-04,,EFF,BOD5,20.0,mg/L
2025-03-11,,EFF,BOD5,24,mg/L
2025-03-18,,EFF,BOD5,<2,mg/L
2025-03-25,,EFF,BOD5,30,mg/L
END
    "$weirbook" new small.book plant >/dev/null
    "$weirbook" load --by tester march.csv >/dev/null
}

# Says whether a file is byte for byte what it was.
remember() { sha256sum "$1" >.remembered; }
unchanged() { sha256sum --quiet -c .remembered && echo "unchanged"; }

# A book as the program of format 1 wrote it.
old_book() {
    { echo "PRAGMA page_size = 8192; PRAGMA synchronous = OFF;"; cat "$fixtures/../schema/001-book.sql" "$fixtures/../tests/book/format-1.sql"; } | sqlite3 old.book
}

# The files of raw values beside the scripts of bench sheets.
sheets=$(dirname "$common")/bench

# A book for bench sheets, named small.book: a digester and an aeration basin beside the small plant's points.
bench_book() {
    small_plant
    printf 'AER,Aeration basin,aeration,\nDIG,Digester,digester,\n' >>plant/points.csv
    "$weirbook" new small.book plant >/dev/null
}
