import gwp from '../../data/gwp.json';
import joints from '../../data/joints.json';
import refrigerants from '../../data/refrigerants.json';
import r22 from '../../data/saturation/R-22.json';
import r32 from '../../data/saturation/R-32.json';
import r123 from '../../data/saturation/R-123.json';
import r134a from '../../data/saturation/R-134a.json';
import r290 from '../../data/saturation/R-290.json';
import r404A from '../../data/saturation/R-404A.json';
import r407A from '../../data/saturation/R-407A.json';
import r407C from '../../data/saturation/R-407C.json';
import r407F from '../../data/saturation/R-407F.json';
import r410A from '../../data/saturation/R-410A.json';
import r422D from '../../data/saturation/R-422D.json';
import r438A from '../../data/saturation/R-438A.json';
import r448A from '../../data/saturation/R-448A.json';
import r449A from '../../data/saturation/R-449A.json';
import r450A from '../../data/saturation/R-450A.json';
import r452A from '../../data/saturation/R-452A.json';
import r452B from '../../data/saturation/R-452B.json';
import r454A from '../../data/saturation/R-454A.json';
import r454B from '../../data/saturation/R-454B.json';
import r454C from '../../data/saturation/R-454C.json';
import r455A from '../../data/saturation/R-455A.json';
import r466A from '../../data/saturation/R-466A.json';
import r507A from '../../data/saturation/R-507A.json';
import r513A from '../../data/saturation/R-513A.json';
import r600a from '../../data/saturation/R-600a.json';
import r717 from '../../data/saturation/R-717.json';
import r744 from '../../data/saturation/R-744.json';
import r1233zdE from '../../data/saturation/R-1233zd(E).json';
import r1234yf from '../../data/saturation/R-1234yf.json';
import r1234zeE from '../../data/saturation/R-1234ze(E).json';
import r1270 from '../../data/saturation/R-1270.json';
import tubes from '../../data/tubes.json';
import type { RawTables } from './check-tables.ts';

/**
 * Every table of `data/` as it stands, not yet checked. For the server and for tests: some 150 kB, so the browser
 * never imports this file but loads one refrigerant's saturation table at a time.
 */
export const everyTable: RawTables = {
  refrigerants,
  gwp,
  tubes,
  joints,
  saturation: {
    'R-123': r123,
    'R-1233zd(E)': r1233zdE,
    'R-1234yf': r1234yf,
    'R-1234ze(E)': r1234zeE,
    'R-1270': r1270,
    'R-134a': r134a,
    'R-22': r22,
    'R-290': r290,
    'R-32': r32,
    'R-404A': r404A,
    'R-407A': r407A,
    'R-407C': r407C,
    'R-407F': r407F,
    'R-410A': r410A,
    'R-422D': r422D,
    'R-438A': r438A,
    'R-448A': r448A,
    'R-449A': r449A,
    'R-450A': r450A,
    'R-452A': r452A,
    'R-452B': r452B,
    'R-454A': r454A,
    'R-454B': r454B,
    'R-454C': r454C,
    'R-455A': r455A,
    'R-466A': r466A,
    'R-507A': r507A,
    'R-513A': r513A,
    'R-600a': r600a,
    'R-717': r717,
    'R-744': r744,
  },
};
