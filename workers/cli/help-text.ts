/** What --help prints. */
export const helpText = `seamwright plan MODEL.stl --envelope SIZE [options]

Plans where to cut a model that is larger than the printer, cuts it exactly, lays every piece on the
bed and proves the written files. Needs no server and no database.

  --envelope SIZE   usable build volume, mm: 220x220x250 is width, depth, height of a rectangular
                    bed; round:300x400 is diameter and height of a round one
  --margin MM       kept free on every side of the bed (default 0)
  --seed N          whole number; the same seed gives the same plan, byte for byte (default 1)
  --unit UNIT       what one unit of the file is: mm (default), inch, or a number of millimetres
  --out DIR         keep the pieces: DIR/pieces/P01.stl ..., DIR/manifest.json, DIR/cut-list.csv.
                    DIR is made when missing. A folder that holds anything but an earlier result of
                    this command is left alone; an earlier result is replaced as a whole. Without
                    --out the pieces are written and proven in a temporary folder that is removed
  --json            print one JSON object on standard output instead of tables
  --help            this text

Exit codes: 0 all proofs passed; 1 pieces were made but a proof failed; 2 nothing was made, and one
sentence on standard error says why.
`;
