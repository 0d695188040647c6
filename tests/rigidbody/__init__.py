"""A brute-force rigid-body simulation of machining routes: the outside check of the ledger.

It shares no code with the package under test and knows no first-order formula.  Every hold is turned into an exact
pose (4x4 homogeneous transforms, Newton on the physical statements), every cut is geometry at its real place, every
figure is measured on that geometry the way a metrologist would measure it.  numpy only.

Frames and signs (used everywhere in this package; lengths mm, angles rad)
  part frame     x through the part's mark, z along the part.  Transverse vectors are complex numbers x + iy, so
                 directions count counter-clockwise from the mark, seen from the part's +z end.
  machine frame  Z along the machine axis, out of the spindle towards the tool; directions count counter-clockwise seen
                 from the tool side.  The frame turns with the spindle: the part rests in it, tool and dial go round.
  standing       looks_at_tool = +1: machine = Rz(insertion) . part;  -1: the part is turned end for end about a
                 transverse axis first, machine = Rz(insertion) . Rx(180 deg) . part.  In both cases the part's mark
                 stands at the machine angle `insertion`, and nominally the part's origin is at machine Z = 0, so that
                 a place z of the part stands at Z = looks_at_tool * z.
  errors         "datum minus machine axis": a hold's offset is the place of the datum's axis in the machine frame, its
                 lean the slope of the datum (for a face: of its normal, n = (lean, 1)) in the machine frame.
  lean           the complex slope dx/dz + i dy/dz of an axis, or of a face's normal: a face is z = a - Re(conj(lean) p).
  high_at        the part direction that points at the probe when the metal is nearest the probe: outside surface:
                 largest radius; bore: smallest radius; face: furthest out on the side the face looks to.
  gaps           gap j is the j-th cut, at the machine angle of gap 1 plus 2 pi (j - 1)/N, counter-clockwise seen from
                 the tool side.  `ccw` and `cw` flank: the flank on that side of the gap, seen from the +z end.

frames      homogeneous transforms, lines, planes
route       the neutral input: parts, setups, joins, questions
dial        what an indicator reads in one turn
pose        how a part comes to stand (Newton on the physical statements)
machining   runs a route, keeps every made surface
measure     figures on the finished part
random_routes   varied legal routes whose second-order terms are small
"""
