package operating

import (
	"math"

	"standoff/netlist/circuit"
	"standoff/netlist/network"
)

// charging is the network that fills the timing capacitor, as the capacitor sees
// it. Between two changes of state of diodes and transistors the current into
// the capacitor falls straight with its voltage:
//
//	i = (vth - v)/rth
//
// and the time from v1 to v2 is rth C ln((vth - v1)/(vth - v2)). Where states
// change on the way, the straight pieces are joined where they cross. Exact for
// the piecewise-linear network; units SI.
type charging struct {
	mesh     *mesh
	node     network.Node
	probe    network.Branch // the current into the capacitor
	transfer []float64      // rise of every node for 1 A into the capacitor's net
	bends    bool           // diodes or transistors stand in the network
	watched  *regulated     // a current source, nil for none
	held     float64        // the voltage at which the net was seized last, NaN for none
	across   float64        // what stood across it when the net was seized last
	rise     float64        // how far the net may rise from there on the same straight piece
	fall     float64        // and how far it may fall
	grip     network.Branch // what holds the capacitor's net at a voltage, in a network that bends
}

// newCharging adds the probe to a mesh that is not compiled yet.
func newCharging(m *mesh, capacitor circuit.NodeID) *charging {
	c := &charging{mesh: m, node: m.node(capacitor), bends: m.bends, held: math.NaN()}
	c.probe = m.net.Current(c.node, 0)
	if c.bends {
		c.grip = m.net.Resistor(c.node, 0)
	}
	return c
}

// gripOhms is the resistance in ohm behind which the capacitor's net is held, and
// noGrip lets go of it.
const gripOhms = 1

var noGrip = math.Inf(1)

// draw solves the network with a current flowing into the capacitor.
func (c *charging) draw(amperes float64) {
	solver := c.mesh.solver
	solver.Values[c.probe] = amperes
	c.held = math.NaN()
	if c.bends {
		solver.Values[c.grip] = noGrip
	}
	solver.Solve()
	solver.Transfer(c.node, c.transfer)
}

// seize solves the network with the capacitor's net held at a voltage, and leaves it
// solved on the straight piece that counts there.
func (c *charging) seize(volts float64) {
	if volts == c.held {
		return
	}
	solver := c.mesh.solver
	solver.Values[c.grip] = gripOhms
	amperes := 0.0
	for range maxPieces {
		solver.Values[c.probe] = amperes - volts/gripOhms
		solver.Solve()
		solver.Transfer(c.node, c.transfer)
		miss := volts - solver.Voltage(c.node)
		if math.Abs(miss) <= 1e-9*(1+math.Abs(volts)) {
			break
		}
		amperes -= miss / c.transfer[c.node]
	}
	if c.watched != nil { // let go, the net of an ideal source hangs on its last digits
		c.across = c.mesh.across(c.watched)
	}
	c.rise = solver.Reach(c.transfer, 1) * c.transfer[c.node]
	c.fall = solver.Reach(c.transfer, -1) * c.transfer[c.node]
	c.held = volts
	solver.Values[c.probe], solver.Values[c.grip] = amperes, noGrip
	solver.SolveHeld()
	solver.Transfer(c.node, c.transfer)
}

// thevenin returns the straight piece of the last solution: the voltage at which
// it would deliver nothing, and its resistance.
func (c *charging) thevenin() (volts, ohms float64) {
	return c.idle(c.node), c.transfer[c.node]
}

// idle returns the potential that a node would have on the straight piece of the
// last solution with nothing drawn.
func (c *charging) idle(n network.Node) float64 {
	return c.mesh.solver.Voltage(n) + c.transfer[n]*c.mesh.solver.Values[c.probe]
}

// maxPieces bounds the search for the straight piece on which a condition holds.
const maxPieces = 40

// meet looks for the capacitor voltage at which a condition holds that is linear
// on a straight piece: condition reads the last solution and returns voltage and
// current where it would hold on that piece. The network is left solved there.
func (c *charging) meet(condition func() (volts, amperes float64)) float64 {
	volts, _ := condition()
	if !c.bends {
		return volts
	}
	for range maxPieces {
		c.seize(volts)
		next, _ := condition()
		if math.Abs(next-volts) <= 1e-9*(1+math.Abs(volts)) {
			break
		}
		volts = next
	}
	return volts
}

// tangent returns the straight piece at a capacitor voltage.
func (c *charging) tangent(volts float64) piece {
	if c.bends {
		c.seize(volts)
	}
	vth, rth := c.thevenin()
	return piece{vth, rth}
}

// current returns the charging current at a capacitor voltage.
func (c *charging) current(volts float64) float64 { return c.tangent(volts).current(volts) }

// piece is a straight piece of the charging current.
type piece struct{ vth, rth float64 }

func (p piece) current(volts float64) float64 { return (p.vth - volts) / p.rth }

// time returns how long the capacitor takes from the valley to the peak and how
// far, relative to the swing, its voltage departs from the straight line between
// them. The current at the peak must be positive.
func (c *charging) time(s *cycle) (seconds, departure float64) {
	from, to := s.lower+s.vv, s.lower+s.vp
	if !c.bends {
		l := math.Log1p((to - from) / (s.rth * s.atPeak))
		return s.rth * s.c * l, rampDeparture(l)
	}
	r := ramp{charging: c, farads: s.c, at: []moment{{0, from}}}
	r.climb(from, to)
	return r.seconds, r.departure()
}

// ramp is the capacitor voltage over time.
type ramp struct {
	charging *charging
	farads   float64
	seconds  float64
	at       []moment // ends of the straight pieces of current
	pieces   []piece
}

type moment struct{ seconds, volts float64 }

// beyond is by how much in volt the end of a straight piece is passed to find the next.
const beyond = 1e-7

// climb adds the way from one voltage to another, piece after piece.
func (r *ramp) climb(from, to float64) {
	c, at, falls := r.charging, from, to < from
	for n := 0; from != to; n++ {
		p, end := c.tangent(at), to
		switch {
		case n == maxPieces:
		case falls:
			end = max(at-c.fall, to)
		default:
			end = min(at+c.rise, to)
		}
		r.add(p, from, end)
		from, at = end, min(end+beyond, to)
		if falls {
			at = max(end-beyond, to)
		}
	}
}

// add appends a straight piece.
func (r *ramp) add(p piece, from, to float64) {
	r.seconds += r.farads * p.rth * math.Log1p((to-from)/(p.rth*p.current(to)))
	r.at = append(r.at, moment{r.seconds, to})
	r.pieces = append(r.pieces, p)
}

// departure returns the largest distance from the straight line between the ends
// of the ramp, relative to the swing: at an end of a piece, or inside one where
// its slope is that of the line.
func (r *ramp) departure() float64 {
	first, last := r.at[0], r.at[len(r.at)-1]
	slope := (last.volts - first.volts) / (last.seconds - first.seconds)
	most := 0.0
	off := func(seconds, volts float64) {
		most = max(most, math.Abs(volts-first.volts-slope*seconds))
	}
	for i, p := range r.pieces {
		a, b := r.at[i], r.at[i+1]
		off(b.seconds, b.volts)
		if v := p.vth - slope*r.farads*p.rth; v > a.volts && v < b.volts {
			off(a.seconds+r.farads*p.rth*math.Log((p.vth-a.volts)/(p.vth-v)), v)
		}
	}
	return most / (last.volts - first.volts)
}

// rampDeparture returns the largest departure of an exponential charging curve
// from the straight line between its ends, relative to the swing. With L = ln of
// the ratio of charging currents at the two ends the curve is
// (1 - e^(-L t))/(1 - e^(-L)) for t from 0 to 1; the departure is greatest where
// its slope is 1. For small L it is L/8 (series, derived).
func rampDeparture(l float64) float64 {
	if l < 1e-3 {
		return max(l, 0) / 8
	}
	whole := -math.Expm1(-l)
	return (1-whole/l)/whole - math.Log(l/whole)/l
}
