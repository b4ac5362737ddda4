# The demo plant's March: two weekly limits hang on the day a week begins.
. "$(dirname "$common")/rules/hangs.inc"
demo_march
"$weirbook" permit --month 2025-03 --rules
echo "exit status $?"
"$weirbook" permit --month 2025-03 --rules --as json | head -3
"$weirbook" permit --month 2025-03 --what-if week_starts=tuesday --as csv
