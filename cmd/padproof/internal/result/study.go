package result

// StudySchema names the form of a [Study].
const StudySchema = "padproof.study.1"

// A Study is the repeatability and reproducibility of a bench, by analysis of
// variance.
type Study struct {
	Schema    string `json:"schema"`
	Study     string `json:"study"` // the folder or the file
	Simulated bool   `json:"simulated"`
	Figure    string `json:"figure"` // what was read: "loss", or the name of a column
	Unit      string `json:"unit"`   // of the figure and of standard deviations; "" where not known

	Operators []string `json:"operators"`
	Units     []string `json:"units"`
	Repeats   int      `json:"repeats"`
	Low       Number   `json:"low"` // limits that shares of the tolerance are of
	High      Number   `json:"high"`

	Table      []VarianceRow    `json:"table"`
	Pooled     bool             `json:"pooled"` // the interaction is taken for repeatability
	Components []StudyComponent `json:"components"`

	Categories Number   `json:"categories"` // how many kinds of unit the bench tells apart, not cut down
	Grade      string   `json:"grade"`      // good, usable, poor; "" where no repeat differs
	Says       []string `json:"says"`
	Warnings   []string `json:"warnings"`
}

// A VarianceRow is one row of the analysis of variance.
type VarianceRow struct {
	Source     string `json:"source"`
	SumSquares Number `json:"sum_of_squares"`
	DOF        int    `json:"dof"`
	MeanSquare Number `json:"mean_square"`
	F          Number `json:"f"`
	P          Number `json:"p"`
}

// A StudyComponent is one source of the spread. Shares are fractions. Those of the
// study and of the tolerance are of standard deviations (six of them beside the
// width of the limits) and do not add up.
type StudyComponent struct {
	Component   string `json:"component"` // repeatability, operator, interaction, reproducibility, gauge, unit, total
	Variance    Number `json:"variance"`
	SD          Ranged `json:"standard_deviation"`
	OfVariance  Number `json:"of_variance"`
	OfStudy     Number `json:"of_study"`
	OfTolerance Ranged `json:"of_tolerance"`
}
