package model

import (
	"math"
	"slices"
)

// covariance checks the square: names, symmetry, agreement with the standard
// errors, and that no combination of coefficients has a variance below zero.
func (c *compiler) covariance() {
	v := c.s.Covariance
	if v == nil {
		return
	}
	bad := func(row int, column, code string, args Args) {
		c.add(Problem{Code: code, Place: at("Covariance", row, column), Args: args})
	}
	if !slices.Contains(v.Names, Base) {
		bad(0, "", "covariance_without_base", nil)
	}
	errorsOf := c.standardErrors()
	for i, name := range v.Names {
		se, known := errorsOf[name]
		switch {
		case slices.Index(v.Names, name) < i:
			bad(i+1, name, "repeated_code", Args{"value": name})
		case name != Base && !known:
			bad(i+1, name, "unknown_coefficient", Args{"value": name})
		case se > 0 && math.Abs(math.Sqrt(math.Max(v.Values[i][i].float(), 0))-se) > 1e-6*se+1e-9:
			bad(i+1, name, "covariance_not_standard_error", Args{"value": v.Values[i][i].String(), "expected": Covar(se * se).String()})
		}
		for k := range i {
			if v.Values[i][k] != v.Values[k][i] {
				bad(i+1, v.Names[k], "covariance_not_symmetric", Args{"value": v.Values[i][k].String(), "expected": v.Values[k][i].String()})
			}
		}
	}
	if !c.refused() && !semidefinite(v.Values) {
		bad(0, "", "covariance_not_semidefinite", nil)
	}
}

// standardErrors are those of the workbook's coefficients, 0 where left out.
func (c *compiler) standardErrors() map[string]float64 {
	errors := map[string]float64{}
	for _, a := range c.s.Attributes {
		if a.LogOdds.Set || a.Slope.Set {
			errors[coefficient(a)] = a.StandardError.Or(Slope{}).Float()
		}
	}
	return errors
}

// coefficient is the name of an attribute row's coefficient.
func coefficient(a Attribute) string {
	if a.Code == "" {
		return a.Characteristic
	}
	return a.Characteristic + "." + a.Code
}

// semidefinite tries a Cholesky factorisation (A.-L. Cholesky, about 1910)
// with as little slack as 12 digits ask for: a pivot may be that far below
// zero, and then its column must vanish as well.
func semidefinite(values [][]Covar) bool {
	n := len(values)
	l := make([][]float64, n)
	for i := range n {
		l[i] = make([]float64, i+1)
		for k := range i + 1 {
			sum := values[i][k].float()
			for m := range k {
				sum -= float64(l[i][m] * l[k][m])
			}
			slack := 1e-9 * (math.Abs(values[i][i].float()) + math.Abs(values[k][k].float()))
			switch {
			case k == i && sum < -slack:
				return false
			case k == i:
				l[i][i] = math.Sqrt(math.Max(sum, 0))
			case l[k][k]*l[k][k] > slack*1e-3:
				l[i][k] = sum / l[k][k]
			case math.Abs(sum) > math.Sqrt(slack*math.Abs(values[i][i].float()))+slack:
				return false
			}
		}
	}
	return true
}

// Z95 is the point that a standard normal variable exceeds with probability
// 0.025.
const Z95 = 1.959963984540054

// Range is the 95 % range of the PD from the sampling error of the
// coefficients alone; ok is false where the workbook has no covariance. A
// known later adjustment adds nothing, an estimated one its own variance.
func (e *Edition) Range(a *Answers) (low, high PD, ok bool) {
	var v values
	if e.card.Covariance == nil || !e.evaluate(a, &v) {
		return 0, 0, false
	}
	x := map[string]float64{Base: 1}
	sum := e.constant
	for i := range e.items {
		item := &e.items[i]
		if item.Use != Scored {
			continue
		}
		sum += item.weight(&v[i])
		if n := item.attributeOf(v[i]); n >= 0 {
			x[item.Code+"."+item.Attributes[n].Code] = 1
		}
		if v[i].state == Given && item.slope.Digits != 0 {
			x[item.Code] = min(max(v[i].n, item.from), item.to).Float()
		}
	}
	se := e.card.AdjustmentError()
	variance := float64(se * se)
	names := e.card.Covariance.Names
	for i, row := range e.card.Covariance.Values {
		for k, c := range row {
			if x[names[i]] != 0 && x[names[k]] != 0 {
				variance += float64(float64(x[names[i]]*x[names[k]]) * float64(c))
			}
		}
	}
	half := float64(Z95 * math.Sqrt(math.Max(variance, 0)))
	return pdOf(sum.Float() - half), pdOf(sum.Float() + half), true
}

// AdjustmentError is the standard error of the later adjustment, 0 for a
// known one.
func (s *Scorecard) AdjustmentError() float64 { return s.Card.AdjustmentSE.Or(0).Float() }
