// Package beam analyses straight members in bending: linear-elastic,
// Euler-Bernoulli, exact for piecewise linear loads, with analytic extremes.
//
// The data's way through the package:
//
//	Beam, []Case ─ check ─▶ stations (supports, hinges, steps, load ends)
//	  ─ elements between supports and hinges ─▶ banded stiffness, factorised once
//	  ─ one solution per case ─▶ Response: polynomials of V, M and deflection per piece
//	  ─ []Term (factors, fixed or free) ─▶ Envelope: extremes by span, reactions
//	[]Train ─ AnalyseTrains ─▶ influence lines ─▶ bounds at each place: one more case for a Term
//	Train ─ MoveTrain ─▶ Passage: extremes with the train's position and direction
//	[]Mass ─ Frequency ─▶ first natural frequency; Layout, Goal ─ PlaceSupports ─▶ best positions
//	Beam cut at its supports ─ Split ─▶ handbook pieces ─ Compare ─▶ signed ratios
//
// Signs: x runs to the right from the left end, loads and deflection are
// positive down, couples, slopes and rotations positive clockwise, reactions
// positive up, moments positive sagging, shear positive where the part to the
// left is pushed up: dV/dx = -w, dM/dx = V, EI d²v/dx² = -M.
//
// Units are SI throughout: m, N, N/m, N.m, N.m², rad.
package beam
