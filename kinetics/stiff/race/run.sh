#!/bin/sh
# Times this integrator and the reference harness on the same problems, in turn,
# three times, and prints the table of ratios at equal error; then a map of one
# mechanism of ten species at sixty temperatures, which this integrator also
# reads at sixty times each, in one line.
#
#	race/run.sh HARNESS [ROUNDS [PROBLEM...]]
#
# With names of problems the map is left out.
#
# HARNESS is the folder with the problems, the harness and its compare.py. It is
# copied and built in a temporary folder; nothing is written to it.
set -eu
if [ $# -lt 1 ] || [ ! -f "$1/problems.json" ]; then
	echo "usage: $0 HARNESS [ROUNDS [PROBLEM...]]; HARNESS holds problems.json" >&2
	exit 2
fi
here=$(cd "$(dirname "$0")" && pwd)
harness=$(cd "$1" && pwd)
shift
rounds=3
if [ $# -gt 0 ]; then
	rounds=$1
	shift
fi
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT INT TERM
cp -R "$harness/." "$work/"
chmod -R u+w "$work"
(cd "$work" && make >&2)
(cd "$here" && go build -o "$work/race" .)
map=
if [ $# -eq 0 ]; then
	map=$work/map
	mkdir "$map"
	"$work/race" -write-map "$map/problems.json"
fi
i=0
while [ "$i" -lt "$rounds" ]; do
	i=$((i + 1))
	echo "round $i of $rounds" >&2
	(cd "$work" && build/cvode_anchor "$@" >>reference.jsonl)
	"$work/race" -problems "$work/problems.json" "$@" >>"$work/race.jsonl"
	if [ -n "$map" ]; then
		"$work/build/cvode_anchor" --dir "$map" --no-mc --budget-ms 5 >>"$map/reference.jsonl"
		"$work/race" -problems "$map/problems.json" -budget 5ms -points 60 >>"$map/race.jsonl"
	fi
done
cd "$work"
echo "with setup"
python3 compare.py reference.jsonl race.jsonl
echo
echo "integrator kept"
python3 compare.py --key us_nosetup reference.jsonl race.jsonl
if [ -n "$map" ]; then
	echo
	echo "map of $(grep -c '"name"' "$map/problems.json") temperatures, with setup"
	python3 compare.py "$map/reference.jsonl" "$map/race.jsonl" | awk '
		/^map/ { r = $4; if (!n++ || r < low) low = r; if (r > high) high = r }
		/^geometric/ { print; printf "lowest %.3f, highest %.3f of %d\n", low, high, n }'
fi
