/** What --help prints. */
export const helpText = `seamwright plan MODEL --envelope SIZE [options]

MODEL is an STL, OBJ or 3MF file. It is mended first; what was done is listed. Then a plan is made of
where to cut it, the pieces are cut exactly and laid on the bed, and the written files are proven.
Needs no server and no database.

  --envelope SIZE   usable build volume, mm: 220x220x250 is width, depth, height of a rectangular
                    bed; round:300x400 is diameter and height of a round one. Several with + between
                    them: a piece goes to the first that holds it
  --margin MM       kept free on every side of the bed (default 0)
  --seed N          whole number; the same seed gives the same plan, byte for byte (default 1)
  --wishes FILE     what is asked of the plan, as JSON: preferences, show directions and zones,
                    keep-whole zones, locked cuts; the form is that of "wishes" in a manifest's
                    recipe, and what is left out is as usual
  --joints FILE     joints, seam bevels and marks, as JSON in the form of "joints" in a manifest's
                    recipe; none leaves the pieces plain (default: as the walls allow)
  --material NAME   PLA, PETG, ABS, ASA, TPU 95A or PA12, or a JSON file in the form of "material"
                    in a manifest's recipe: clearances, support threshold, estimates (default PLA)
  --unit UNIT       what one unit of the file is: mm, inch, or a number of millimetres (default: what
                    the file states, else mm)
  --parts LIST      of a file with several parts only these, for example 1,3 (default: all)
  --fill-holes MM   closes holes with a rim of up to this length, or all (default: pinholes only)
  --remesh CELLS    rebuilds the surface on a grid with this many cells along the longest side, for
                    files that cannot be mended otherwise; finer details vanish
  --accept          takes a mended solid whose size, or whose volume by over 0.5 %, differs from the
                    file; without it such a file is refused with the numbers
  --out DIR         keep the pieces: DIR/pieces/P01.stl ..., DIR/pins, DIR/lips, DIR/manifest.json,
                    DIR/cut-list.csv.
                    DIR is made when missing. A folder that holds anything but an earlier result of
                    this command is left alone; an earlier result is replaced as a whole. Without
                    --out the pieces are written and proven in a temporary folder that is removed
  --json            print one JSON object on standard output instead of tables
  --help            this text

Exit codes: 0 all proofs passed; 1 pieces were made but a proof failed; 2 nothing was made, and one
sentence on standard error says why.
`;
