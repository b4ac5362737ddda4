# Reading commands work on it; one that writes says why it cannot. A folder that cannot be written stands for root, who
# may write any file, through a mount that is read-only.
small_book
mkdir kept && mv small.book kept/
if [ "$(id -u)" = 0 ] && unshare -m sh -c 'mount --bind kept kept && mount -o remount,bind,ro kept' 2>/dev/null; then
    inside() { unshare -m sh -c 'mount --bind kept kept && mount -o remount,bind,ro kept && exec "$@"' sh "$@"; }
else
    chmod 400 kept/small.book
    chmod 500 kept
    inside() { "$@"; }
fi
remember kept/small.book
inside "$weirbook" -b kept/small.book export | head -n 2
printf 'date,point,parameter,value,unit\n2025-03-28,EFF,BOD5,21,mg/L\n' >more.csv
inside "$weirbook" -b kept/small.book load more.csv
echo "exit status $?"
unchanged
chmod 700 kept
