# Reading commands work on it; one that writes says why it cannot. Root may write any file: for root the folder is mounted
# read-only where that is allowed, else the commands run as nobody.
small_book
mkdir kept && mv small.book kept/
printf 'date,point,parameter,value,unit\n2025-03-28,EFF,BOD5,21,mg/L\n' >more.csv
if [ "$(id -u)" != 0 ]; then
    chmod 400 kept/small.book
    chmod 500 kept
    inside() { "$@"; }
elif unshare -m sh -c 'mount --bind kept kept && mount -o remount,bind,ro kept' 2>/dev/null; then
    inside() { unshare -m sh -c 'mount --bind kept kept && mount -o remount,bind,ro kept && exec "$@"' sh "$@"; }
else
    chmod 755 . kept
    chmod 444 kept/small.book more.csv
    inside() { setpriv --reuid=65534 --regid=65534 --clear-groups "$@"; }
fi
remember kept/small.book
inside "$weirbook" -b kept/small.book export | head -n 2
inside "$weirbook" -b kept/small.book load more.csv
echo "exit status $?"
unchanged
chmod 700 kept
