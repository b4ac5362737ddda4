# Root may read everything: there the file is taken from under a name that cannot be reached.
small_book
remember small.book
cp march.csv locked.csv
chmod 000 locked.csv
if [ "$(id -u)" = 0 ]; then
    rm locked.csv
    ln -s locked.csv locked.csv
    "$weirbook" load locked.csv 2>&1 | sed 's/([^)]*)/({why})/'
else
    "$weirbook" load locked.csv 2>&1 | sed 's/([^)]*)/({why})/'
fi
unchanged
