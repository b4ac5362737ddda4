# A limit on the size of files stands for a full disk: writes past it fail in the same way.
small_book
remember small.book
python3 - <<END
with open("much.csv", "w") as f:
    f.write("date,time,point,parameter,value,unit\n")
    for i in range(20000):
        f.write(f"2025-04-{1 + i % 30:02d},{i // 30 // 60:02d}:{i // 30 % 60:02d},EFF,BOD5,{i % 97}.5,mg/L\n")
END
prlimit --fsize=400000 "$weirbook" load much.csv 2>&1
echo "exit status $?"
unchanged
"$weirbook" check | head -n 1
"$weirbook" load --by tester much.csv | head -n 1
