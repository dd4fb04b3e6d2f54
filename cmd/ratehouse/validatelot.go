package main

import (
	"fmt"
	"strconv"

	"ratehouse/trial/lot"
)

// publishedLot is the part of lot/published.json that validate runs.
type publishedLot struct {
	Proportions []struct {
		X, N           int
		Conf           float64
		Wilson         [2]string
		ClopperPearson [2]string `json:"clopper_pearson"`
	} `json:"proportion_intervals"`
	PChart struct {
		N              int
		Counts         []int
		Pbar, UCL, LCL float64
		Above          []int `json:"signals_above"`
	} `json:"p_chart"`
	IMR struct {
		X   []float64
		UCL float64 `json:"UCL_d2_1.128"`
		LCL float64 `json:"LCL_d2_1.128"`
	} `json:"imr_chart"`
	Grubbs struct {
		Data []float64
		G    float64
		One  float64 `json:"Gcrit_one_sided_0.05"`
		Two  float64 `json:"Gcrit_two_sided_0.05"`
	}
	StrdAnova map[string]struct {
		Groups [][]string
		Exact  map[string]any `json:"computed_exact_rational"`
	} `json:"strd_anova"`
	StrdUnivariate map[string]struct {
		Certified map[string]string
		Data      any
	} `json:"strd_univariate"`
}

func (c *checker) number(x any) float64 {
	f, err := strconv.ParseFloat(fmt.Sprint(x), 64)
	if err != nil {
		c.hold(false, "%v is no number", x)
	}
	return f
}

func checkStatistics(c *checker) {
	var v publishedLot
	c.readJSON("lot/published.json", &v)
	for _, r := range v.Proportions {
		name := fmt.Sprintf("%d of %d at %v", r.X, r.N, r.Conf)
		c.interval(name+" Wilson", lot.Wilson(r.X, r.N, r.Conf), [2]float64{c.number(r.Wilson[0]), c.number(r.Wilson[1])}, 6e-13)
		c.interval(name+" Clopper-Pearson", lot.ClopperPearson(r.X, r.N, r.Conf), [2]float64{c.number(r.ClopperPearson[0]), c.number(r.ClopperPearson[1])}, 6e-13)
	}
	var lots []lot.Sampled
	for _, x := range v.PChart.Counts {
		lots = append(lots, lot.Sampled{X: x, N: v.PChart.N})
	}
	if chart, ok := lot.PlainPChart(lots); ok {
		c.near("p chart mean", chart.Mean, v.PChart.Pbar, 1e-14)
		c.interval("p chart limits", chart.Limits[0], [2]float64{v.PChart.LCL, v.PChart.UCL}, 1e-13)
		for i := range chart.Signals {
			chart.Signals[i]++
		}
		c.same("p chart signals", fmt.Sprint(chart.Signals), fmt.Sprint(v.PChart.Above))
	}
	if chart, ok := lot.IndividualsChart(v.IMR.X); ok {
		c.interval("individuals chart", lot.Interval{Lo: chart.Lo, Hi: chart.Hi}, [2]float64{v.IMR.LCL, v.IMR.UCL}, 1e-13)
	}
	if o, ok := lot.Grubbs(v.Grubbs.Data, lot.High, 0.05); ok {
		c.near("Grubbs G", o.G, v.Grubbs.G, 1e-12)
		c.near("Grubbs one-sided", o.Critical, v.Grubbs.One, 1e-11)
		c.near("Grubbs two-sided", lot.GrubbsCritical(len(v.Grubbs.Data), lot.EitherSide, 0.05), v.Grubbs.Two, 1e-11)
	}
	c.certified(&v)
}

func (c *checker) interval(name string, got lot.Interval, want [2]float64, most float64) {
	c.near(name+" low", got.Lo, want[0], most)
	c.near(name+" high", got.Hi, want[1], most)
}

// certified runs the reference data sets whose decimals float64 can hold.
func (c *checker) certified(v *publishedLot) {
	for name, most := range map[string]float64{"SiRstv": 1e-12, "AtmWtAg": 1e-9, "SmLs01": 1e-14, "SmLs04": 1e-9} {
		var groups [][]float64
		for _, g := range v.StrdAnova[name].Groups {
			var x []float64
			for _, s := range g {
				x = append(x, c.number(s))
			}
			groups = append(groups, x)
		}
		a, ok := lot.OneWay(groups)
		c.hold(ok, "%s: no analysis", name)
		c.near(name+" F", a.F, c.number(v.StrdAnova[name].Exact["F"]), most)
	}
	for _, name := range sortedKeys(v.StrdUnivariate) {
		data, ok := v.StrdUnivariate[name].Data.([]any)
		if !ok { // described in words
			continue
		}
		var x []float64
		for _, s := range data {
			x = append(x, c.number(s))
		}
		m := lot.MomentsOf(x)
		for what, got := range map[string]float64{"mean": m.Mean, "sd": m.SD, "lag1": m.Lag1} {
			c.near(name+" "+what, got, c.number(v.StrdUnivariate[name].Certified[what]), 1e-12)
		}
	}
}

func checkReference(c *checker) {
	var v struct {
		Proportions []struct {
			X, N           int
			Confidence     float64
			Wilson         [2]float64
			ClopperPearson [2]float64 `json:"clopper_pearson"`
		}
		Quantiles []struct{ X, P, Quantiles []float64 }
		OneWay    []struct {
			Groups [][]float64
			F, P   float64
		} `json:"one_way"`
		Comparison struct {
			Rows []struct {
				Value                     float64
				Level, Calibre, Depositor string
				Round                     int
			}
			F, P    float64
			Effects map[string]float64
		}
	}
	c.readJSON("lot/vectors.json", &v)
	for _, r := range v.Proportions {
		name := fmt.Sprintf("%d of %d at %v", r.X, r.N, r.Confidence)
		c.interval(name+" Wilson", lot.Wilson(r.X, r.N, r.Confidence), r.Wilson, 1e-13)
		c.interval(name+" Clopper-Pearson", lot.ClopperPearson(r.X, r.N, r.Confidence), r.ClopperPearson, 1e-12)
	}
	for _, q := range v.Quantiles {
		for i, p := range q.P {
			c.near(fmt.Sprintf("quantile %v of %d", p, len(q.X)), lot.Quantile(q.X, p), q.Quantiles[i], 1e-14)
		}
	}
	for _, w := range v.OneWay {
		a, _ := lot.OneWay(w.Groups)
		c.near("F", a.F, w.F, 1e-12)
		c.near("P", a.P, w.P, 1e-11)
	}
	var list []lot.Observation
	for _, r := range v.Comparison.Rows {
		list = append(list, lot.Observation{Value: r.Value, Level: r.Level, Block: lot.Block{Round: r.Round, Calibre: r.Calibre, Depositor: r.Depositor}})
	}
	got, _ := lot.Compare(list)
	c.near("comparison F", got.F, v.Comparison.F, 1e-10)
	c.near("comparison P", got.P, v.Comparison.P, 1e-10)
	for _, set := range got.Sets {
		for _, l := range set {
			c.near("effect of "+l.Name, l.Effect, v.Comparison.Effects[l.Name], 1e-11)
		}
	}
}
