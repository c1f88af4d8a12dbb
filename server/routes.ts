import type { Services } from './http/route.ts';
import {
  acceptInvitation,
  checkInvitation,
  createInvitation,
  listInvitations,
  makeInvitationLink,
  resendInvitation,
  revokeInvitation,
} from './services/accounts/invitations.ts';
import { listPeople, makePersonLink, updatePerson } from './services/accounts/people.ts';
import { checkSetUp, finishSetUp } from './services/accounts/setup.ts';
import { keepDesign, listDesigns, readDesign, removeDesign, updateDesign } from './services/designs.ts';
import { listSaves, readSave } from './services/draft-saves.ts';
import { saveText } from './services/draft-text.ts';
import { discardDraft, listDrafts, readDraft, setAuthors, startDraft } from './services/drafts.ts';
import { keepInputs, readInputs } from './services/inputs.ts';
import { dismissNotice, readMe } from './services/me.ts';
import { listRecipes, readRecipe, readText } from './services/recipes.ts';
import { sendBack, sendDraft, takeBack } from './services/review-acts.ts';
import { listReviews, readReview } from './services/reviews.ts';
import type { RecipeSearch } from './services/search.ts';
import { signOff } from './services/sign-off.ts';
import { signOffSupplied } from './services/supplied-sign-off.ts';
import { readTeamSettings, updateTeam } from './services/team.ts';
import { readAudit, readMail } from './services/team-log.ts';

/** Every endpoint on one page: its name in the contract (method, path and gate stand there) and the service behind it. */
export function createServices(search: RecipeSearch): Services {
  return {
    'me.read': { act: readMe },
    'me.dismissNotice': { act: dismissNotice },

    'setup.check': { act: checkSetUp },
    'setup.finish': { act: finishSetUp },
    'invitations.check': { act: checkInvitation },
    'invitations.accept': { act: acceptInvitation },

    'invitations.list': { act: listInvitations },
    'invitations.create': { act: createInvitation },
    'invitations.resend': { act: resendInvitation },
    'invitations.revoke': { act: revokeInvitation },
    'invitations.makeLink': { act: makeInvitationLink, sealsAnswer: true },

    'people.list': { act: listPeople },
    'people.update': { act: updatePerson },
    'people.makeLink': { act: makePersonLink, sealsAnswer: true },

    'team.read': { act: readTeamSettings },
    'team.update': { act: updateTeam },
    'team.mail': { act: readMail },
    'team.audit': { act: readAudit },

    'recipes.list': { act: listRecipes },
    'recipes.search': search.service,
    'recipes.read': { act: readRecipe },
    'recipes.text': { act: readText },
    'recipes.signOffSupplied': signOffSupplied(search),

    'inputs.read': { act: readInputs },
    'inputs.keep': { act: keepInputs },

    'drafts.list': { act: listDrafts },
    'drafts.start': { act: startDraft },
    'drafts.read': { act: readDraft },
    'drafts.saveText': { act: saveText, keepsFailures: true },
    'drafts.saves': { act: listSaves },
    'drafts.readSave': { act: readSave },
    'drafts.setAuthors': { act: setAuthors },
    'drafts.discard': { act: discardDraft },
    'drafts.send': sendDraft,
    'drafts.takeBack': { act: takeBack },

    'reviews.list': { act: listReviews },
    'reviews.read': { act: readReview },
    'reviews.signOff': signOff(search),
    'reviews.sendBack': { act: sendBack },

    'designs.list': { act: listDesigns },
    'designs.keep': { act: keepDesign },
    'designs.read': { act: readDesign },
    'designs.update': { act: updateDesign },
    'designs.remove': { act: removeDesign },
  };
}
