# What exceedances count as.
. "$(dirname "$common")/rules/hangs.inc"
demo_march
"$weirbook" permit --month 2025-03 --count
echo "exit status $?"
"$weirbook" permit --month 2025-03 --count --as csv
"$weirbook" permit --month 2025-02 --count
echo "exit status $?"
