small_book
cat >unknown.csv <<END
date,point,parameter,value,unit
2025-03-05,EFF,BOD5,21,mg/l
2025-03-06,EF,BOD5,22,mg/L
2025-03-07,EFF,BOD,23,mg/L
2025-03-08,EFF,BOD5,24,MGD
END
"$weirbook" load unknown.csv
