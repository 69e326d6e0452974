// Package part holds what parts can stand: the figures of their data sheets by
// part number, each with the document it comes from and how far it can be
// trusted. What goes in is .model cards - of the embedded library, of a --parts
// file or of a netlist - and what comes out is Ratings. It knows no circuit.
//
// # How a card is read
//
// A key is the data-sheet symbol in lower case, alone or with _min, _typ or _max
// behind it. The tables of symbols (symbols_*.go) give each one its unit, its
// meaning and its sense: which side of it the maker guarantees.
//
//	Either     a spread: both ends count      eta, rbb, vbo
//	Greatest   "not more than"                ip, igt, vgt, ih
//	Least      "not less than"                iv, vgd, vdrm, pd
//	Condition  a test condition               ip_vbb, t_cold, rgk
//
// A bare symbol of a user's card is exact, min, typ and max at once (eta=0.6,
// ip=5u). On a card that is a row of a data sheet (it has a mark=), and beside
// another side of the same figure, a bare limit is its guaranteed side only: ip=5u
// the greatest, iv=4m the least. Beside its ends a bare spread is the nominal
// value. Limits are always taken on the guaranteed side; a typical value never
// becomes one.
//
// The i_min and i_max of a current source are the ends of its current, or, where a
// resistor sets it (v_per_k), of the range. Numbers are SI with the suffixes of a
// netlist; a relative figure may be written in per cent (rbb_tc_max=0.9%).
//
// # Trust
//
// mark= says how far the row can be trusted: read (in the text of the document),
// scan (in a damaged scan) or memory (seen in no document). The lists read="...",
// scan="..." and memory="..." name the figures for which that differs, whole
// (igt) or one side of them (iv_typ). A card without mark= was declared by its
// user. Texts (package, leads) say their own doubts in words.
//
// # Families
//
// classes="C106A=100 C106B,C106B1=200" makes one part of the card for each
// voltage class: same figures, with its own vdrm (and vrrm, for an SCR); further
// names follow after commas. The card's own name then stands for the family,
// without a blocking voltage, unless it is one of the classes itself. alias=
// gives a part more names. Text keys may be repeated; they add up.
package part
