# One month under another rule: what differs in words, what does not as a count; the book stays as it was.
. "$(dirname "$common")/rules/hangs.inc"
hanging_book
remember small.book
"$weirbook" permit --month 2025-03 --what-if nondetect=half
echo "exit status $?"
"$weirbook" permit --month 2025-03 --what-if nondetect=full --what-if sign=never --as csv
echo "exit status $?"
"$weirbook" permit --month 2025-03 --what-if nondetect=zero
echo "exit status $?"
unchanged
