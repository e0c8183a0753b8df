(** * Endless claims: names in a state

    What a step of the sweep does depends on which of two names is the smaller one, and on
    nothing else of them. So under other names, in the same order, it does the same. *)

From Coq Require Import Bool List PArith Lia.
From Certify Require Import Statement Question Edges Sweep.
Import ListNotations.

Section Rename.

Variable r : vertex -> vertex.
Hypothesis rises : forall a b, (a < b)%positive -> (r a < r b)%positive.

Definition rename_pair (e : vertex * vertex) : vertex * vertex := (r (fst e), r (snd e)).
Definition rename (s : state) : state := map rename_pair s.

Lemma rename_eqb : forall a b, (r a =? r b)%positive = (a =? b)%positive.
Proof using rises.
  intros a b. destruct (Pos.eqb_spec a b) as [-> | differ]; [apply Pos.eqb_refl |].
  apply Pos.eqb_neq. intros E. assert (less : (a < b \/ b < a)%positive) by lia.
  destruct less as [less | less]; apply rises in less; lia.
Qed.

Lemma rename_ltb : forall a b, (r a <? r b)%positive = (a <? b)%positive.
Proof using rises.
  intros a b. destruct (Pos.ltb_spec a b) as [less | more].
  - apply Pos.ltb_lt. now apply rises.
  - apply Pos.ltb_ge. destruct (Pos.eqb_spec a b) as [-> | differ]; [lia |].
    assert (less : (b < a)%positive) by lia. apply rises in less. lia.
Qed.

Lemma rename_injective : forall a b, r a = r b -> a = b.
Proof using rises. intros a b E. apply Pos.eqb_eq. now rewrite <- rename_eqb, E, Pos.eqb_refl. Qed.

Lemma ordered_rename : forall e, ordered (rename_pair e) = rename_pair (ordered e).
Proof using rises.
  intros [a b]. unfold ordered, rename_pair. cbn [fst snd]. rewrite rename_ltb.
  now destruct (a <? b)%positive.
Qed.

Lemma place_rename : forall p s, place (rename_pair p) (rename s) = rename (place p s).
Proof using rises.
  intros p s. induction s as [| q s IH]; [reflexivity |].
  cbn [rename map place rename_pair fst snd]. rewrite rename_ltb.
  destruct (_ <? _)%positive; [reflexivity |]. cbn [map]. f_equal. exact IH.
Qed.

Lemma take_rename : forall u s,
  take (r u) (rename s) = option_map (fun x => (r (fst x), rename (snd x))) (take u s).
Proof using rises.
  intros u s. induction s as [| [a b] s IH]; [reflexivity |].
  cbn [rename map rename_pair fst snd take]. rewrite !rename_eqb.
  destruct (a =? u)%positive; [reflexivity |]. destruct (b =? u)%positive; [reflexivity |].
  unfold rename in IH. rewrite IH. now destruct (take u s) as [[c rest] |].
Qed.

Definition rename_choice (x : vertex * bool) : vertex * bool := (r (fst x), snd x).

Lemma choices_rename : forall v full us hand s,
  choices (r v) full (option_map r hand) (rename s) (map rename_choice us)
  = map rename (choices v full hand s us).
Proof using rises.
  intros v full us. induction us as [| [u must] us IH]; intros hand s.
  - now destruct hand.
  - cbn [map rename_choice fst snd choices].
    assert (without : (if must then [] else
        choices (r v) full (option_map r hand) (rename s) (map rename_choice us))
      = map rename (if must then [] else choices v full hand s us))
      by (destruct must; [reflexivity | apply IH]).
    rewrite without. destruct hand as [a |]; cbn [option_map]; [| reflexivity].
    rewrite rename_eqb. destruct (a =? u)%positive.
    + destruct s as [| p s]; [| reflexivity]. cbn [rename map]. destruct full; [| reflexivity].
      rewrite map_app. f_equal. apply (IH None []).
    + rewrite take_rename. destruct (take u s) as [[b rest] |]; [| reflexivity].
      cbn [option_map fst snd]. rewrite map_app, rename_eqb. f_equal.
      destruct (a =? v)%positive; [apply (IH (Some b)) |].
      change (r a, r b) with (rename_pair (a, b)).
      rewrite ordered_rename, place_rename. apply (IH None).
Qed.

Lemma advance_rename : forall v full fresh us s,
  advance (r v) full (map r fresh) (map rename_choice us) (rename s)
  = map rename (advance v full fresh us s).
Proof using rises.
  intros v full fresh us s. unfold advance.
  assert (E : fold_right (fun u => place (u, u)) (rename s) (map r fresh)
            = rename (fold_right (fun u => place (u, u)) s fresh)).
  { induction fresh as [| u fresh IH]; [reflexivity |].
    cbn [map fold_right]. rewrite IH. apply (place_rename (u, u)). }
  rewrite E, take_rename. destruct (take v _) as [[a rest] |]; cbn [option_map fst snd].
  - apply (choices_rename v full us (Some a)).
  - apply (choices_rename v full us None).
Qed.

End Rename.
