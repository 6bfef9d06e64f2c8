package diagram

import (
	"math"
	"sort"
)

// peaks stands each at its position between its levels. Peaks that would cover
// each other are made narrow and set side by side.
func (l *layout) peaks() {
	var peaks []*state
	for _, t := range l.net.stretches {
		p := t.peak
		if p == nil {
			continue
		}
		start, end := t.from.x+t.dir*t.from.half, t.to.x-t.dir*t.to.half
		gap := math.Abs(end - start)
		p.half = math.Min(13, math.Max(5, gap*0.09))
		flank := math.Max(0.14*gap, 8) + p.half
		room := math.Max(0, gap-2*flank)
		p.x = start + t.dir*((gap-room)/2+p.position()*room)
		p.low, p.high = math.Min(start, end)+7, math.Max(start, end)-7
		peaks = append(peaks, p)
	}
	used := map[*state]bool{}
	for i, p := range peaks {
		clump, sum := []*state{p}, p.x
		for _, q := range peaks[i+1:] {
			if !used[p] && !used[q] && math.Abs(q.y-p.y) < 5 && math.Abs(q.x-p.x) < p.half+q.half+3 {
				clump, sum = append(clump, q), sum+q.x
				used[q] = true
			}
		}
		if len(clump) == 1 {
			continue
		}
		sort.SliceStable(clump, func(a, b int) bool { return clump[a].x < clump[b].x })
		n, low, high := float64(len(clump)), p.low, p.high
		half := math.Max(2.5, math.Min(8, (high-low)/n/2-2))
		for k, q := range clump {
			q.half = half
			x := sum/n + (float64(k)-(n-1)/2)*(2*half+4)
			q.x = math.Max(q.low+half, math.Min(q.high-half, x))
		}
	}
}
