small_book
printf 'date,point,parameter,value,unit\n2025-03-26,EFF,BOD5,21,mg/L\n' >a.csv
printf 'date,point,parameter,value,unit\n2025-03-27,EFF,BOD5,,mg/L\n' >b.csv
"$weirbook" load --as csv a.csv b.csv
"$weirbook" load --as json a.csv
