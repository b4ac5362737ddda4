small_book
remember small.book
python3 - "$PWD/small.book" <<END &
import sqlite3, sys, time
book = sqlite3.connect(sys.argv[1], isolation_level=None)
book.execute("BEGIN EXCLUSIVE")
open("locked", "w").close()
time.sleep(8)
END
while [ ! -e locked ]; do sleep 0.1; done
printf 'date,point,parameter,value,unit\n2025-03-28,EFF,BOD5,21,mg/L\n' >more.csv
"$weirbook" load more.csv
status=$?
kill $! 2>/dev/null
wait
unchanged
exit $status
