# One book that is none, one with a missed sample, one without: each is told, the rest go on.
small_book
mv small.book clear.book
"$weirbook" new empty.book plant >/dev/null
echo nothing >junk.book
"$weirbook" due -b clear.book -b junk.book -b empty.book --on 2025-03-19
echo "exit $?"
"$weirbook" due -b clear.book -b empty.book --on 2025-03-19 --days 1
echo "exit $?"
"$weirbook" due -b clear.book -b empty.book --on 2025-03-19 --days 1 --as csv
"$weirbook" due -b clear.book -b empty.book --on 2025-03-19 --sheet
echo "exit $?"
