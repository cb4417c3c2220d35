package resistance

var deflectionWording = wording{
	id: Deflecting, unit: "m",
	clause:  "deflection limit of the job, as span over a number; overhangs as twice their length",
	formula: "w ≤ limit",
}

var frequencyWording = wording{
	id: Vibrating, unit: "Hz",
	clause:  "frequency floor of the job",
	formula: "floor ≤ f",
}

// deflection reports the span or overhang that uses most of its own limit.
func deflection(d *Demand, t *trace) use {
	var worst use
	at, named := -1, 0.0
	for i := range d.Deflections {
		u := against(d.Deflections[i].Value, d.Deflections[i].Limit)
		// Of spans that differ by rounding alone the first is named.
		if at < 0 || u.utilisation > named*(1+tolerance) {
			at, named = i, u.utilisation
		}
		if i == 0 || u.utilisation > worst.utilisation {
			worst = u
		}
	}
	if at >= 0 {
		t.put("span", d.Deflections[at].Span, "m")
		t.say(d.Deflections[at].Where)
	}
	return worst
}

// frequency holds the lowest natural frequency to the floor: the floor is the demand,
// the frequency the resistance.
func frequency(d *Demand, t *trace) use {
	if d.FrequencyFloor == 0 {
		return use{}
	}
	t.put("floor", d.FrequencyFloor, "Hz")
	t.put("f", d.Frequency, "Hz")
	return against(d.FrequencyFloor, d.Frequency)
}

// netFactor returns net over gross area of a tension member, 1 where none is stated,
// and whether it can be used.
func netFactor(d *Demand, t *trace) (float64, bool) {
	switch net := d.NetAreaFactor; {
	case net == 0:
		return 1, true
	case net > 0 && net <= 1:
		return net, true
	}
	t.say("the net area factor is not from above 0 to 1, so the resistance is taken as zero")
	return 0, false
}
