small_book
cat >quotes.csv <<END
date,point,parameter,value,unit,note
2025-03-05,EFF,BOD5,21,mg/L,"an open quote
2025-03-06,EFF,BOD5,22,mg/L,fine
2025-03-07,EFF,BOD5,23,mg/L,6" gate
2025-03-08,EFF,BOD5,24,mg/L,"closed"
END
"$weirbook" load quotes.csv
