package words

import "strings"

// Error pages.
var (
	NotFoundTitle  = say("There is nothing at this address", "Il n’y a rien à cette adresse", "Unter dieser Adresse gibt es nichts")
	NotFoundSub    = say("The address may be mistyped, or what stood here has another name.", "L’adresse est peut-être mal saisie, ou ce qui s’y trouvait porte un autre nom.", "Die Adresse ist vielleicht vertippt, oder was hier stand, heißt anders.")
	NotFoundHelp   = say("Check the address, or go on from one of the pages of the bar above.", "Vérifiez l’adresse, ou continuez depuis une page de la barre ci-dessus.", "Prüfen Sie die Adresse, oder gehen Sie von einer Seite der Leiste oben weiter.")
	NotFoundOut    = say("Check the address, or sign in and look for it from there.", "Vérifiez l’adresse, ou connectez-vous et cherchez à partir de là.", "Prüfen Sie die Adresse, oder melden Sie sich an und suchen Sie von dort aus.")
	ForbiddenTitle = say("This page is not for your account", "Cette page n’est pas pour votre compte", "Diese Seite ist nicht für Ihr Konto")
	ForbiddenSub   = say1("You are signed in as {name}.", "Vous êtes connecté comme {name}.", "Sie sind als {name} angemeldet.")
	ForbiddenHelp  = say("If you need it for your work, ask the laboratory manager for the right to it.", "Si votre travail le demande, demandez ce droit à la direction du laboratoire.", "Wenn Sie sie für Ihre Arbeit brauchen, bitten Sie die Laborleitung um das Recht dazu.")
	ConflictTitle  = say("Somebody else was first", "Quelqu’un a été plus rapide", "Jemand war schneller")
	ConflictSub    = say("What you wanted to change has changed meanwhile. Nothing of yours was saved.", "Ce que vous vouliez modifier a changé entre-temps. Rien de votre saisie n’a été enregistré.", "Was Sie ändern wollten, hat sich inzwischen geändert. Von Ihrer Eingabe wurde nichts gespeichert.")
	ConflictHelp   = say("Go back, load the page again and look at what stands there now. Your browser still has what you typed.", "Revenez en arrière, rechargez la page et regardez ce qui s’y trouve maintenant. Votre navigateur a gardé votre saisie.", "Gehen Sie zurück, laden Sie die Seite neu und sehen Sie, was jetzt dort steht. Ihr Browser hat Ihre Eingabe noch.")
	InvalidTitle   = say("This could not be accepted", "Ceci n’a pas pu être accepté", "Das konnte nicht angenommen werden")
	InvalidSub     = say("Nothing was saved.", "Rien n’a été enregistré.", "Es wurde nichts gespeichert.")
	InvalidHelp    = say("Go back and correct it. Your browser still has what you typed.", "Revenez en arrière et corrigez. Votre navigateur a gardé votre saisie.", "Gehen Sie zurück und berichtigen Sie es. Ihr Browser hat Ihre Eingabe noch.")
	BusyTitle      = say("Too many requests at once", "Trop de demandes à la fois", "Zu viele Anfragen auf einmal")
	BusyHelp       = say("Wait a moment, then try again. Nothing was saved.", "Attendez un instant, puis réessayez. Rien n’a été enregistré.", "Warten Sie einen Augenblick und versuchen Sie es dann wieder. Es wurde nichts gespeichert.")
	SignedOutTitle = say("You have been signed out", "Vous avez été déconnecté", "Sie wurden abgemeldet")
	SignedOutSub   = say("Nothing was saved, but your browser still has what you typed.", "Rien n’a été enregistré, mais votre navigateur a gardé votre saisie.", "Es wurde nichts gespeichert, aber Ihr Browser hat Ihre Eingabe noch.")
	SignedOutHelp  = say("Sign in on a new page, come back to this one, go back once and send the form again.", "Connectez-vous sur une nouvelle page, revenez ici, retournez une fois en arrière et renvoyez le formulaire.", "Melden Sie sich auf einer neuen Seite an, kommen Sie hierher zurück, gehen Sie einmal zurück und senden Sie das Formular noch einmal.")
	TooLargeTitle  = say("This is too much at once", "C’est trop à la fois", "Das ist zu viel auf einmal")
	TooLargeHelp   = say1("One request may hold {size}. Send it in smaller parts. Nothing was saved.", "Une demande peut contenir {size}. Envoyez par parties plus petites. Rien n’a été enregistré.", "Eine Anfrage darf {size} enthalten. Senden Sie es in kleineren Teilen. Es wurde nichts gespeichert.")
	MethodTitle    = say("This address cannot be used like that", "Cette adresse ne peut pas être utilisée ainsi", "Diese Adresse lässt sich so nicht benutzen")
	FaultTitle     = say("This page could not be built", "Cette page n’a pas pu être construite", "Diese Seite konnte nicht aufgebaut werden")
	FaultSub       = say("The fault is ours, not yours. It has been noted.", "L’erreur vient de nous, pas de vous. Elle a été notée.", "Der Fehler liegt bei uns, nicht bei Ihnen. Er ist vermerkt.")
	FaultHelp      = say("Readings that were shown as saved are saved.", "Les relevés affichés comme enregistrés le sont.", "Ablesungen, die als gespeichert angezeigt wurden, sind gespeichert.")
	FaultNumber    = say("Try the page again in a moment. If it stays away, give the laboratory manager this number:", "Réessayez dans un instant. Si la page ne revient pas, donnez ce numéro à la direction du laboratoire :", "Versuchen Sie es gleich noch einmal. Bleibt die Seite weg, nennen Sie der Laborleitung diese Nummer:")
	TryAgain       = say("Try again", "Réessayer", "Noch einmal versuchen")
	GoToStart      = say1("Go to {page}", "Aller à {page}", "Zu {page}")
	SignInNewPage  = say("Sign in on a new page", "Se connecter sur une nouvelle page", "Auf neuer Seite anmelden")
	CrossOrigin    = say("The request came from another site, so it was refused. Nothing was saved.", "La demande venait d’un autre site et a été refusée. Rien n’a été enregistré.", "Die Anfrage kam von einer fremden Seite und wurde abgelehnt. Es wurde nichts gespeichert.")
)

// unknownFault stands for a refusal whose code has no sentence yet; a test keeps this from happening.
var unknownFault = say1("This was refused ({code}).", "Ceci a été refusé ({code}).", "Das wurde abgelehnt ({code}).")

// faults are the sentences for the codes of store.Error, by code. Their arguments are named, because
// they come as a map.
var faults = map[string]*entry{}

// fault adds the sentence for a code: what is wrong, and what would be right.
func fault(code, en, fr, de string) struct{} {
	if faults[code] != nil {
		panic("words: two sentences for the code " + code)
	}
	faults[code] = register(-2, one(en, fr, de))
	return struct{}{}
}

// Fault says a refusal by its code and named arguments, as store.Error carries them.
func (p *Printer) Fault(code string, args map[string]string) string {
	e := faults[code]
	if e == nil {
		return p.Say(unknownFault.With(code))
	}
	form := e.forms[p.lang][0]
	pairs := make([]string, 0, 2*len(args))
	for k, v := range args {
		pairs = append(pairs, "{"+k+"}", v)
	}
	return strings.NewReplacer(pairs...).Replace(form)
}

// Refusal is the sentence for a refusal, to be said later.
func Refusal(code string, args map[string]string) Text { return refusal{code, args} }

type refusal struct {
	code string
	args map[string]string
}

func (r refusal) text(p *Printer) string { return p.Fault(r.code, r.args) }
