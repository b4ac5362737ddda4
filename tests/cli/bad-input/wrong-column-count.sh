small_book
cat >columns.csv <<END
date,point,parameter,value,unit
2025-03-05,EFF,BOD5,21
2025-03-06,EFF,BOD5,22,mg/L,more
2025-03-07,EFF,BOD5,23,mg/L
END
"$weirbook" load columns.csv
