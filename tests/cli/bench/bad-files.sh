# Files that cannot be read at all leave the book as it is.
bench_book
remember small.book
printf 'sheet,date,time,point,run,argument,value\nbod,2025-03-12,,EFF,1,initial_do,8.9\n' >no-unit.csv
printf 'sheet,date,time,point,run,argument,value,unit\nbod,2025-03-12,,EFF,1,initial_do\n' >short-row.csv
printf 'sheet,date,time,point,run,argument,value,unit\n' >header-only.csv
: >empty.csv
for file in no-unit.csv short-row.csv header-only.csv empty.csv missing.csv .; do
    "$weirbook" bench --from "$file"
    echo "exit status $?"
done
unchanged
