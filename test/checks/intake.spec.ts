import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { readStl } from '../../workers/intake/stl-reader.js';
import { inspectMesh, type Inspection } from '../../workers/measuring/mesh-report.js';
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

/** Files that are read and shown but not planned. Counts are those of the folder's index. */
const unsound: Record<string, RegExp> = {
  b06_blobby_shuffled: /^The facets do not agree .* 3 069 edges/,
  b17_plane_holes: /341 edges with a facet on one side only/,
  c17_all_degenerate: /39 edges with a facet on one side only/,
  c23_every_facet_twice: /36 edges shared by more than two facets\. 24 facets repeat others/,
  f05_multibody: /12 edges whose two facets face opposite ways/,
  f06_triangle_empty_solid: /3 edges with a facet on one side only/,
  m10_featuretype: /576 edges with a facet on one side only/,
  s22_30pct_flipped: /14 656 edges whose two facets face opposite ways/,
  's23_jittered_cracks_1e-4': /69 184 edges with a facet on one side only/,
  s24_pinholes: /174 edges with a facet on one side only/,
};

const hollows: Record<string, number> = {
  s01_hollow_spot_3mm_closed: 1,
  s10_cube_void: 1,
  s11_matryoshka_3_shells: 2,
};

function inspect(name: string): Inspection {
  const bytes = readFileSync(`${folder}/${name}.stl`);
  const fileName = `${name}.stl`;
  return inspectMesh({ reading: readStl(bytes, fileName), fileName, fileBytes: bytes.length });
}

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

    it.each(names.filter((name) => name in unsound))('shows %s but plans nothing', (name) => {
      const { report, solid, shown } = inspect(name);
      expect(report.plannable).toBe(false);
      expect(report.refusal).toMatch(unsound[name]!);
      expect(solid).toBeNull();
      expect(shown.indices.length).toBe(3 * report.triangles);
    });

    const sound = names.filter((name) => !(name in unreadable) && !(name in unsound));
    it.each(sound)('makes a solid of %s that manifold-3d agrees with', async (name) => {
      const { report, solid } = inspect(name);
      expect(report.refusal).toBeNull();
      expect(report.cavities).toBe(hollows[name] ?? 0);
      expect(report.turnedOutward).toBe(name === 's21_all_flipped');
      const { withSolids } = await loadSolids();
      const volume = withSolids(({ Manifold, Mesh, keep }) => {
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
