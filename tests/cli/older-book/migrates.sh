# The same once a load has migrated the book: no row of it is new.
old_book
cp old.book as-it-was
printf 'date,time,point,parameter,value,unit\n2025-03-10,,EFF,FLOW,2.40,MGD\n' >again.csv
"$weirbook" load again.csv >loaded 2>told || cat told
"$weirbook" permit --month 2025-03 --as csv
"$weirbook" export
"$weirbook" export --set-aside
cmp as-it-was old.book.format-1.backup
sqlite3 old.book "PRAGMA user_version"
"$weirbook" check >/dev/null
