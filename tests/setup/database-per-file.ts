// Before each *.db.test.ts: a database of the file's own, and the settings the application's modules read.
import { cloneTemplate } from './database.ts'

process.env.DATABASE_URL = await cloneTemplate()
process.env.BASE_URL = 'http://127.0.0.1:3000'
process.env.PORT = '3000'
process.env.SESSION_SECRET = 'only-for-tests-only-for-tests-only-for-tests'
process.env.OIDC_ISSUER = 'http://127.0.0.1:1/'
process.env.OIDC_CLIENT_ID = 'rowfall'
process.env.OIDC_CLIENT_SECRET = 'only-for-tests'
process.env.ROLE_GROUPS =
  'condenser-engineers=engineer,condenser-leads=lead,condenser-analysts=analyst,condenser-administrators=administrator'
