small_book
python3 - <<END
import sqlite3
book = sqlite3.connect("small.book")
book.execute("PRAGMA user_version = 99")
book.commit()
END
remember small.book
"$weirbook" permit --month 2025-03
status=$?
unchanged
exit $status
