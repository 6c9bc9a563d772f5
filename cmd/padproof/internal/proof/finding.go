package proof

import (
	"padproof/cmd/padproof/internal/result"
	"padproof/compare"
	"padproof/compare/uncertainty"
)

// emptyCheck is a check with nothing in it yet.
func emptyCheck(name, unit string) result.Check {
	none := result.Missing
	return result.Check{Name: name, Unit: unit, Measured: none, Expected: none, Low: none, High: none, Uncertainty: none, Ratio: none}
}

// decide enters a verdict and what it rests on.
func decide(one *result.Check, verdict compare.Verdict, reason string, limit compare.Limit, expected float64) {
	one.Verdict, one.Reason = string(verdict), reason
	one.Low, one.High = result.Number(limit.Low), result.Number(limit.High)
	if ratio, ok := compare.ToleranceRatio(limit, expected, float64(one.Uncertainty)); ok {
		one.Ratio = result.Number(ratio)
	}
}

// checkOf is a finding in the form of the result.
func checkOf(name, unit string, f compare.Finding) (result.Check, []result.Term) {
	one := emptyCheck(name, unit)
	one.Measured, one.Expected, one.Uncertainty = result.Number(f.Measured), result.Number(f.Expected), result.Number(f.UDB)
	decide(&one, f.Verdict, f.Reason, f.Limit, f.Expected)
	return one, termsOf(name, f.Budget)
}

func termsOf(check string, b uncertainty.Budget) []result.Term {
	terms := []result.Term{}
	for _, t := range b.Terms {
		terms = append(terms, result.Term{
			Check: check, Source: t.Source, StandardU: result.Number(t.StandardU),
			Sensitivity: result.Number(t.Sensitivity), Contributes: result.Number(t.StandardU * t.Sensitivity), DOF: result.Number(t.Dof),
		})
	}
	return terms
}

// scaledTerms are termsOf, each standing for so much of the check's unit.
func scaledTerms(check string, b uncertainty.Budget, perUnit float64) []result.Term {
	terms := termsOf(check, b)
	for i := range terms {
		terms[i].Sensitivity *= result.Number(perUnit)
		terms[i].Contributes *= result.Number(perUnit)
	}
	return terms
}

func unseenOf(all []compare.Unseen) []result.Unseen {
	list := []result.Unseen{}
	for _, u := range all {
		list = append(list, result.Unseen{Part: u.Name(), Text: u.Text()})
	}
	return list
}

// plusMinus and atMost are the limits of a sheet; one that was left out limits
// nothing.
func plusMinus(half *float64) compare.Limit {
	if half == nil {
		return compare.NoLimit()
	}
	return compare.PlusMinus(0, *half)
}

func atMost(most *float64) compare.Limit {
	if most == nil {
		return compare.NoLimit()
	}
	return compare.AtMost(*most)
}
