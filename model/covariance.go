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
	good := true
	bad := func(row int, column, code string, args Args) {
		c.add(Problem{Code: code, Place: at("Covariance", row, column), Args: args})
		good = false
	}
	if !slices.Contains(v.Names, Base) {
		bad(0, "", "covariance_without_base", nil)
	}
	errors := c.standardErrors()
	seen := map[string]bool{}
	for i, name := range v.Names {
		se, known := errors[name]
		variance := v.Values[i][i].Float()
		switch {
		case seen[name]:
			bad(i+1, name, "repeated_code", Args{"value": name})
		case name != Base && !known:
			bad(i+1, name, "unknown_coefficient", Args{"value": name})
		case se > 0 && math.Abs(math.Sqrt(math.Max(variance, 0))-se) > float64(1e-6*se)+1e-15:
			bad(i+1, name, "covariance_not_standard_error", Args{"value": v.Values[i][i].String(), "expected": Covar(se * se).String()})
		}
		seen[name] = true
		for k := range i {
			if v.Values[i][k] != v.Values[k][i] {
				bad(i+1, v.Names[k], "covariance_not_symmetric", Args{"value": v.Values[i][k].String(), "expected": v.Values[k][i].String()})
			}
		}
	}
	// The range would then leave out what that coefficient adds to it.
	for i, a := range c.s.Attributes {
		if name := coefficient(a); errors[name] > 0 && !seen[name] {
			c.add(Problem{Code: "covariance_lacks", Place: at("Attributes", i+1, "Standard error"), Args: Args{"value": name}})
		}
	}
	if good && !semidefinite(v.Values) {
		bad(0, "", "covariance_not_semidefinite", nil)
	}
	c.e.base = slices.Index(v.Names, Base)
	for i := range c.e.items {
		item := &c.e.items[i]
		item.slopeCovariance = slices.Index(v.Names, item.Code)
		item.covariance = make([]int, len(item.Attributes))
		for n, a := range item.Attributes {
			item.covariance[n] = slices.Index(v.Names, coefficient(a))
		}
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

// semidefinite tells whether a symmetric square is a covariance but for the
// rounding of its numbers to 12 digits: scaled to correlations, and with that
// much added to its diagonal, it must have a Cholesky factor (A.-L. Cholesky,
// 1910). The slack allows for a hundred coefficients rounded all to the worst.
func semidefinite(values [][]Covar) bool {
	const slack = 1e-10
	scale := make([]float64, len(values))
	l := make([][]float64, len(values))
	for i, row := range values {
		if row[i] < 0 {
			return false
		}
		scale[i] = math.Sqrt(row[i].Float())
		l[i] = make([]float64, i+1)
		for k := range i {
			if row[k] == 0 {
				continue
			}
			if scale[i] == 0 || scale[k] == 0 {
				return false
			}
			l[i][k] = row[k].Float() / scale[i] / scale[k]
		}
		left := 1 + slack
		for k := range i {
			for m := range k {
				l[i][k] -= float64(l[i][m] * l[k][m])
			}
			l[i][k] /= l[k][k]
			left -= float64(l[i][k] * l[i][k])
		}
		if left <= 0 {
			return false
		}
		l[i][i] = math.Sqrt(left)
	}
	return true
}
