small_book
"$weirbook" permit --month 2025-03 >/dev/full
echo "exit status $?"
"$weirbook" export >/dev/full
echo "exit status $?"
"$weirbook" help >/dev/full
echo "exit status $?"
