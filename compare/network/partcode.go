package network

// Code returns the value as drawings write it, the letter of the prefix in place of
// the decimal point (IEC 60062): 4R7, 680, 1k5; 220p; 10m.
func (p Part) Code() string { return valueCode(p.Kind, p.Value) }
