# The rows not accepted come out ready to be corrected and loaded.
small_book
cat >slips.csv <<END
date,point,parameter,value,unit,note
2025-03-05,EFF,BOD5,1O.2,mg/L,read off a slip
2025-03-06,EFF,BOD5,11,mg/L,
END
"$weirbook" load --by tester --set-aside todo.csv slips.csv
cat todo.csv
sed 's/1O.2/10.2/' todo.csv >corrected.csv
"$weirbook" load --by tester corrected.csv
"$weirbook" export --from 2025-03-05 --to 2025-03-06
"$weirbook" export --set-aside
