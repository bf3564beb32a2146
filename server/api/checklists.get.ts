import { defineRoute } from '../http/defineRoute'
import { readBuiltIn } from '../services/checklist/readBuiltIn'

/** The checklists that a job can choose from, whole: screens read subjects and measurands from them. */
export default defineRoute({ permission: 'checklist.read' }, () => readBuiltIn())
