"$weirbook" formula sludge-volume-index settled_volume=250 mlss=2500
"$weirbook" formula mass-load flow=3785.411784m3/d concentration=20 --as csv
"$weirbook" formula mass-load flow=1 concentration=20 --units metric --as json
