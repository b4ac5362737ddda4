"$weirbook" formula sludge-volume-indx settled_volume=250 mlss=2500
echo "exit status $?"
"$weirbook" formula sludge-volume-index settled_volume=250
echo "exit status $?"
"$weirbook" formula sludge-volume-index settled_volume=250 mls=2500
echo "exit status $?"
"$weirbook" formula sludge-volume-index settled_volume=250 mlss=0
echo "exit status $?"
"$weirbook" formula sludge-volume-index settled_volume=250gal mlss=2500
echo "exit status $?"
"$weirbook" formula sludge-volume-index settled_volume=\<5 mlss=2500
echo "exit status $?"
