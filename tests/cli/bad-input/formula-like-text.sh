# Text from a file that begins like a formula is guarded in what a spreadsheet may open, and comes back as it was.
small_book
printf 'date,point,parameter,value,unit,note\n2025-03-05,EFF,BOD5,21,mg/L,=1+2\n2025-03-06,EFF,BOD5,22,mg/L,@here\n2025-03-07,EFF,BOD5,23,mg/L,-1.5\n' >notes.csv
"$weirbook" load --by tester notes.csv >/dev/null
"$weirbook" export --from 2025-03-05 --to 2025-03-07 | tee out.csv
"$weirbook" new copy.book plant >/dev/null
"$weirbook" -b copy.book load --by tester out.csv >/dev/null
sqlite3 copy.book "SELECT note FROM readings ORDER BY date"
