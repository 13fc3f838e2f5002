import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { type Inspection, inspectFile } from '../../workers/inspecting/inspect-file.js';
import { readModel } from '../../workers/intake/model-reader.js';
import { findCrossings } from '../../workers/measuring/find-crossings.js';
import { buildBvh } from '../../workers/measuring/triangle-bvh.js';
import { JobRefusal } from '../../workers/runtime/job-refusal.js';
import { loadSolids } from '../../workers/solids/solid-kernel.js';

/** Open test meshes that lie beside the repository on some machines; never copied into it. */
const folder = fileURLToPath(new URL('../../../shared/meshes/stl', import.meta.url));

/** Files that cannot be read as a whole. */
const unreadable: Record<string, RegExp> = {
  c01_truncated_half: /says that it holds 6 720 facets but ends after 3 360/,
  c02_count_too_large: /says that it holds 7 720 facets but ends after 6 720/,
  c03_count_too_small: /says that it holds 5 720 facets but holds 6 720/,
  c04_nan_vertex: /1 coordinate that is not a number/,
  c05_inf_vertex: /1 coordinate that is not a number/,
  c06_ascii_cut_mid_facet: /ends in the middle of/,
  c07_ascii_decimal_comma: /decimal comma \(“160,500” in line 4\)/,
  c12_zero_bytes: /is empty/,
  c13_83_bytes: /too short to be an STL file \(83 bytes\)/,
  c14_html_error_page: /web page/,
  c18_count_4294967295_no_data: /4 294 967 295 facets but holds none/,
  c19_ascii_1e400: /1 coordinate that is not a number or infinite/,
  c20_ascii_quads: /facet of 4 corners in line 8/,
  'c22_scale_1e-36': /longest side is 3\.2e-34/,
  c24_gzip: /gzip/,
  f07_empty_ascii: /without a single facet/,
  f08_empty_bin: /without a single facet/,
};

/** Files of which a solid is made without a question, by mending. Counts are those of the folder's index. */
const mended: Record<string, string[]> = {
  b06_blobby_shuffled: ['turn-facets'],
  c23_every_facet_twice: ['drop-duplicates'],
  f05_multibody: ['turn-facets', 'turn-shells'],
  m06_box_assembly: ['unite'],
  m10_featuretype: ['weld'],
  o20_bones: ['unite'],
  s21_all_flipped: ['turn-shells'],
  s22_30pct_flipped: ['turn-facets'],
  's23_jittered_cracks_1e-4': ['weld'],
  s24_pinholes: ['fill-holes'],
};

/** Files about which something is asked first. */
const asked: Record<string, RegExp> = {
  b17_plane_holes: /^\d+ holes are too large to be closed without asking/,
  s20_overlapping_union_needed: /the volume \d/,
};

/** Files that hold nothing that could be a solid. */
const hopeless: Record<string, RegExp> = {
  c17_all_degenerate: /no volume/,
  f06_triangle_empty_solid: /no volume/,
};

const hollows: Record<string, number> = {
  s01_hollow_spot_3mm_closed: 1,
  s10_cube_void: 1,
  s11_matryoshka_3_shells: 2,
};

function inspect(name: string): Inspection {
  const bytes = new Uint8Array(readFileSync(`${folder}/${name}.stl`));
  return inspectFile({ bytes, fileName: `${name}.stl` }, { solids });
}

const solids = await loadSolids();
const isThere = existsSync(folder);
const names = isThere
  ? readdirSync(folder)
      .filter((file) => file.endsWith('.stl'))
      .map((file) => file.slice(0, -4))
  : [];

describe.skipIf(!isThere)(
  `intake of the open test meshes${isThere ? '' : ' (skipped: the folder is not on this machine)'}`,
  () => {
    it.each(names.filter((name) => name in unreadable))('refuses %s with its reason', (name) => {
      try {
        inspect(name);
      } catch (error) {
        expect(error).toBeInstanceOf(JobRefusal);
        expect((error as Error).message).toMatch(unreadable[name]!);
        return;
      }
      throw new Error('It was read.');
    });

    it.each(names.filter((name) => name in hopeless))('refuses %s, but shows it', (name) => {
      const { report, solid, shown } = inspect(name);
      expect(report.refusal).toMatch(hopeless[name]!);
      expect(solid).toBeNull();
      expect(shown.indices.length).toBeGreaterThan(0);
    });

    it.each(names.filter((name) => name in asked))('asks about %s', (name) => {
      const { report } = inspect(name);
      expect(report.plannable).toBe(false);
      expect(report.refusal).toBeNull();
      expect(report.asks[0]!.sentence).toMatch(asked[name]!);
    });

    it('counts the crossing pairs of the bones that the index counts', () => {
      const { mesh } = readModel(new Uint8Array(readFileSync(`${folder}/o20_bones.stl`)), 'bones');
      expect(findCrossings(mesh, buildBvh(mesh))).toMatchObject({ pairs: 366, complete: true });
    });

    const solid = names.filter(
      (name) => !(name in unreadable) && !(name in hopeless) && !(name in asked),
    );
    it.each(solid)('makes a solid of %s that manifold-3d agrees with', async (name) => {
      const { report, solid } = inspect(name);
      expect(report.refusal).toBeNull();
      expect(report.asks).toEqual([]);
      expect(report.mending.map((step) => step.kind)).toEqual(mended[name] ?? []);
      expect(report.cavities).toBe(hollows[name] ?? 0);
      expect(report.turnedOutward).toBe(report.mending.some((step) => step.kind === 'turn-shells'));
      expect(report.measures!.crossings).toEqual({ pairs: 0, complete: true });
      const volume = solids.withSolids(({ Manifold, Mesh, keep }) => {
        // About the middle of the box: a float32 volume far from the origin has no digits left.
        const vertProperties = Float32Array.from(
          solid!.positions,
          (value, i) => value - report.min[i % 3]! - report.size[i % 3]! / 2,
        );
        const mesh = new Mesh({ numProp: 3, vertProperties, triVerts: solid!.indices });
        return keep(new Manifold(mesh)).volume();
      });
      expect(Math.abs(volume / report.volume - 1)).toBeLessThan(1e-5);
    });
  },
);
