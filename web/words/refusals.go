package words

import "ratehouse/trial/sheet"

// What the laboratory refuses, by the code of store.Error and of a refused reading: what is wrong, and
// what would be right. A test reads the codes out of the sources of store.
var _ = []struct{}{
	// Anybody, any form.
	fault("not_found", "There is no such thing.", "Cela n’existe pas.", "Das gibt es nicht."),
	fault("forbidden", "Your account has no right to do this.", "Votre compte n’a pas le droit de faire cela.", "Ihr Konto hat kein Recht dazu."),
	fault("unauthenticated", "Please sign in.", "Veuillez vous connecter.", "Bitte melden Sie sich an."),
	fault("session_over", "You have been signed out. Please sign in again.", "Vous avez été déconnecté. Veuillez vous reconnecter.", "Sie wurden abgemeldet. Bitte melden Sie sich wieder an."),
	fault("log_in_failed", "This account and this password do not belong together. Check both; capital letters count in the password.", "Ce compte et ce mot de passe ne vont pas ensemble. Vérifiez les deux ; les majuscules comptent dans le mot de passe.", "Dieses Konto und dieses Passwort gehören nicht zusammen. Prüfen Sie beides; im Passwort zählt Groß- und Kleinschreibung."),
	fault("unknown_token", "This token is not valid, or it has ended.", "Ce jeton n’est pas valable, ou il a expiré.", "Dieses Token gilt nicht oder ist abgelaufen."),
	fault("between", "This must lie between {least} and {most}.", "La valeur doit être comprise entre {least} et {most}.", "Der Wert muss zwischen {least} und {most} liegen."),
	fault("key_reused", "The same request key came with other content. Use a new key for a new request.", "La même clé de demande est venue avec un autre contenu. Prenez une nouvelle clé.", "Derselbe Anfrageschlüssel kam mit anderem Inhalt. Nehmen Sie einen neuen Schlüssel."),
	fault("request_under_way", "The same request is still under way. Wait for its answer.", "La même demande est encore en cours. Attendez sa réponse.", "Dieselbe Anfrage läuft noch. Warten Sie auf ihre Antwort."),

	// Accounts, tokens, set-up.
	fault("account_name_form", "An account’s name has up to 40 small letters, digits, points, underscores or hyphens and begins with a letter or digit.", "Le nom d’un compte a 40 minuscules, chiffres, points, tirets bas ou traits d’union au plus et commence par une lettre ou un chiffre.", "Der Name eines Kontos hat höchstens 40 Kleinbuchstaben, Ziffern, Punkte, Unterstriche oder Bindestriche und beginnt mit Buchstabe oder Ziffer."),
	fault("account_name_taken", "There is an account {name} already. Choose another name.", "Il y a déjà un compte {name}. Choisissez un autre nom.", "Es gibt schon ein Konto {name}. Wählen Sie einen anderen Namen."),
	fault("account_disabled", "The account {name} is closed.", "Le compte {name} est fermé.", "Das Konto {name} ist gesperrt."),
	fault("no_account", "There is no account {name}.", "Il n’y a pas de compte {name}.", "Es gibt kein Konto {name}."),
	fault("no_token", "There is no such token.", "Ce jeton n’existe pas.", "Dieses Token gibt es nicht."),
	fault("unknown_role", "Choose one of the roles.", "Choisissez l’un des rôles.", "Wählen Sie eine der Rollen."),
	fault("unknown_scope", "{scope} is no scope of a token.", "{scope} n’est pas une portée de jeton.", "{scope} ist kein Bereich eines Tokens."),
	fault("unknown_language", "Choose English, French or German.", "Choisissez l’anglais, le français ou l’allemand.", "Wählen Sie Englisch, Französisch oder Deutsch."),
	fault("password_short", "A password has at least {least} characters. Several words together are easy to keep in mind.", "Un mot de passe a au moins {least} caractères. Plusieurs mots à la suite se retiennent bien.", "Ein Passwort hat mindestens {least} Zeichen. Mehrere Wörter hintereinander merkt man sich leicht."),
	fault("password_long", "A password has at most {most} characters.", "Un mot de passe a {most} caractères au plus.", "Ein Passwort hat höchstens {most} Zeichen."),
	fault("ends_before_now", "The end must lie in the future.", "La fin doit être dans le futur.", "Das Ende muss in der Zukunft liegen."),
	fault("diameter_or_area", "Give either the diameter or the area.", "Indiquez soit le diamètre, soit la surface.", "Geben Sie entweder den Durchmesser oder die Fläche an."),
	fault("no_holder", "There is no holder {code} here. Its number stands on it.", "Il n’y a pas de porte-mouvements {code} ici. Son numéro y est inscrit.", "Einen Werkhalter {code} gibt es hier nicht. Seine Nummer steht auf ihm."),
	fault("no_such_place", "The holder has no place {place}.", "Le porte-mouvements n’a pas d’emplacement {place}.", "Der Werkhalter hat keinen Platz {place}."),

	// Registering a batch.
	fault("unknown_calibre", "There is no calibre {code}.", "Il n’y a pas de calibre {code}.", "Es gibt kein Kaliber {code}."),
	fault("unknown_depositor", "There is no depositor {code}.", "Il n’y a pas de déposant {code}.", "Es gibt keinen Auftraggeber {code}."),

	// Finding things.
	fault("no_certificate", "There is no paper {number}.", "Il n’y a pas de document {number}.", "Es gibt kein Papier {number}."),
	fault("no_remark", "There is no such remark.", "Cette observation n’existe pas.", "Diese Bemerkung gibt es nicht."),

	fault("no_such_paper", "There is no such paper, or its code does not match.", "Ce document n’existe pas, ou son code ne correspond pas.", "Dieses Papier gibt es nicht, oder sein Code passt nicht."),
	fault("cursor_unknown", "This page of the list is not there any more. Begin the list again.", "Cette page de la liste n’existe plus. Recommencez la liste.", "Diese Seite der Liste gibt es nicht mehr. Beginnen Sie die Liste von vorn."),

	// Rounds, ends, remarks.
	fault("unknown_state", "Choose one of the states of a remark.", "Choisissez l’un des états d’une observation.", "Wählen Sie einen der Zustände einer Bemerkung."),
	fault("remark_closed", "This remark is closed. Write a new one.", "Cette observation est close. Écrivez-en une nouvelle.", "Diese Bemerkung ist abgeschlossen. Schreiben Sie eine neue."),

	// Releasing.
	fault("no_signing_key", "This program has no key to sign papers with. The laboratory manager sets it up.", "Ce programme n’a pas de clé pour signer. La direction du laboratoire la met en place.", "Dieses Programm hat keinen Schlüssel zum Unterzeichnen. Die Laborleitung richtet ihn ein."),
	fault("revoked_already", "{number} is revoked already.", "{number} est déjà révoqué.", "{number} ist schon widerrufen."),
	fault("paper_code_form", "The code of a paper has the form it is printed in.", "Le code d’un document a la forme imprimée.", "Der Code eines Papiers hat die gedruckte Form."),

	// Readings.
	fault("number_empty", "The value is missing.", "La valeur manque.", "Der Wert fehlt."),
	fault("number_form", "{value} is not a number.", "{value} n’est pas un nombre.", "{value} ist keine Zahl."),
	fault("number_fine", "{value} is finer than 0.001; nothing is rounded.", "{value} est plus fin que 0,001 ; rien n’est arrondi.", "{value} ist feiner als 0,001; gerundet wird nicht."),
	fault("number_comma", "{value} is ambiguous: its comma may be a decimal comma or part thousands.", "{value} est ambigu : la virgule peut être décimale ou séparer les milliers.", "{value} ist mehrdeutig: Das Komma kann Dezimalkomma oder Tausendertrenner sein."),
	fault("number_range", "{value} is too large.", "{value} est trop grand.", "{value} ist zu groß."),
}

// Why a movement cannot be released now, by code.
var _ = []struct{}{
	fault("hold:no_movement", "no such movement", "mouvement inconnu", "kein solches Werk"),
	fault("hold:open", "readings are missing", "des relevés manquent", "Ablesungen fehlen"),
	fault("hold:running", "still in trial", "encore à l’épreuve", "noch in Prüfung"),
	fault("hold:withdrawn", "withdrawn by the depositor", "retiré par le déposant", "vom Auftraggeber zurückgezogen"),
	fault("hold:void", "void", "annulé", "ungültig"),
	fault("hold:no_verdict", "the programme sets no limits", "le programme ne fixe pas de limites", "das Prüfprogramm setzt keine Grenzwerte"),
	fault("hold:released_already", "released already", "déjà émis", "schon freigegeben"),
	fault("hold:certified_elsewhere", "holds a valid certificate from another batch", "a un bulletin valable d’un autre lot", "hat einen gültigen Gangschein aus einem anderen Los"),
	fault("hold:open_remark", "a remark is open", "une observation est ouverte", "eine Bemerkung ist offen"),
	fault("hold:four_eyes", "another person must release it: you corrected or decided something on it, or entered much of it", "à émettre par une autre personne : vous y avez corrigé ou décidé, ou beaucoup saisi", "muss jemand anderes freigeben: Sie haben daran berichtigt, entschieden oder viel eingegeben"),
	fault("hold:no_anchor", "the minute of its states is not anchored", "la minute de ses états n’est pas ancrée", "die Minute seiner Stände ist nicht verankert"),
	fault("hold:read_ahead", "a reading lies ahead of the laboratory’s clock: wait a minute", "un relevé est en avance sur l’horloge du laboratoire : attendez une minute", "eine Ablesung liegt vor der Uhr des Labors: eine Minute warten"),
}

// Hold says why a movement cannot be released now.
func (p *Printer) Hold(code string) string { return p.Fault("hold:"+code, nil) }

var _ = []struct{}{
	line(sheet.BadSerial, "{0} begins with {1}; spreadsheets take such a text for a formula", "{0} commence par {1} ; un tableur prend un tel texte pour une formule", "{0} beginnt mit {1}; Tabellenprogramme halten das für eine Formel"),
	line(sheet.RepeatedCell, "{0} has a value for this round on line {1} already", "{0} a déjà une valeur pour ce relevé à la ligne {1}", "{0} hat in Zeile {1} schon einen Wert für diese Runde"),
}

var (
	refusedAt   = say3("Line {line}, {column}: {why}", "Ligne {line}, {column} : {why}", "Zeile {line}, {column}: {why}")
	refusedLine = say2("Line {line}: {why}", "Ligne {line} : {why}", "Zeile {line}: {why}")
)

// Refused says why a value, a line of a file or of a pasted list is refused, and where.
func (p *Printer) Refused(r *sheet.Refusal) string {
	why := ListRefusal(r)
	switch {
	case r.Line == 0 && r.Column == "":
		return p.Say(why)
	case r.Line == 0:
		return p.Say(FaultLine.With(r.Column, why))
	case r.Column == "":
		return p.Say(refusedLine.With(r.Line, why))
	}
	return p.Say(refusedAt.With(r.Line, r.Column, why))
}
