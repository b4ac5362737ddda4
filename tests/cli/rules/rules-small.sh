# "met as zero, exceeded as half": the alternatives of one rule stand in one sentence.
. "$(dirname "$common")/rules/hangs.inc"
hanging_book
"$weirbook" permit --month 2025-03 --rules
echo "exit status $?"
"$weirbook" permit --month 2025-03 --rules --as csv
