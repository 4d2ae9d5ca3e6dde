import { PRODUCTION_SECTION } from './parse-runbook';

/** What a new runbook begins with: every part that the gate asks for, with a word on what belongs there. */
export const RUNBOOK_TEMPLATE = `When it helps, and how one recognises that this is the case.

## ${PRODUCTION_SECTION}

- The documentation of your version comes first: name its section here.
- Your team's change control comes next: say who has to know.

### 1. Is this the case at hand? (check)

Say what one has to see before anything is changed.

\`\`\`sql
select 1;
\`\`\`

### 2. What is done (action)

One statement a step, with \`{{names}}\` for what differs from case to case.

### 3. Did it help? (verify)

Say what one has to see now, and how long to wait for it.

### 4. The way back (undo)

How the change is taken back, and how one sees that it was.
`;
