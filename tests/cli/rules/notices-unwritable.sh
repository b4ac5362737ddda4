# A folder that cannot be made or written is named, and no half-written draft is left.
. "$(dirname "$common")/rules/hangs.inc"
demo_march
echo "a file" >taken
"$weirbook" permit --month 2025-03 --notices taken
echo "exit status $?"
"$weirbook" permit --month 2025-03 --notices no/such/folder
echo "exit status $?"
mkdir full
(
    ulimit -f 0
    "$weirbook" permit --month 2025-03 --notices full
    echo "exit status $?"
) 2>&1 | cat
ls -A full
